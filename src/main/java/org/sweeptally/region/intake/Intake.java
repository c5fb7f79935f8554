package org.sweeptally.region.intake;

import java.util.Optional;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.Reject;

/**
 * What became of one part that was sent: something to use, something rejected, or both. Never neither.
 *
 * @param body   the part less the detections that could not be used, each of the others with its original index; a
 *               part that could not be used at all, but whose sensor and scan time could be read, emptied and marked
 *               unusable
 * @param reject what could not be used and why
 */
public record Intake(Optional<PartBody> body, Optional<Reject> reject) {

    public Intake {
        if (body.isEmpty() && reject.isEmpty()) {
            throw new IllegalArgumentException("what is neither used nor rejected would be lost");
        }
    }
}
