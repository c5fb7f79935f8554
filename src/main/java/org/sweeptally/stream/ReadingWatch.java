package org.sweeptally.stream;

import java.util.OptionalLong;

/**
 * Tells how far the partitions of the detections have been read, compared with where they end. Called by the threads of
 * the topology, which it must not hold up.
 */
public interface ReadingWatch {

    /** A partition is read here from now on; from where is not known yet. */
    void begins(int partition);

    /** The record at an offset of a partition has been routed. */
    void routed(int partition, long offset);

    /** A partition is no longer read here. */
    void ends(int partition);

    /**
     * The latest moment known at which everything that the partition held had been routed by now, microseconds since
     * 1970-01-01T00:00:00Z.
     */
    OptionalLong readToEndAt(int partition);

    /** How many partitions the detections have. */
    int partitions();
}
