package org.sweeptally.region;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.Collections;
import java.util.List;
import java.util.Random;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import org.sweeptally.event.LogEntry;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/** However the log interleaves its writers, the published record is the same. */
class ConfluenceTest {

    private static final SensorSettings NORTH = TestSites.sensor("north-shore", 0, 2500);
    private static final SensorSettings SOUTH = TestSites.withSweep(TestSites.sensor("south-shore", 500, -2500), 0.7);
    private static final SensorSettings PILOT = TestSites.withDisorder(TestSites.moving("pilot-boat"), 2.5);
    private static final List<SensorSettings> SENSORS = List.of(NORTH, SOUTH, PILOT);

    @ParameterizedTest
    @ValueSource(longs = {1, 2, 3, 4})
    void interleavingDoesNotMatter(long seed) {
        Recorded inTimeOrder = null;
        for (int shuffle = 0; shuffle < 6; shuffle++) {
            Recorded out = run(seed, shuffle);
            assertThat(out.appended).as("silences, seed %s", seed).isEmpty();
            assertThat(out.tracks).hasSizeGreaterThan(20);
            assertThat(out.rejects).hasSizeGreaterThan(1);
            if (inTimeOrder == null) {
                inTimeOrder = out;
            }
            assertThat(out.publishedBytes())
                    .as("seed %s, shuffle %s", seed, shuffle)
                    .isEqualTo(inTimeOrder.publishedBytes());
            assertThat(out.rejectSet()).isEqualTo(inTimeOrder.rejectSet());
        }
    }

    /** Shuffle 0 is the order of time, without ticks. */
    private static Recorded run(long seed, int shuffle) {
        World world = new World(seed);
        List<List<World.SentScan>> sent = new ArrayList<>();
        for (SensorSettings sensor : SENSORS) {
            sent.add(world.scansOf(sensor, 3));
        }
        Random random = new Random(1000 * seed + shuffle);
        Rig rig = new Rig();
        Site site = TestSites.site(1, SENSORS.toArray(SensorSettings[]::new));
        Site later = TestSites.withThresholds(TestSites.site(2, NORTH, PILOT), 0.8, 0.4);
        List<LogEntry> log = new ArrayList<>();
        log.add(rig.settings(site));
        log.add(rig.settings(later, 20));
        List<List<LogEntry>> queues = new ArrayList<>();
        for (int i = 0; i < sent.size(); i++) {
            boolean disorderly = SENSORS.get(i).disorderSeconds() > 0;
            queues.add(queue(sent.get(i), shuffle, disorderly, random));
        }
        log.addAll(shuffle == 0 ? byTime(queues) : merged(queues, random));
        log.add(Entries.endOfInput());
        rig.applyAll(log);
        return rig.out;
    }

    /** A sensor's parts in an order that it may have. */
    private static List<LogEntry> queue(
            List<World.SentScan> scans, int shuffle, boolean disorderly, Random random) {
        List<World.SentScan> order = new ArrayList<>(scans);
        if (shuffle > 0 && disorderly) {
            for (int i = 1; i < order.size(); i += 2) {
                if (random.nextBoolean()) {
                    Collections.swap(order, i - 1, i);
                }
            }
        }
        List<LogEntry> queue = new ArrayList<>();
        for (World.SentScan scan : order) {
            List<LogEntry> parts = new ArrayList<>(scan.parts());
            if (shuffle > 0) {
                Collections.shuffle(parts.subList(0, parts.size() - 1), random);
            }
            queue.addAll(parts);
            if (random.nextInt(4) == 0) {
                queue.add(parts.get(random.nextInt(parts.size())));
            }
        }
        // Long after the disorder that is allowed: the same part of a forgotten second, with another number.
        LogEntry first = scans.get(0).parts().get(0);
        queue.add(Entries.part(first.getSender(), scans.get(0).seconds() - 0.05).sees(1, 1).entry());
        return queue;
    }

    private static List<LogEntry> byTime(List<List<LogEntry>> queues) {
        List<LogEntry> all = new ArrayList<>();
        queues.forEach(all::addAll);
        List<LogEntry> late = new ArrayList<>();
        queues.forEach(queue -> late.add(queue.get(queue.size() - 1)));
        all.removeAll(late);
        all.sort(java.util.Comparator.comparingLong(
                (LogEntry entry) -> ScanParts.partOf(entry).getScanTimeMicros()));
        all.addAll(late);
        return all;
    }

    /** Any interleaving, with ticks and marks strewn in; not so many that anyone would be silent. */
    private static List<LogEntry> merged(List<List<LogEntry>> queues, Random random) {
        List<LogEntry> log = new ArrayList<>();
        int[] next = new int[queues.size()];
        double wall = 100;
        while (true) {
            List<Integer> left = new ArrayList<>();
            for (int i = 0; i < next.length; i++) {
                if (next[i] < queues.get(i).size()) {
                    left.add(i);
                }
            }
            if (left.isEmpty()) {
                return log;
            }
            int chosen = left.get(random.nextInt(left.size()));
            for (int run = random.nextInt(6); run >= 0 && next[chosen] < queues.get(chosen).size(); run--) {
                log.add(queues.get(chosen).get(next[chosen]++));
            }
            if (wall < 109 && random.nextInt(3) == 0) {
                log.add(random.nextBoolean() ? Entries.mark(0, 1, wall) : Entries.tick(wall));
                wall += random.nextDouble();
            }
        }
    }
}
