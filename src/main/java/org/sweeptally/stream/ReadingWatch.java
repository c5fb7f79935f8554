package org.sweeptally.stream;

import java.util.OptionalLong;

/**
 * Tells how far the partitions of the detections have been read, compared with where they end. Called by the threads of
 * the topology, which it must not hold up.
 */
public interface ReadingWatch {

    /**
     * One router's reading of one partition. Two may be there of one partition for a while: a thread that lost it
     * learns of that later than the thread that has it now begins.
     */
    interface Reading {

        /** The record at an offset has been routed. */
        void routed(long offset);

        /**
         * The latest moment known at which everything that the partition held had been routed by now, microseconds
         * since 1970-01-01T00:00:00Z.
         */
        OptionalLong readToEndAt();

        /** The partition is no longer read by this router. */
        void ends();
    }

    /** A partition is read here from now on; from where is not known yet. */
    Reading begins(int partition);

    /** How many partitions the detections have. */
    int partitions();
}
