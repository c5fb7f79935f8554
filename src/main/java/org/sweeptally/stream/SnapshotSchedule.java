package org.sweeptally.stream;

import org.sweeptally.site.Site;

/**
 * When a region's state is written out: after so many scans, or so much time by its ticks, or so much work, whichever
 * comes first. Work is what the machine would have to do again on recovery, so it bounds how long that takes.
 *
 * @param scans       scans in effect between two snapshots
 * @param tickMicros  time by the region's ticks between two snapshots, microseconds
 * @param workNanos   time spent in the machine between two snapshots, nanoseconds
 */
record SnapshotSchedule(int scans, long tickMicros, long workNanos) {

    /**
     * The schedule for a site.
     *
     * @param transactionTimeoutMillis half of it must be enough for a thread to do the work of all its regions again
     */
    static SnapshotSchedule of(Site site, int transactionTimeoutMillis) {
        long quarterNanos = transactionTimeoutMillis * 1_000_000L / 4;
        return new SnapshotSchedule(
                site.bounds().snapshotScans(),
                Math.round(site.bounds().snapshotSeconds() * 1e6),
                quarterNanos / Math.max(1, site.regions().size()));
    }

    /**
     * The schedule of a region's first snapshot, so that the regions' snapshots do not all fall together.
     *
     * @param place of the region in their order, from 0
     */
    SnapshotSchedule first(int place, int regions) {
        double share = (place + 1.0) / regions;
        return new SnapshotSchedule(
                Math.max(1, (int) (scans * share)),
                (long) (tickMicros * share),
                Math.max(1, (long) (workNanos * share)));
    }
}
