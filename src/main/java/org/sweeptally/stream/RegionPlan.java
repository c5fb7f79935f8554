package org.sweeptally.stream;

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
 */
record RegionPlan(
        RegionPartitions regions,
        int partitions,
        Function<String, Site> settingsReader,
        SnapshotSchedule schedule,
        LogReader reader) {

    /** The regions of a partition at the beginning of their log. */
    LiveRegions begin(int partition) {
        return new LiveRegions(partition, regions.regionsOf(partition, partitions), settingsReader, schedule);
    }
}
