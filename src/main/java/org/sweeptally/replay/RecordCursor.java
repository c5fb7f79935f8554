package org.sweeptally.replay;

/** Records of one kind and region, one after the other in their order. */
public interface RecordCursor extends AutoCloseable {

    /**
     * A record as it was published.
     *
     * @param value its bytes
     * @param where it stands, for a person
     */
    record Recorded(byte[] value, String where) {}

    /** The next one, null after the last. */
    Recorded next();

    @Override
    void close();
}
