package org.sweeptally.stream.attack;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import java.util.Optional;

/** What must hold of what an operator has left on the bus, whatever happened to it. */
final class PictureCheck {

    private static final List<String> OF_THE_LOG = List.of(
            "tracks", "births", "ends", "counts", "picture", "heartbeat", "findings", Outputs.APPENDS);

    private PictureCheck() {}

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
}
