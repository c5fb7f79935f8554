package org.sweeptally.region;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.LogEntry;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/** A machine that was restored goes on as the one would have whose snapshot it was. */
class SnapshotTest {

    private static final long SEED = 11;

    @Test
    void aSnapshotAtAnyEntryGoesOnToTheSameRecord() {
        TestSites.Reader reader = new TestSites.Reader();
        List<LogEntry> log = log(reader);
        Rig whole = new Rig(reader).applyAll(log);
        assertThat(whole.out.tracks).hasSizeGreaterThan(10);

        for (int cut = 0; cut <= log.size(); cut++) {
            Rig rig = new Rig(reader).applyAll(log.subList(0, cut));
            byte[] snapshot = rig.machine.snapshot();
            rig.machine = RegionMachine.restore(snapshot, reader);
            assertThat(rig.machine.snapshot()).as("snapshot of the restored, at entry %s, seed %s", cut, SEED)
                    .isEqualTo(snapshot);
            rig.applyAll(log.subList(cut, log.size()));
            assertThat(rig.out.publishedBytes()).as("cut at entry %s, seed %s", cut, SEED)
                    .isEqualTo(whole.out.publishedBytes());
            assertThat(rig.out.rejectSet()).as("cut at entry %s", cut).isEqualTo(whole.out.rejectSet());
            assertThat(rig.out.heartbeats).isEqualTo(whole.out.heartbeats);
            assertThat(rig.out.findings).isEqualTo(whole.out.findings);
            assertThat(rig.out.pictures).isEqualTo(whole.out.pictures);
            assertThat(rig.machine.snapshot()).isEqualTo(whole.machine.snapshot());
        }
    }

    /** Something of everything: raw entries, settings that wait, open scans, silences, repeats, a restart. */
    private static List<LogEntry> log(TestSites.Reader reader) {
        SensorSettings north = TestSites.withSweep(TestSites.sensor("north-shore", 0, 2500), 0.4);
        SensorSettings pilot = TestSites.withDisorder(TestSites.moving("pilot-boat"), 1.5);
        SensorSettings mute = TestSites.sensor("south-shore", 0, -2500);
        World world = new World(SEED);
        List<LogEntry> parts = new ArrayList<>();
        world.scansOf(north, 3).stream().limit(9).forEach(scan -> parts.addAll(scan.parts()));
        world.scansOf(pilot, 2).stream().limit(20).forEach(scan -> parts.addAll(scan.parts()));
        parts.sort(java.util.Comparator.comparingLong((LogEntry entry) -> ScanParts.partOf(entry).getScanTimeMicros()));
        Site site = TestSites.site(1, north, pilot, mute);
        Site later = TestSites.withApron(
                TestSites.withThresholds(TestSites.site(2, north, pilot, mute), 0.6, 0.2), 450, 160);
        List<LogEntry> log = new ArrayList<>(parts.subList(0, 5));
        log.add(1, Entries.tick(100));
        log.add(Entries.settings(reader.text(site), site));
        log.add(Entries.settings(reader.text(later), later, 9.0));
        log.addAll(parts.subList(5, parts.size()));
        log.add(20, Entries.tick(101));
        log.add(24, Entries.mark(0, 1, 120));
        log.add(25, Entries.tick(120));
        log.add(26, Entries.silent("south-shore"));
        log.add(log.get(log.size() - 2));
        log.add(Entries.part("north-shore", 40).scan(1).open().sees(5, 5).entry());
        log.add(Entries.part("south-shore", 2).sees(5, 5).entry());
        log.add(Entries.tick(121));
        log.add(Entries.part("north-shore", 41).scan(2).sees(5, 5).entry());
        log.add(Entries.endOfInput());
        return log;
    }

    @Test
    void anUnknownFormatVersionIsRefusedWithASentence() {
        Rig rig = Rig.with(TestSites.sensor("north-shore", 0, 0));
        byte[] snapshot = rig.machine.snapshot();
        snapshot[3] = 99;
        assertThatThrownBy(() -> RegionMachine.restore(snapshot, rig.reader))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("format version 99")
                .hasMessageContaining("version " + RegionMachine.FORMAT_VERSION);
    }

    @Test
    void aSnapshotThatIsCutOffOrTooLongIsRefused() {
        Rig rig = Rig.with(TestSites.sensor("north-shore", 0, 0)).apply(Entries.part("north-shore", 1).sees(0, 0)
                .entry());
        byte[] snapshot = rig.machine.snapshot();
        Random random = new Random(SEED);
        for (int i = 0; i < 50; i++) {
            byte[] cut = Arrays.copyOf(snapshot, 4 + random.nextInt(snapshot.length - 4));
            assertThatThrownBy(() -> RegionMachine.restore(cut, rig.reader))
                    .isInstanceOf(IllegalArgumentException.class);
        }
        assertThatThrownBy(() -> RegionMachine.restore(Arrays.copyOf(snapshot, snapshot.length + 3), rig.reader))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("3 bytes too many");
    }
}
