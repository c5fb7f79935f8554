package org.sweeptally.stream.attack;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import java.util.Optional;
import org.sweeptally.event.Count;
import org.sweeptally.region.wire.Wire;

/** What must hold of what an operator has left on the bus, whatever happened to it. */
final class PictureCheck {

    private static final List<String> OF_THE_LOG = List.of(
            "tracks", "births", "ends", "counts", "picture", "heartbeat", "findings", Outputs.APPENDS);

    private PictureCheck() {}

    /**
     * All of it, for an operator whose detections have all been used: the outputs follow from the log, the log holds
     * every part once, and the record is that of a run that nothing ever happened to. Says how much was compared.
     *
     * @param what was done to the operator, for the one line that is printed
     */
    static Committed holds(AttackedSite attacked, Undisturbed undisturbed, String what) {
        Committed committed = new Committed(attacked.names());
        followsFromItsLog(committed, undisturbed);
        hasLostNoPart(committed, undisturbed);
        isUndisturbed(committed, undisturbed);
        System.out.println(what + "; " + compared(committed) + ", " + undisturbed.number()
                + " of them with the undisturbed run; 0 silences");
        return committed;
    }

    /** How much there was to compare. */
    static String compared(Committed committed) {
        long records = OF_THE_LOG.stream().mapToLong(committed.published()::number).sum()
                + committed.published().number(Outputs.REJECTS);
        return committed.entries() + " log entries, " + records + " records and " + committed.snapshots()
                + " snapshots compared with the machines over the log";
    }

    /** Every output is what the machines make of the committed log, record for record, and so is every snapshot. */
    static void followsFromItsLog(Committed committed, Undisturbed undisturbed) {
        followsFromItsLog(committed);
        Outputs rejects = new Outputs();
        rejects.addAll(committed.folded(), Outputs.REJECTS);
        rejects.addAll(undisturbed.routed(), Outputs.REJECTS);
        assertThat(committed.published().differenceFrom(rejects, Outputs.REJECTS)).isEqualTo(Optional.empty());
    }

    /** As above, but for the rejects of parts that no region has heard. */
    static void followsFromItsLog(Committed committed) {
        for (String kind : OF_THE_LOG) {
            assertThat(committed.published().differenceFrom(committed.folded(), kind)).as(kind)
                    .isEqualTo(Optional.empty());
        }
        assertThat(committed.wrongSnapshots()).isEmpty();
        assertThat(committed.snapshotsCompared()).as("snapshots compared").isEqualTo(committed.snapshots());
    }

    /** Every part is in the log of every region that it concerns, once. */
    static void hasLostNoPart(Committed committed, Undisturbed undisturbed) {
        assertThat(committed.parts().stream().map(Object::toString).sorted().toList())
                .isEqualTo(undisturbed.parts().stream().map(Object::toString).sorted().toList());
    }

    /** No sensor was taken to be silent, and the record is that of a run that nothing ever happened to. */
    static void isUndisturbed(Committed committed, Undisturbed undisturbed) {
        assertThat(committed.silences()).as("silences").isZero();
        for (String kind : Outputs.RECORD) {
            assertThat(undisturbed.outputs().number(kind)).as(kind).isPositive();
            assertThat(committed.published().differenceFrom(undisturbed.outputs(), kind)).as(kind)
                    .isEqualTo(Optional.empty());
        }
        Outputs rejects = new Outputs();
        rejects.addAll(undisturbed.outputs(), Outputs.REJECTS);
        rejects.addAll(undisturbed.routed(), Outputs.REJECTS);
        assertThat(committed.published().differenceFrom(rejects, Outputs.REJECTS)).isEqualTo(Optional.empty());
    }

    /** The second revision holds for the scans from its time on, the first for those before, and both hold for some. */
    static void changesSettingsAt(AttackedSite attacked, long fromMicros) {
        List<Count> counts = Bus.committed(attacked.names().counts()).stream()
                .map(record -> Wire.decode(record.value(), Count.class))
                .toList();
        assertThat(counts).extracting(Count::getSettingsRevision).contains(1, 2);
        assertThat(counts).allSatisfy(count -> assertThat(count.getSettingsRevision())
                .isEqualTo(count.getTimeMicros() < fromMicros ? 1 : 2));
    }
}
