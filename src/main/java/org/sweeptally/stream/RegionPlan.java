package org.sweeptally.stream;

import java.time.Duration;
import java.util.function.Function;
import org.sweeptally.site.Site;

/**
 * What the processor of a partition of the region log needs besides the log.
 *
 * @param regions        which region is on which partition
 * @param partitions     of the region log
 * @param settingsReader reads the text of a settings entry
 * @param schedule       when states are written out
 * @param reader         of the region log's tail
 * @param freshStart     says whether regions without state may begin from nothing
 * @param tailStarts     hears from where the partition would have to be applied again
 * @param longestTail    what recovery may take: after as much again the bus ends the thread's transaction
 */
record RegionPlan(
        RegionPartitions regions,
        int partitions,
        Function<String, Site> settingsReader,
        SnapshotSchedule schedule,
        LogReader reader,
        FreshStart freshStart,
        TailStarts tailStarts,
        Duration longestTail) {

    /** The regions of a partition at the beginning of their log. */
    LiveRegions begin(int partition) {
        return new LiveRegions(partition, regions.regionsOf(partition, partitions), settingsReader, schedule);
    }
}
