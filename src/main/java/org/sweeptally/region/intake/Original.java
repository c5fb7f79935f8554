package org.sweeptally.region.intake;

import java.nio.ByteBuffer;
import java.util.Arrays;
import java.util.Optional;
import org.sweeptally.event.Digest;
import org.sweeptally.event.Reject;
import org.sweeptally.region.wire.Digests;

/**
 * The bytes that something was sent as, or as much of them as a reject keeps.
 *
 * @param kept        all bytes up to {@link #WHOLE_UP_TO_BYTES}, beyond that the first {@link #HEAD_BYTES}
 * @param lengthBytes how many there were
 * @param sha256      digest of all; empty where all are kept
 * @param source      where they came from, if anybody said
 */
public record Original(byte[] kept, long lengthBytes, Optional<Digest> sha256, Optional<SourcePosition> source) {

    /** Originals up to here are kept whole. */
    public static final int WHOLE_UP_TO_BYTES = 256 * 1024;

    /** What is kept of longer ones. */
    public static final int HEAD_BYTES = 4 * 1024;

    /** The original that these bytes are. */
    public static Original of(byte[] bytes, Optional<SourcePosition> source) {
        if (bytes.length <= WHOLE_UP_TO_BYTES) {
            return new Original(bytes, bytes.length, Optional.empty(), source);
        }
        return new Original(
                Arrays.copyOf(bytes, HEAD_BYTES), bytes.length, Optional.of(Digests.sha256(bytes)), source);
    }

    /** Writes it into a reject; the position only beside a digest, where it serves to find what was not kept. */
    void into(Reject.Builder reject) {
        reject.setOriginal(ByteBuffer.wrap(kept)).setLengthBytes(lengthBytes).setSha256(sha256.orElse(null));
        if (sha256.isPresent() && source.isPresent()) {
            reject.setSourcePartition(source.get().partition()).setSourceOffset(source.get().offset());
        }
    }
}
