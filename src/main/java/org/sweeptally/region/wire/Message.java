package org.sweeptally.region.wire;

import java.util.Optional;
import org.apache.avro.Schema;

/** What the first bytes of a message say: which of our schemas its body follows, or why it is none of ours. */
public sealed interface Message {

    /**
     * A message whose body follows one of our schemas; whether the body is sound is not known yet.
     *
     * @param schema    the writer's schema
     * @param bodyStart where the body starts
     */
    record Ours(Schema schema, int bodyStart) implements Message {}

    /**
     * A message that is none of ours.
     *
     * @param fingerprint the fingerprint that it begins with; empty if it does not begin as a message of ours would
     * @param sentence    why, for a person
     */
    record Foreign(Optional<Long> fingerprint, String sentence) implements Message {}
}
