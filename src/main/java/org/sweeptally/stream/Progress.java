package org.sweeptally.stream;

import java.nio.ByteBuffer;

/**
 * How far a partition of the region log has been applied.
 *
 * @param applied   offset of the last entry whose outputs were committed
 * @param tailStart offset of the first entry that some region has applied since its last snapshot; {@code applied + 1}
 *                  where no region has any
 * @param entries   how many entries were applied by all regions of the partition: a checksum of what is recovered
 */
record Progress(long applied, long tailStart, long entries) {

    private static final int BYTES = 3 * Long.BYTES;

    byte[] toBytes() {
        return ByteBuffer.allocate(BYTES).putLong(applied).putLong(tailStart).putLong(entries).array();
    }

    static Progress of(byte[] bytes) {
        if (bytes.length != BYTES) {
            throw new IllegalArgumentException("a progress has " + BYTES + " bytes, this one " + bytes.length);
        }
        ByteBuffer in = ByteBuffer.wrap(bytes);
        return new Progress(in.getLong(), in.getLong(), in.getLong());
    }
}
