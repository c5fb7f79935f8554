package org.sweeptally.region.intake;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.BitSet;
import org.sweeptally.event.Detection;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.ReasonCount;
import org.sweeptally.event.Reject;

/** What must hold of every intake, whatever came in. */
public final class Accounting {

    private Accounting() {}

    /** Every detection that was sent is either used, or named in the reject, or went with its whole part. */
    public static void nothingIsLost(Intake intake, String name) {
        if (intake.body().isEmpty()) {
            assertThat(intake.reject().orElseThrow().getWhole()).as(name).isTrue();
            return;
        }
        PartBody body = intake.body().get();
        BitSet accounted = new BitSet();
        for (Detection detection : body.getPart().getDetections()) {
            assertThat(accounted.get(detection.getIndex())).as(name).isFalse();
            accounted.set(detection.getIndex());
        }
        if (intake.reject().isEmpty()) {
            assertThat(body.getUnusable()).as(name).isFalse();
        } else {
            Reject reject = intake.reject().get();
            assertThat(body.getUnusable()).as(name).isEqualTo(reject.getWhole());
            for (ReasonCount reason : reject.getReasons()) {
                assertThat(reason.getSentence()).as(name).isNotBlank();
                for (int index : reason.getIndexes()) {
                    assertThat(body.getPart().getDetections()).as(name).noneMatch(d -> d.getIndex() == index);
                    accounted.set(index);
                }
            }
            if (reject.getWhole()) {
                accounted.set(0, body.getDetectionsSent());
            }
        }
        assertThat(accounted.cardinality()).as(name).isEqualTo(body.getDetectionsSent());
        assertThat(accounted.length()).as(name).isEqualTo(body.getDetectionsSent());
    }
}
