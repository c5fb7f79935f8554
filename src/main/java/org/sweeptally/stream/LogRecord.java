package org.sweeptally.stream;

import org.sweeptally.event.LogEntry;
import org.sweeptally.region.wire.Wire;

/** A record of the region log, read. All of them are ours, so one that cannot be read stops the operator. */
record LogRecord(String region, LogEntry entry) {

    /**
     * Reads a record.
     *
     * @param live the regions of its partition
     * @throws OperatorStoppedException if it is none of ours, or of no region of the partition
     */
    static LogRecord of(LiveRegions live, long offset, byte[] key, byte[] value) {
        String where = "offset " + offset + " of partition " + live.partition() + " of the region log";
        if (key == null || value == null) {
            throw new OperatorStoppedException(where + " holds a record without a " + (key == null ? "key" : "value")
                    + ": nobody but the operator may write there; nothing after it was used");
        }
        String region = RegionPartitions.region(key);
        if (!live.has(region)) {
            throw new OperatorStoppedException(where + " holds an entry for region '" + printable(region)
                    + "', and the partition's regions are " + live.names() + "; nothing after it was used");
        }
        try {
            return new LogRecord(region, Wire.decode(value, LogEntry.class));
        } catch (IllegalArgumentException e) {
            throw new OperatorStoppedException(where + " holds no entry of ours: " + e.getMessage()
                    + ": nobody but the operator may write there; nothing after it was used", e);
        }
    }

    private static String printable(String text) {
        String shown = text.replaceAll("[^\\x20-\\x7e]", "?");
        return shown.length() > 64 ? shown.substring(0, 64) + "..." : shown;
    }
}
