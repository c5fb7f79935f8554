package org.sweeptally.region;

import static org.assertj.core.api.Assertions.assertThat;
import static org.sweeptally.region.Entries.micros;
import static org.sweeptally.region.Entries.part;

import org.junit.jupiter.api.Test;
import org.sweeptally.event.Detection;
import org.sweeptally.event.FindingKind;
import org.sweeptally.event.GeodeticFix;
import org.sweeptally.event.Track;
import org.sweeptally.geo.LatLon;
import org.sweeptally.site.SensorSettings;

/** What is added to a sensor's times is in the log time of its scans, and in nothing that names them. */
class TimeOffsetTest {

    private static final SensorSettings SLOW =
            TestSites.withSweep(TestSites.sensor("slow", 0, 0), 1).withTimeOffset(0.4);

    private static final SensorSettings RIGHT = TestSites.sensor("right", 500, 0);

    @Test
    void aScanTakesEffectAtItsEndByTheSitesTimeAndKeepsItsName() {
        Rig rig = Rig.with(SLOW);
        for (int i = 0; i < 10; i++) {
            rig.apply(part("slow", 2 * i).sees(100, 100));
        }
        rig.apply(Entries.endOfInput());
        assertThat(rig.out.counts).hasSize(10);
        for (int i = 0; i < 10; i++) {
            assertThat(rig.out.counts.get(i).getTimeMicros()).isEqualTo(micros(2 * i + 1.4));
            assertThat(rig.out.counts.get(i).getScanTimeMicros()).isEqualTo(micros(2 * i));
        }
        Track last = rig.out.tracks.get(rig.out.tracks.size() - 1);
        assertThat(last.getUsed()).singleElement()
                .satisfies(used -> assertThat(used.getRef().getScanTimeMicros()).isEqualTo(micros(18)));
        // Seen for the first time at the beginning of the first look, by the site's time.
        assertThat(last.getFirstSeenMicros()).isEqualTo(micros(0.4));
        assertThat(last.getLastDetectedMicros()).isEqualTo(micros(19.4));
    }

    @Test
    void scansInterleaveByTheSitesTime() {
        Rig rig = Rig.with(SLOW, RIGHT);
        rig.apply(part("right", 1.3), part("right", 1.5), part("slow", 0), part("slow", 9), part("right", 11));
        assertThat(rig.out.counts.stream().map(count -> count.getSensor() + " " + count.getTimeMicros()))
                .startsWith("right " + micros(1.3), "slow " + micros(1.4), "right " + micros(1.5));
    }

    @Test
    void whatItPromisesIsByItsOwnClock() {
        Rig rig = Rig.with(SLOW, RIGHT);
        rig.apply(part("right", 5.3), part("right", 5.5), part("slow", 0).nothingBefore(5));
        assertThat(rig.effects()).containsExactly(0.0, 5.3);
    }

    @Test
    void aDetectionIsSeenWithinTheLookByTheSensorsClock() {
        LatLon place = TestSites.at(100, 100);
        Detection detection = Detection.newBuilder()
                .setIndex(0)
                .setTimeMicros(micros(0.75))
                .setMeasurement(new GeodeticFix(place.latitude(), place.longitude()))
                .build();
        ScanParts parts = ScanParts.begin(micros(0), SLOW);
        parts.add(part("slow", 0).sees(detection).entry(), 0);
        RegionArea area = new RegionArea(
                TestSites.region(TestSites.REGION, TestSites.rectangle(-2000, -2000, 2000, 2000)));
        assertThat(new ScanConversion(area).convert(parts, SLOW).orElseThrow().observations())
                .singleElement()
                .satisfies(o -> assertThat(o.measurement().lagSeconds()).isEqualTo(0.25));
        assertThat(parts.logTimeMicros()).isEqualTo(micros(1.4));
    }

    /** A clock an hour ahead that the site file takes back is not ahead. */
    @Test
    void aClockThatIsCorrectedIsNotAhead() {
        for (double offset : new double[] {0, -3600}) {
            Rig rig = Rig.with(TestSites.sensor("fast", 0, 0).withTimeOffset(offset), RIGHT);
            rig.apply(part("right", 1), part("fast", 3601), part("right", 2), part("fast", 3602));
            rig.apply(Entries.tick(3));
            assertThat(rig.out.findingKinds().contains(FindingKind.CLOCK_AHEAD)).isEqualTo(offset == 0);
        }
    }

    @Test
    void aSnapshotKeepsTheCorrectedTimes() {
        Rig rig = Rig.with(SLOW, RIGHT);
        rig.apply(part("right", 1.3), part("slow", 0), part("right", 2));
        byte[] snapshot = rig.machine.snapshot();
        rig.machine = RegionMachine.restore(snapshot, rig.reader);
        assertThat(rig.machine.snapshot()).isEqualTo(snapshot);
        rig.apply(part("slow", 2));
        assertThat(rig.effects()).containsExactly(1.3, 0.0, 2.0);
    }
}
