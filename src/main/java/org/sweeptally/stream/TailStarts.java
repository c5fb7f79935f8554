package org.sweeptally.stream;

/** Hears from where partitions of the region log would have to be applied again. Called by the topology's threads. */
interface TailStarts {

    /** A partition would have to be applied again from an offset on. */
    void startsAt(int partition, long offset);

    /** A partition is no longer applied here. */
    void ends(int partition);
}
