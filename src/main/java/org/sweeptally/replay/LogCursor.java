package org.sweeptally.replay;

/** Entries of one region's log, one after the other. */
public interface LogCursor extends AutoCloseable {

    /** An entry: its offset in the log's partition, and its bytes. */
    record Logged(long offset, byte[] value) {}

    /** The next one, null after the last whose records have been published. */
    Logged next();

    /** Offset before which it ends, for whoever wants to know how far it is. */
    long end();

    @Override
    void close();
}
