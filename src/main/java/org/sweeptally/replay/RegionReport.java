package org.sweeptally.replay;

import java.util.List;
import java.util.Map;
import java.util.Optional;
import org.sweeptally.event.SnapshotHead;

/**
 * What became of the replay of one region.
 *
 * @param beginning  the snapshot that it began with, empty for the beginning of the log
 * @param entries    of the log that were applied
 * @param made       records of each kind that the replay makes in the span
 * @param reproduced how many of them are what was published, bit for bit, up to the first difference
 * @param stretches  what made the published scans, in their order
 * @param lastMicros log time of the last record, {@link Long#MIN_VALUE} where there was none
 * @param whatIf     what would have been other under other settings, where they were asked for
 * @param cameToEnd  whether the picture came to the end of the span; else the log ended before
 */
public record RegionReport(
        String region,
        Optional<SnapshotHead> beginning,
        long entries,
        Map<RecordKind, Long> made,
        Map<RecordKind, Long> reproduced,
        List<Stretch> stretches,
        long lastMicros,
        boolean cameToEnd,
        Optional<Difference> difference,
        Optional<WhatIfReport> whatIf) {

    /** Scans one after the other that one machine version made with one revision of the settings. */
    public record Stretch(int machineVersion, int settingsRevision, long scans, long fromMicros, long untilMicros) {}

    /** Records that the replay makes. */
    public long records() {
        return made.values().stream().mapToLong(Long::longValue).sum();
    }

    /** Records that are what was published. */
    public long same() {
        return reproduced.values().stream().mapToLong(Long::longValue).sum();
    }
}
