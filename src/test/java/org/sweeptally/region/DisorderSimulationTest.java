package org.sweeptally.region;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import java.util.TreeMap;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import org.sweeptally.event.ComponentState;
import org.sweeptally.event.EndedBody;
import org.sweeptally.event.GaveUpBody;
import org.sweeptally.event.HandoverBody;
import org.sweeptally.event.IntroductionBody;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.NeighbourPromiseBody;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.Reject;
import org.sweeptally.event.RejectReason;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/**
 * Logs of everything that can go wrong at once: the machine's invariants hold after every entry, no detection is lost
 * without a word, scans take effect in order, and a machine that is restored now and then puts out the same.
 */
class DisorderSimulationTest {

    private static final int ENTRIES = 400;

    @ParameterizedTest
    @ValueSource(longs = {1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12})
    void nothingIsLostAndNothingGoesBack(long seed) {
        Rig rig = new Rig();
        Rig restored = new Rig(rig.reader);
        Random random = new Random(seed);
        List<LogEntry> log = log(rig.reader, random);
        long sent = 0;
        for (int i = 0; i < log.size(); i++) {
            LogEntry entry = log.get(i);
            sent += entry.getBody() instanceof PartBody part ? part.getPart().getDetections().size() : 0;
            rig.apply(entry).applyAppended();
            restored.apply(entry).applyAppended();
            if (random.nextInt(20) == 0) {
                restored.machine = RegionMachine.restore(restored.machine.snapshot(), rig.reader);
            }
        }
        assertThat(restored.out.publishedBytes()).as("seed %s", seed).isEqualTo(rig.out.publishedBytes());
        assertThat(restored.out.rejects).as("seed %s", seed).isEqualTo(rig.out.rejects);
        assertThat(restored.out.findings).as("seed %s", seed).isEqualTo(rig.out.findings);
        assertThat(rig.out.counts.stream().map(c -> c.getTimeMicros()).toList()).as("seed %s", seed).isSorted();
        assertThat(accounted(rig)).as("seed %s", seed).isEqualTo(sent);
        assertThat(rig.heartbeat(1e6).getWaitingEntries()).as("seed %s", seed).isZero();
        assertThat(rig.counted(RegionCounters.Name.NEIGHBOUR_ENTRIES_PASSED)).as("seed %s", seed).isPositive();
    }

    /** Without this the claims above might hold of logs in which nothing happens. */
    @Test
    void theLogsHoldEverythingThatCanGoWrong() {
        TreeMap<String, Long> sums = new TreeMap<>();
        for (long seed = 1; seed <= 12; seed++) {
            Rig rig = new Rig();
            for (LogEntry entry : log(rig.reader, new Random(seed))) {
                rig.apply(entry).applyAppended();
            }
            rig.machine.counters().asMap().forEach((name, count) -> sums.merge(name, count, Long::sum));
            rig.out.reasons().forEach(reason -> sums.merge(reason.name(), 1L, Long::sum));
            sums.merge("TRACKS", (long) rig.out.tracks.size(), Long::sum);
        }
        sums.remove(RegionCounters.Name.WAITING_BOUND.name());
        assertThat(sums).as("%s", sums).allSatisfy((name, sum) -> assertThat(sum).as(name).isPositive());
        assertThat(sums).containsKeys(RejectReason.UNFINISHED.name(), RejectReason.PASSED.name(),
                RejectReason.LATE.name(),
                RejectReason.NO_SENSOR_POSITION.name(), RejectReason.REPEAT_CONFLICT.name());
    }

    private static long accounted(Rig rig) {
        long rejected = 0;
        for (Reject reject : rig.out.rejects) {
            rejected += reject.getReasons().get(0).getCount();
        }
        return rig.counted(RegionCounters.Name.DETECTIONS_IN_EFFECT)
                + rig.counted(RegionCounters.Name.DETECTIONS_REPEATED)
                + rejected;
    }

    private static List<LogEntry> log(TestSites.Reader reader, Random random) {
        SensorSettings north = TestSites.sensor("north-shore", 0, 2500);
        SensorSettings south = TestSites.withDisorder(TestSites.withSweep(TestSites.sensor("south-shore", 0, -2500),
                0.6), 2);
        SensorSettings boat = TestSites.withLeastInterval(TestSites.moving("pilot-boat"), 0.3);
        List<LogEntry> log = new ArrayList<>();
        int revision = 0;
        double wall = 0;
        double time = 0;
        for (int i = 0; i < ENTRIES; i++) {
            time += 0.15 * random.nextDouble();
            switch (random.nextInt(26)) {
                case 0 -> log.add(Entries.tick(wall += 6 * random.nextDouble()));
                case 1 -> log.add(Entries.mark(0, 1, wall + 3));
                case 2 -> {
                    if (revision == 0 || random.nextInt(4) == 0) {
                        List<SensorSettings> some = new ArrayList<>(List.of(north, south, boat));
                        some.remove(random.nextInt(6) % 5 % 3);
                        Site site = TestSites.withThresholds(
                                TestSites.site(++revision, some.toArray(SensorSettings[]::new)), 0.6
                                        + 0.3 * random.nextDouble(), 0.2);
                        Double from = random.nextBoolean() ? null : Double.valueOf(time + 3 * random.nextDouble());
                        log.add(Entries.settings(reader.text(site), site, from));
                    }
                }
                case 3 -> log.add(Entries.silent(List.of("north-shore", "south-shore", "pilot-boat")
                        .get(random.nextInt(3))));
                case 4 -> log.add(neighbour(random, time));
                case 5, 6 -> repeat(log, random);
                default -> log.add(part(random, time, i));
            }
        }
        if (revision == 0) {
            Site site = TestSites.site(1, north, south, boat);
            log.add(Entries.settings(reader.text(site), site));
        }
        log.add(Entries.endOfInput());
        return log;
    }

    /** An entry once more, but for older settings. */
    private static void repeat(List<LogEntry> log, Random random) {
        LogEntry entry = log.isEmpty() ? Entries.tick(0) : log.get(Math.max(0, log.size() - 1 - random.nextInt(12)));
        boolean latest = log.stream().filter(e -> e.getBody() instanceof SettingsBody).reduce(entry, (a, b) -> b)
                .equals(entry);
        if (latest || !(entry.getBody() instanceof SettingsBody)) {
            log.add(entry);
        }
    }

    private static LogEntry part(Random random, double time, int i) {
        String sensor = List.of("north-shore", "south-shore", "pilot-boat", "nobody").get(random.nextInt(37) % 4);
        // Parts share scans, since scan times are few, and come late or early now and then.
        double scanTime = Math.floor(4 * (time + (random.nextInt(8) == 0 ? 4 * random.nextGaussian() : 0))) / 4;
        Entries.PartMaker maker = Entries.part(sensor, scanTime).part(random.nextInt(4));
        maker.scan(random.nextInt(30) == 0 ? 1 : 1000 + Math.round(4 * scanTime));
        if (random.nextInt(3) > 0) {
            maker.open();
        }
        if (random.nextInt(15) == 0) {
            maker.nothingBefore(time + random.nextGaussian());
        }
        if (random.nextInt(20) == 0) {
            return maker.unusable().entry();
        }
        if (random.nextInt(10) > 0) {
            maker.from(TestSites.at(10 * time, 0));
        }
        for (int k = random.nextInt(4); k > 0; k--) {
            maker.sees(300.0 * k + 5 * time + 10 * random.nextGaussian(), 100.0 * i % 700);
        }
        return maker.entry();
    }

    private static LogEntry neighbour(Random random, double time) {
        ComponentState component = ComponentState.newBuilder()
                .setObject("north-shore-20310501T040001.000000Z-0-" + random.nextInt(3))
                .setPlaneLatitude(40)
                .setPlaneLongitude(-30)
                .setExistenceLogOdds(2)
                .setDensity(List.of())
                .setDetectability(List.of())
                .setRecentDetections(List.of())
                .setFirstSeenMicros(Entries.micros(1))
                .setLastDetectedMicros(Entries.micros(1))
                .setBornBefore(false)
                .setPublished(false)
                .build();
        Object body = switch (random.nextInt(5)) {
            case 0 -> new IntroductionBody(component);
            case 1 -> new HandoverBody(component);
            case 2 -> new EndedBody(component);
            case 3 -> new NeighbourPromiseBody(Entries.micros(time));
            default -> new GaveUpBody("east");
        };
        return LogEntry.newBuilder().setSender("east").setLogTimeMicros(Entries.micros(time + 1)).setBody(body).build();
    }
}
