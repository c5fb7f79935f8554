package org.sweeptally.region;

import static org.assertj.core.api.Assertions.assertThat;
import static org.sweeptally.region.Entries.mark;
import static org.sweeptally.region.Entries.part;
import static org.sweeptally.region.Entries.silent;
import static org.sweeptally.region.Entries.tick;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.FindingKind;
import org.sweeptally.event.Heartbeat;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.PassedOverWhy;
import org.sweeptally.event.RejectReason;
import org.sweeptally.event.SilentBody;
import org.sweeptally.site.BoundSettings;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/**
 * The picture goes on without a sensor only by an entry in the log, and that is asked for only when all has been read.
 */
class SilenceTest {

    private static final SensorSettings NORTH = TestSites.sensor("north-shore", 0, 0);
    private static final SensorSettings SOUTH = TestSites.sensor("south-shore", 0, -100);

    private static Rig rig() {
        return Rig.with(NORTH, SOUTH);
    }

    private static List<String> asked(Rig rig) {
        return rig.out.appended.stream()
                .map(entry -> ((SilentBody) entry.getBody()).getSensor())
                .toList();
    }

    @Test
    void aSensorThatNeverSpokeHoldsThePictureUntilItIsPassedOver() {
        Rig rig = rig().apply(part("north-shore", 1)).apply(tick(100), mark(0, 1, 112), tick(109.9));
        assertThat(rig.effects()).isEmpty();
        assertThat(rig.heartbeat(109.9).getWaitsFor()).isEqualTo("south-shore");
        assertThat(asked(rig)).isEmpty();
        rig.apply(part("north-shore", 2)).apply(tick(110));
        assertThat(asked(rig)).containsExactly("south-shore");
        rig.apply(tick(111));
        assertThat(asked(rig)).as("asked once").containsExactly("south-shore");
        assertThat(rig.effects()).as("nothing happens before the entry comes back from the log").isEmpty();
        rig.applyAppended();
        assertThat(rig.effects()).containsExactly(1.0, 2.0);
        assertThat(rig.out.findingKinds()).containsExactly(FindingKind.SENSOR_SILENT);
        assertThat(rig.heartbeat(111).getSensors().get(1).getPassedOver()).isTrue();
    }

    @Test
    void withoutAnyMarkNobodyIsPassedOver() {
        Rig rig = rig().apply(part("north-shore", 1)).apply(tick(100), tick(200), tick(300));
        assertThat(rig.out.appended).isEmpty();
    }

    @Test
    void aBacklogThatIsReadUnevenlyMakesNoSilence() {
        Rig rig = rig().apply(tick(100), mark(0, 2, 130), tick(130));
        assertThat(rig.out.appended).as("partition 1 has not been read").isEmpty();
        rig.apply(mark(1, 2, 109.9), tick(131));
        assertThat(rig.out.appended).as("partition 1 was read before the silence was complete").isEmpty();
        rig.apply(mark(1, 2, 110), tick(132));
        assertThat(asked(rig)).containsExactly("north-shore", "south-shore");
    }

    @Test
    void aPartOfWhateverKindEndsTheQuiet() {
        Rig rig = rig().apply(part("north-shore", 50)).apply(tick(100), mark(0, 1, 300), tick(109));
        rig.apply(part("north-shore", 3), part("south-shore", 3)).apply(tick(118.9));
        assertThat(rig.out.reasons()).containsExactly(RejectReason.LATE);
        assertThat(asked(rig)).isEmpty();
        rig.apply(tick(128.9));
        assertThat(asked(rig)).containsExactly("north-shore", "south-shore");
    }

    @Test
    void ticksThatStoodStillDoNotMakeASensorSilentThatHasJustSpoken() {
        Rig rig = rig().apply(tick(100), mark(0, 1, 5000)).apply(part("north-shore", 1), part("south-shore", 1))
                .apply(tick(1000));
        assertThat(rig.out.appended).isEmpty();
    }

    @Test
    void aTickThatGoesBackIsTakenToStandStill() {
        Rig rig = rig().apply(mark(0, 1, 500), tick(100), tick(50), tick(60), tick(109));
        assertThat(rig.out.appended).isEmpty();
    }

    @Test
    void theEntryActsEvenIfTheSensorSpokeMeanwhileAndThePartThatCanBeUsedBringsItBack() {
        Rig rig = rig().apply(part("north-shore", 1), part("south-shore", 1)).apply(silent("south-shore"));
        rig.apply(part("north-shore", 5));
        assertThat(rig.effects()).containsExactly(1.0, 1.0, 5.0);
        rig.apply(part("south-shore", 4).sees(0, 0));
        assertThat(rig.out.reasons()).containsExactly(RejectReason.PASSED);
        assertThat(rig.out.rejects.get(0).getSentence()).contains("had come to 2031-05-01T04:00:05.000001Z");
        assertThat(rig.out.findingKinds()).as("not yet").containsExactly(FindingKind.SENSOR_SILENT);
        rig.apply(part("south-shore", 6), part("north-shore", 7));
        assertThat(rig.out.findingKinds()).containsExactly(FindingKind.SENSOR_SILENT, FindingKind.SENSOR_BACK);
        assertThat(rig.effects()).as("it holds the picture again").containsExactly(1.0, 1.0, 5.0, 6.0);
        rig.apply(part("south-shore", 8));
        assertThat(rig.effects()).containsExactly(1.0, 1.0, 5.0, 6.0, 7.0);
    }

    @Test
    void aSensorWhoseTimesAreOfNoUseDoesNotHoldThePicture() {
        Rig rig = rig().apply(silent("south-shore")).apply(part("north-shore", 100), part("south-shore", 1));
        assertThat(rig.heartbeat(0).getHorizonMicros()).isEqualTo(Entries.micros(100) + 1);
        assertThat(rig.heartbeat(0).getWaitsFor()).isEqualTo("north-shore");
        rig.apply(part("north-shore", 101), part("south-shore", 2), part("north-shore", 102));
        assertThat(rig.effects()).containsExactly(100.0, 101.0, 102.0);
    }

    @Test
    void anOpenScanOfASilentSensorIsUnfinished() {
        Rig rig = rig().apply(part("south-shore", 1).open().sees(0, 0), part("north-shore", 1))
                .apply(silent("south-shore"));
        assertThat(rig.out.reasons()).containsExactly(RejectReason.UNFINISHED);
        assertThat(rig.counted(RegionCounters.Name.SCANS_UNFINISHED)).isEqualTo(1);
        assertThat(rig.effects()).as("and counts no miss").containsExactly(1.0);
        rig.apply(part("south-shore", 1).part(1));
        assertThat(rig.out.reasons()).containsExactly(RejectReason.UNFINISHED, RejectReason.SCAN_CLOSED);
    }

    @Test
    void whenAllArePassedOverWhatHasComeTakesEffectAndNothingBeyondIsPassed() {
        Rig rig = rig().apply(part("north-shore", 1), part("north-shore", 30)).apply(silent("south-shore"),
                silent("north-shore"));
        assertThat(rig.effects()).containsExactly(1.0, 30.0);
        Heartbeat heartbeat = rig.heartbeat(0);
        assertThat(heartbeat.getWaitsFor()).isNull();
        assertThat(heartbeat.getHorizonMicros()).isEqualTo(Entries.micros(30) + 1);
        rig.apply(part("south-shore", 31));
        assertThat(rig.effects()).containsExactly(1.0, 30.0, 31.0);
    }

    @Test
    void aSilenceOfASensorThatNobodyWaitsForIsIgnored() {
        Rig rig = rig().apply(silent("nobody"), silent("south-shore"), silent("south-shore"));
        assertThat(rig.counted(RegionCounters.Name.SILENT_ENTRIES_IGNORED)).isEqualTo(2);
        assertThat(rig.counted(RegionCounters.Name.SENSORS_PASSED_OVER)).isEqualTo(1);
    }

    @Test
    void atTheBoundOfWhatWaitsTheLaggardIsPassedOver() {
        Site site = TestSites.site(1, NORTH, SOUTH);
        Rig rig = Rig.with(TestSites.withBounds(site, b -> new BoundSettings(
                b.gateSigmas(), b.components(), b.unseenTerms(), b.exactAssociationSteps(), b.propagationSweeps(),
                b.detectionsPerPart(), 2000, b.clockAheadSeconds(), b.snapshotScans(), b.snapshotSeconds(),
                b.leastTermWeight(), b.gatedPairs())));
        int sent = 0;
        while (rig.out.appended.isEmpty() && sent < 100) {
            assertThat(rig.heartbeat(0).getWaitingBytes()).isLessThanOrEqualTo(2000);
            rig.apply(part("north-shore", ++sent).sees(0, 0));
        }
        assertThat(rig.out.appended).hasSize(1);
        LogEntry asked = rig.out.appended.get(0);
        assertThat(asked.getBody()).isEqualTo(new SilentBody("south-shore", PassedOverWhy.WAITING_BOUND));
        rig.apply(part("north-shore", ++sent).sees(0, 0));
        assertThat(rig.out.appended).as("asked once").hasSize(1);
        assertThat(rig.out.findingKinds()).containsExactly(FindingKind.WAITING_BOUND);
        rig.applyAppended();
        assertThat(rig.effects()).hasSize(sent);
        assertThat(rig.heartbeat(0).getWaitingBytes()).isZero();
    }

    @Test
    void aClockThatRunsAheadIsFoundOncePerEpisodeAndHoldsNobody() {
        Rig rig = rig().apply(part("north-shore", 3600), part("south-shore", 1)).apply(tick(1), tick(2));
        assertThat(rig.out.findingKinds()).containsExactly(FindingKind.CLOCK_AHEAD);
        assertThat(rig.out.findings.get(0).getSubject()).isEqualTo("north-shore");
        assertThat(rig.out.findings.get(0).getAmount()).isBetween(3598.0, 3599.0);
        assertThat(rig.out.findings.get(0).getSentence()).contains("its latest scan is 3598.999999 s ahead of");
        assertThat(rig.effects()).containsExactly(1.0);
        rig.apply(part("south-shore", 3590)).apply(tick(3)).apply(part("north-shore", 9000)).apply(tick(4), tick(5));
        assertThat(rig.out.findingKinds()).containsExactly(FindingKind.CLOCK_AHEAD, FindingKind.CLOCK_AHEAD);
    }

    @Test
    void everyTickIsAnsweredByAHeartbeatEvenBeforeTheFirstSettings() {
        Rig rig = new Rig().apply(tick(1));
        Heartbeat heartbeat = rig.out.heartbeats.get(0);
        assertThat(heartbeat.getWallMicros()).isEqualTo(Entries.micros(1));
        assertThat(heartbeat.getHorizonMicros()).isNull();
        assertThat(heartbeat.getPictureMicros()).isNull();
        rig.apply(rig.settings(TestSites.site(1, NORTH))).apply(part("north-shore", 5)).apply(tick(2));
        assertThat(rig.out.heartbeats.get(1).getPictureMicros()).isEqualTo(Entries.micros(5));
        assertThat(rig.out.heartbeats.get(1).getSequence()).isEqualTo(1);
    }
}
