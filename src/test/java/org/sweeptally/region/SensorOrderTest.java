package org.sweeptally.region;

import static org.assertj.core.api.Assertions.assertThat;
import static org.sweeptally.region.Entries.part;

import org.junit.jupiter.api.Test;
import org.sweeptally.event.FindingKind;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Reject;
import org.sweeptally.event.RejectReason;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.SensorSettings;

/** A sensor's parts are judged by its own order, and never by another sensor's. */
class SensorOrderTest {

    private static final SensorSettings NORTH = TestSites.sensor("north-shore", 0, 0);

    private static Rig rig() {
        return Rig.with(NORTH);
    }

    @Test
    void aClosedScanWaitsForTheSensorsPromiseAndThenTakesEffect() {
        Rig rig = rig().apply(part("north-shore", 1).sees(0, 0));
        assertThat(rig.effects()).containsExactly(1.0);
        assertThat(rig.heartbeat(0).getHorizonMicros()).isEqualTo(Entries.micros(1) + 1);
    }

    @Test
    void anOpenScanHasNoEffectYet() {
        Rig rig = rig().apply(part("north-shore", 1).open().sees(0, 0));
        assertThat(rig.effects()).isEmpty();
        assertThat(rig.heartbeat(0).getWaitingEntries()).isEqualTo(1);
        assertThat(rig.heartbeat(0).getWaitingBytes()).isPositive();
    }

    @Test
    void aRepeatIsCountedAndChangesNothing() {
        LogEntry entry = part("north-shore", 1).sees(0, 0).entry();
        Rig rig = rig().apply(entry, entry, entry);
        assertThat(rig.effects()).containsExactly(1.0);
        assertThat(rig.counted(RegionCounters.Name.REPEATS)).isEqualTo(2);
        assertThat(rig.out.rejects).isEmpty();
    }

    @Test
    void ofTwoContentsTheFirstStandsAndTheOtherIsRejected() {
        LogEntry other = part("north-shore", 1).part(0).open().sees(9, 9).entry();
        Rig rig = rig().apply(part("north-shore", 1).part(0).open().sees(0, 0).entry(), other);
        rig.apply(part("north-shore", 1).part(1));
        assertThat(rig.out.reasons()).containsExactly(RejectReason.REPEAT_CONFLICT);
        assertThat(rig.counted(RegionCounters.Name.DETECTIONS_IN_EFFECT)).isEqualTo(1);
        Reject reject = rig.out.rejects.get(0);
        assertThat(reject.getOriginal().array()).isEqualTo(Wire.encode(ScanParts.partOf(other)));
        assertThat(reject.getRegion()).isEqualTo(TestSites.REGION);
        assertThat(reject.getReasons().get(0).getIndexes()).containsExactly(0);
        assertThat(reject.getSentence())
                .isEqualTo("part 0 of scan 2031-05-01T04:00:01.000000Z of sensor north-shore came before with other"
                        + " content, and the first stands");
    }

    @Test
    void aPartAfterItsScanWasClosedIsRejected() {
        Rig rig = rig().apply(part("north-shore", 1), part("north-shore", 1).part(1).open().sees(0, 0));
        assertThat(rig.out.reasons()).containsExactly(RejectReason.SCAN_CLOSED);
        assertThat(rig.out.rejects.get(0).getSentence()).contains("its closing part came");
    }

    @Test
    void aLatePartIsToldWhatWasPromisedAndByHowMuchItIsLate() {
        Rig rig = rig().apply(part("north-shore", 10), part("north-shore", 7.5).sees(0, 0));
        assertThat(rig.out.reasons()).containsExactly(RejectReason.LATE);
        assertThat(rig.out.rejects.get(0).getSentence())
                .contains("late")
                .contains("2.500001 s before 2031-05-01T04:00:10.000001Z")
                .contains("disorderSeconds");
        assertThat(rig.effects()).containsExactly(10.0);
    }

    @Test
    void aPartOlderThanAnOpenScanIsLateToo() {
        Rig rig = rig().apply(part("north-shore", 5).open().sees(0, 0), part("north-shore", 4).part(0).sees(1, 1));
        assertThat(rig.out.reasons()).containsExactly(RejectReason.LATE);
        assertThat(rig.effects()).isEmpty();
    }

    @Test
    void disorderThatIsAllowedIsNotLateAndTakesEffectInOrder() {
        Rig rig = Rig.with(TestSites.withDisorder(NORTH, 3)).apply(part("north-shore", 10), part("north-shore", 8));
        assertThat(rig.effects()).isEmpty();
        rig.apply(part("north-shore", 14));
        assertThat(rig.effects()).containsExactly(8.0, 10.0);
        rig.apply(part("north-shore", 10.9));
        assertThat(rig.out.reasons()).containsExactly(RejectReason.LATE);
    }

    @Test
    void theLeastIntervalIsPartOfThePromise() {
        Rig rig = Rig.with(TestSites.withLeastInterval(NORTH, 2)).apply(part("north-shore", 10));
        assertThat(rig.heartbeat(0).getHorizonMicros()).isEqualTo(Entries.micros(12));
        rig.apply(part("north-shore", 11));
        assertThat(rig.out.reasons()).containsExactly(RejectReason.LATE);
        rig.apply(part("north-shore", 12));
        assertThat(rig.effects()).containsExactly(10.0, 12.0);
    }

    @Test
    void aSweepTakesEffectWhenTheLookIsOver() {
        Rig rig = Rig.with(TestSites.withSweep(NORTH, 2.5)).apply(part("north-shore", 10).sees(0, 0));
        assertThat(rig.out.counts.get(0).getTimeMicros()).isEqualTo(Entries.micros(12.5));
    }

    @Test
    void aPromiseOfItsOwnMovesTheHorizonAndBinds() {
        Rig rig = rig().apply(part("north-shore", 1).nothingBefore(60));
        assertThat(rig.heartbeat(0).getHorizonMicros()).isEqualTo(Entries.micros(60));
        rig.apply(part("north-shore", 59));
        assertThat(rig.out.reasons()).containsExactly(RejectReason.LATE);
        rig.apply(part("north-shore", 61).nothingBefore(5));
        assertThat(rig.heartbeat(0).getHorizonMicros()).isEqualTo(Entries.micros(61) + 1);
    }

    @Test
    void aPromiseBeyondAnOpenScanClosesItWhole() {
        Rig rig = rig().apply(part("north-shore", 1).open().sees(0, 0), part("north-shore", 1).part(1).open()
                .nothingBefore(5));
        assertThat(rig.effects()).containsExactly(1.0);
    }

    @Test
    void whoPromisedNothingEverIsFinishedAndHoldsNobody() {
        Rig rig = Rig.with(NORTH, TestSites.sensor("south-shore", 0, -100))
                .apply(part("south-shore", 2), part("north-shore", 1).nothingEver());
        assertThat(rig.effects()).containsExactly(1.0, 2.0);
        assertThat(rig.heartbeat(0).getSensors().get(0).getFinished()).isTrue();
        assertThat(rig.heartbeat(0).getWaitsFor()).isEqualTo("south-shore");
        rig.apply(part("north-shore", 100));
        assertThat(rig.out.reasons()).containsExactly(RejectReason.LATE);
        assertThat(rig.out.rejects.get(0).getSentence()).contains("promised that nothing would ever come again");
    }

    @Test
    void whenAllAreFinishedEverythingTakesEffect() {
        Rig rig = Rig.with(NORTH, TestSites.sensor("south-shore", 0, -100))
                .apply(part("south-shore", 50).nothingEver(), part("north-shore", 1).nothingEver());
        assertThat(rig.effects()).containsExactly(1.0, 50.0);
        assertThat(rig.heartbeat(0).getWaitsFor()).isNull();
    }

    @Test
    void aScanWhoseClosingPartIsMissingIsClosedWholeByTheNext() {
        Rig rig = rig().apply(part("north-shore", 1).open().sees(0, 0), part("north-shore", 2).open().sees(0, 0));
        assertThat(rig.effects()).containsExactly(1.0);
        assertThat(rig.counted(RegionCounters.Name.SCANS_CLOSED_BY_NEXT)).isEqualTo(1);
        rig.apply(part("north-shore", 1).part(1).sees(9, 9));
        assertThat(rig.out.reasons()).containsExactly(RejectReason.SCAN_CLOSED);
        assertThat(rig.out.rejects.get(0).getSentence()).contains("went on to a later scan");
    }

    @Test
    void withDisorderAllowedTheNextScanClosesOnlyWhatIsEarlierByMore() {
        Rig rig = Rig.with(TestSites.withDisorder(NORTH, 1.5))
                .apply(part("north-shore", 1).open().sees(0, 0), part("north-shore", 2).open(), part("north-shore", 2.5)
                        .open());
        assertThat(rig.counted(RegionCounters.Name.SCANS_CLOSED_BY_NEXT)).isEqualTo(1);
        assertThat(rig.out.rejects).isEmpty();
    }

    @Test
    void aScanNumberThatGoesBackIsARestartAndLeavesTheOpenScanUnfinished() {
        Rig rig = rig().apply(part("north-shore", 1).scan(17), part("north-shore", 2).scan(18).open().sees(0, 0));
        rig.apply(part("north-shore", 3).scan(1).sees(0, 0));
        assertThat(rig.effects()).containsExactly(1.0, 3.0);
        assertThat(rig.out.reasons()).containsExactly(RejectReason.UNFINISHED);
        assertThat(rig.out.rejects.get(0).getSentence()).contains("started again");
        assertThat(rig.out.findingKinds()).containsExactly(FindingKind.SENSOR_RESTART);
        assertThat(rig.counted(RegionCounters.Name.RESTARTS)).isEqualTo(1);
    }

    @Test
    void gapsInTheScanNumbersAreCountedAndFound() {
        Rig rig = rig().apply(part("north-shore", 1).scan(17), part("north-shore", 2).scan(18), part("north-shore", 5)
                .scan(21));
        assertThat(rig.counted(RegionCounters.Name.SCANS_MISSING)).isEqualTo(2);
        assertThat(rig.out.findingKinds()).containsExactly(FindingKind.SCANS_MISSING);
        assertThat(rig.out.findings.get(0).getAmount()).isEqualTo(2);
    }

    @Test
    void scansOutOfOrderThatAllComeAreNoGap() {
        Rig rig = Rig.with(TestSites.withDisorder(NORTH, 5))
                .apply(part("north-shore", 1).scan(1), part("north-shore", 3).scan(3), part("north-shore", 2).scan(2))
                .apply(part("north-shore", 20).scan(4));
        assertThat(rig.effects()).containsExactly(1.0, 2.0, 3.0);
        assertThat(rig.out.findings).isEmpty();
    }

    @Test
    void aScanWithAnUnusablePartIsUnfinishedAndCountsNoMiss() {
        Rig rig = rig().apply(part("north-shore", 1).open().sees(0, 0), part("north-shore", 1).part(1).unusable());
        assertThat(rig.effects()).isEmpty();
        assertThat(rig.out.reasons()).containsExactly(RejectReason.UNFINISHED);
        assertThat(rig.out.rejects.get(0).getSentence()).contains("a part of the scan could not be used");
        assertThat(rig.heartbeat(0).getHorizonMicros()).isEqualTo(Entries.micros(1) + 1);
        assertThat(rig.machine.sequence()).isZero();
    }

    @Test
    void sixtyFourScansAreRememberedAndWhatIsForgottenCannotComeTwice() {
        Rig rig = Rig.with(TestSites.withDisorder(NORTH, 1000));
        for (int i = 1; i <= SensorOrder.REMEMBERED_SCANS + 1; i++) {
            rig.apply(part("north-shore", i));
        }
        rig.apply(part("north-shore", 2));
        assertThat(rig.counted(RegionCounters.Name.REPEATS)).isEqualTo(1);
        rig.apply(part("north-shore", 1));
        assertThat(rig.out.reasons()).containsExactly(RejectReason.LATE);
        rig.apply(Entries.endOfInput());
        assertThat(rig.effects()).hasSize(SensorOrder.REMEMBERED_SCANS + 1).isSorted();
    }

    @Test
    void aSensorThatTheRegionDoesNotHearIsRejected() {
        Rig rig = Rig.with(NORTH, TestSites.sensor("far-away", 90_000, 0));
        rig.apply(part("nobody", 1).sees(0, 0), part("far-away", 1).sees(0, 0), part("north-shore", 1));
        assertThat(rig.out.reasons()).containsExactly(RejectReason.UNKNOWN_SENSOR, RejectReason.UNKNOWN_SENSOR);
        assertThat(rig.effects()).as("nobody waits for a sensor that cannot see the region").containsExactly(1.0);
    }

    @Test
    void anotherSensorsTimesDoNotMakeAPartLate() {
        Rig rig = Rig.with(NORTH, TestSites.sensor("south-shore", 0, -100));
        rig.apply(part("south-shore", 1000), part("north-shore", 1), part("north-shore", 2));
        assertThat(rig.out.rejects).isEmpty();
        assertThat(rig.effects()).containsExactly(1.0, 2.0);
    }

    @Test
    void aLongOriginalIsCutAndSaysWhereItIs() {
        Entries.PartMaker maker = part("north-shore", 1).part(1).open();
        for (int i = 0; i < 9000; i++) {
            maker.sees(i / 10.0, 0);
        }
        LogEntry entry = maker.entry();
        Rig rig = rig().apply(part("north-shore", 1).entry(), entry);
        Reject reject = rig.out.rejects.get(0);
        byte[] original = Wire.encode(ScanParts.partOf(entry));
        assertThat(original.length).isGreaterThan(256 * 1024);
        assertThat(reject.getLengthBytes()).isEqualTo(original.length);
        assertThat(reject.getOriginal().remaining()).isEqualTo(4096);
        assertThat(reject.getSourceOffset()).isEqualTo(7);
        assertThat(reject.getSha256()).isNotNull();
        assertThat(reject.getReasons().get(0).getCount()).isEqualTo(9000);
        assertThat(reject.getReasons().get(0).getIndexes()).hasSize(100);
    }
}
