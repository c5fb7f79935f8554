package org.sweeptally.stream;

/** Reads a stretch of a partition of the region log again. */
public interface LogReader {

    /** Takes in one record of the log. */
    interface Sink {
        void entry(long offset, byte[] key, byte[] value);
    }

    /**
     * Hands over every committed record from one offset to another, both included, in their order. Offsets may be
     * missing: the bus uses some for itself.
     *
     * @param toInclusive {@code from - 1} where there is nothing to hand over; that the log goes on there is checked
     *                    all
     *                    the same
     * @return how many records were handed over
     * @throws OperatorStoppedException if the log no longer reaches back so far, ends before, or cannot be read
     */
    long read(int partition, long from, long toInclusive, Sink sink);
}
