package org.sweeptally.region;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.sweeptally.region.Entries.part;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.Count;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.RejectReason;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/** A machine runs on the settings that its log holds, each from its own time on. */
class SettingsEntriesTest {

    private static final SensorSettings NORTH = TestSites.sensor("north-shore", 0, 0);
    private static final SensorSettings SOUTH = TestSites.sensor("south-shore", 0, -100);

    private static List<Integer> revisions(Rig rig) {
        return rig.out.counts.stream().map(Count::getSettingsRevision).toList();
    }

    @Test
    void whatComesBeforeTheFirstSettingsWaitsRawAndIsThenTakenInOrder() {
        Rig rig = new Rig().apply(part("north-shore", 1).sees(0, 0), part("north-shore", 2), part("north-shore", 1.5));
        assertThat(rig.out.counts).isEmpty();
        assertThat(rig.heartbeat(0).getWaitingEntries()).isEqualTo(3);
        rig.apply(rig.settings(TestSites.site(1, NORTH), 1000));
        assertThat(rig.effects()).as("the first settings hold from the beginning").containsExactly(1.0, 2.0);
        assertThat(rig.out.reasons()).containsExactly(RejectReason.LATE);
    }

    @Test
    void aLogWithoutSettingsStopsBeforeItFillsTheMemory() {
        Rig rig = new Rig();
        LogEntry large = part("north-shore", 1).entry();
        ((PartBody) large.getBody()).getPart().setSensor("n".repeat(4 << 20));
        for (int i = 0; i < 15; i++) {
            rig.apply(large);
        }
        assertThatThrownBy(() -> rig.apply(large))
                .isInstanceOf(IllegalStateException.class)
                .hasMessageContaining("the log of region " + TestSites.REGION + " holds no settings, and 15 entries of ")
                .hasMessageContaining("at most 67108864 bytes");
    }

    @Test
    void settingsWithATimeTakeEffectBeforeTheScansOfThatTime() {
        Rig rig = Rig.with(NORTH);
        rig.apply(rig.settings(TestSites.site(2, NORTH), 3));
        rig.apply(part("north-shore", 1), part("north-shore", 2), part("north-shore", 3), part("north-shore", 4));
        assertThat(revisions(rig)).containsExactly(1, 1, 2, 2);
    }

    @Test
    void settingsWithoutATimeHoldFromTheHorizonWhereTheyAreMet() {
        Rig rig = Rig.with(NORTH, SOUTH).apply(part("north-shore", 1), part("north-shore", 2), part("south-shore", 1));
        rig.apply(rig.settings(TestSites.site(2, NORTH, SOUTH))).apply(part("south-shore", 3));
        assertThat(revisions(rig)).containsExactly(1, 1, 2);
    }

    @Test
    void settingsThatComeAfterTheirTimeHoldFromTheHorizonToo() {
        Rig rig = Rig.with(NORTH).apply(part("north-shore", 10));
        rig.apply(rig.settings(TestSites.site(2, NORTH), 5)).apply(part("north-shore", 11));
        assertThat(revisions(rig)).containsExactly(1, 2);
    }

    @Test
    void aSensorThatSettingsBringHoldsThePictureFromThenOn() {
        Rig rig = Rig.with(NORTH);
        rig.apply(rig.settings(TestSites.site(2, NORTH, SOUTH), 3));
        rig.apply(part("north-shore", 1), part("north-shore", 4), part("north-shore", 6));
        assertThat(rig.effects()).as("south-shore has not spoken").containsExactly(1.0);
        assertThat(rig.heartbeat(0).getHorizonMicros()).isEqualTo(Entries.micros(3));
        rig.apply(part("south-shore", 2));
        assertThat(rig.out.reasons()).as("by the settings of its time it is nobody")
                .containsExactly(RejectReason.UNKNOWN_SENSOR);
        rig.apply(part("south-shore", 5));
        assertThat(rig.effects()).containsExactly(1.0, 4.0, 5.0);
    }

    @Test
    void partsOfASensorThatWaitingSettingsBringAreTakenEarly() {
        Rig rig = Rig.with(NORTH);
        rig.apply(rig.settings(TestSites.site(2, NORTH, SOUTH), 3));
        rig.apply(part("south-shore", 5), part("north-shore", 1), part("north-shore", 6));
        assertThat(rig.out.rejects).isEmpty();
        assertThat(rig.effects()).containsExactly(1.0, 5.0);
    }

    @Test
    void aSensorThatSettingsTakeAwayHoldsNothingAndIsUnknownFromThenOn() {
        Rig rig = Rig.with(NORTH, SOUTH);
        rig.apply(rig.settings(TestSites.site(2, NORTH), 3));
        rig.apply(part("south-shore", 2), part("south-shore", 4).sees(0, 0), part("south-shore", 3.5).sees(1, 1));
        rig.apply(part("north-shore", 5));
        assertThat(rig.effects()).containsExactly(2.0, 5.0);
        assertThat(rig.out.reasons()).containsExactly(RejectReason.UNKNOWN_SENSOR, RejectReason.UNKNOWN_SENSOR);
    }

    @Test
    void whatIsOpenOrWaitsOfASensorThatIsTakenAwayIsRejectedWhetherItCameBeforeOrAfter() {
        SensorSettings sweeping = TestSites.withSweep(SOUTH, 2);
        Rig before = Rig.with(NORTH, sweeping);
        before.apply(part("south-shore", 2).open().sees(0, 0));
        before.apply(before.settings(TestSites.site(2, NORTH), 3)).apply(part("north-shore", 9));
        before.apply(part("south-shore", 3.5));
        Rig after = Rig.with(NORTH, sweeping);
        after.apply(after.settings(TestSites.site(2, NORTH), 3)).apply(part("north-shore", 9));
        after.apply(part("south-shore", 2).open().sees(0, 0), part("south-shore", 3.5));
        assertThat(before.effects()).containsExactly(9.0).isEqualTo(after.effects());
        assertThat(before.out.reasons()).containsExactly(RejectReason.UNKNOWN_SENSOR, RejectReason.UNKNOWN_SENSOR);
        assertThat(before.out.rejectSet()).isEqualTo(after.out.rejectSet());
    }

    @Test
    void aScanIsOrderedByTheSettingsOfItsOwnTimeWheneverItComes() {
        SensorSettings sweeping = TestSites.withSweep(NORTH, 1);
        Rig rig = Rig.with(NORTH, SOUTH);
        rig.apply(rig.settings(TestSites.site(2, sweeping, SOUTH), 3));
        rig.apply(part("south-shore", 10), part("north-shore", 2), part("north-shore", 4));
        assertThat(rig.out.counts.stream().map(Count::getTimeMicros).toList())
                .containsExactly(Entries.micros(2), Entries.micros(5));
    }

    @Test
    void aLaterRevisionSupersedesWhatWasToTakeEffectAfterIt() {
        Rig rig = Rig.with(NORTH);
        rig.apply(rig.settings(TestSites.site(2, NORTH), 5), rig.settings(TestSites.site(3, NORTH), 4));
        rig.apply(part("north-shore", 3), part("north-shore", 4.5), part("north-shore", 6));
        assertThat(revisions(rig)).containsExactly(1, 3, 3);
        assertThat(rig.counted(RegionCounters.Name.SETTINGS_SUPERSEDED)).isEqualTo(1);
    }

    @Test
    void thresholdsOfLaterSettingsAreUsed() {
        Rig rig = Rig.with(NORTH);
        for (int i = 1; i <= 4; i++) {
            rig.apply(part("north-shore", i).sees(0, 0));
        }
        assertThat(rig.out.births).hasSize(1);
        double existence = rig.out.tracks.get(rig.out.tracks.size() - 1).getExistence();
        rig.apply(rig.settings(TestSites.withThresholds(TestSites.site(2, NORTH), 0.9999999999, 0.999999999)));
        assertThat(existence).isLessThan(0.999999999);
        rig.apply(part("north-shore", 5).sees(0, 0));
        assertThat(rig.out.ends).hasSize(1);
    }

    @Test
    void theSameSettingsAgainSayNothingNew() {
        Rig rig = new Rig();
        LogEntry settings = rig.settings(TestSites.site(1, NORTH));
        rig.apply(settings, settings);
        assertThat(rig.counted(RegionCounters.Name.SETTINGS_REPEATED)).isEqualTo(1);
    }

    @Test
    void otherContentWithoutAHigherRevisionIsRefusedNamingBoth() {
        Rig rig = Rig.with(TestSites.site(4, NORTH));
        Site other = TestSites.site(4, NORTH, SOUTH);
        assertThatThrownBy(() -> rig.apply(rig.settings(other)))
                .isInstanceOf(IllegalStateException.class)
                .hasMessageContaining("revision 4 after those of revision 4");
        Site lower = TestSites.site(3, NORTH, SOUTH);
        assertThatThrownBy(() -> rig.apply(rig.settings(lower)))
                .isInstanceOf(IllegalStateException.class)
                .hasMessageContaining("revision 3 after those of revision 4");
    }

    @Test
    void settingsForANewerMachineStopThisOneWithASentence() {
        Rig rig = new Rig();
        String text = rig.reader.text(TestSites.site(9, NORTH));
        LogEntry entry = LogEntry.newBuilder()
                .setSender("operator")
                .setBody(new SettingsBody(text, 9, RegionMachine.MACHINE_VERSION + 1))
                .build();
        assertThatThrownBy(() -> rig.apply(entry))
                .isInstanceOf(NewerMachineVersionException.class)
                .hasMessageContaining("revision 9")
                .hasMessageContaining("machine version " + (RegionMachine.MACHINE_VERSION + 1))
                .hasMessageContaining("start a newer program");
    }

    @Test
    void aRegionDoesNotMoveUnderARunningMachine() {
        Rig rig = Rig.with(NORTH);
        Site moved = TestSites.site(
                2, List.of(TestSites.region(TestSites.REGION, TestSites.rectangle(-1000, -2000, 2000, 2000))),
                        List.of(NORTH));
        assertThatThrownBy(() -> rig.apply(rig.settings(moved)))
                .isInstanceOf(IllegalStateException.class)
                .hasMessageContaining("settings revision 2 change the polygon")
                .hasMessageContaining("revision 1");
    }

    @Test
    void theApronAndTheCellsMayChangeWhileARegionRuns() {
        SensorSettings nearSighted = TestSites.withReach(NORTH, 100);
        Rig rig = Rig.with(nearSighted).apply(part("north-shore", 1), part("north-shore", 2));
        Site wider = TestSites.withApron(TestSites.site(2, nearSighted), 800, 130);
        rig.apply(rig.settings(wider, 3)).apply(part("north-shore", 3), part("north-shore", 4));
        assertThat(revisions(rig)).containsExactly(1, 1, 2, 2);
        double before = rig.out.counts.get(1).getExpectedUnseen();
        double after = rig.out.counts.get(2).getExpectedUnseen();
        assertThat(after).as("unseen objects of the core, but for the edges of cells").isBetween(0.98 * before, 1.02 * before);
    }

    @Test
    void settingsThatOthersReplacedMayBeWrittenAgain() {
        Rig rig = Rig.with(NORTH);
        LogEntry third = rig.settings(TestSites.site(3, NORTH), 30);
        rig.apply(third, rig.settings(TestSites.site(4, NORTH), 20), third);
        assertThat(rig.counted(RegionCounters.Name.SETTINGS_REPEATED)).isEqualTo(1);
        rig.apply(part("north-shore", 10), part("north-shore", 40), part("north-shore", 41));
        assertThat(revisions(rig)).containsExactly(1, 4, 4);
    }

    @Test
    void settingsThatDoNotKnowTheRegionAreRefused() {
        Rig rig = new Rig();
        Site other = TestSites.site(
                1, List.of(TestSites.region("elsewhere", TestSites.rectangle(-1000, -2000, 2000, 2000))),
                        List.of(NORTH));
        assertThatThrownBy(() -> rig.apply(rig.settings(other)))
                .isInstanceOf(IllegalStateException.class)
                .hasMessageContaining(TestSites.REGION)
                .hasMessageContaining("elsewhere");
    }
}
