package org.sweeptally.region;

import java.io.DataInput;
import java.io.DataOutput;
import java.io.IOException;
import java.util.LinkedHashMap;
import java.util.Map;

/** How often what happened in a region. Part of its state, so that a restored machine goes on counting. */
public final class RegionCounters {

    /** What is counted. The order is the order in snapshots. */
    public enum Name {
        ENTRIES,
        PARTS,
        REPEATS,
        DETECTIONS_REPEATED,
        CONFLICTS,
        LATE,
        SCAN_CLOSED,
        PASSED,
        UNKNOWN_SENSOR,
        RESTARTS,
        SCANS_MISSING,
        SCANS_CLOSED_BY_NEXT,
        SCANS_UNFINISHED,
        DETECTIONS_UNFINISHED,
        SCANS_IN_EFFECT,
        SCANS_WITHOUT_POSITION,
        DETECTIONS_IN_EFFECT,
        SENSORS_PASSED_OVER,
        SENSORS_BACK,
        SILENT_ENTRIES_IGNORED,
        WAITING_BOUND,
        SETTINGS,
        SETTINGS_REPEATED,
        SETTINGS_SUPERSEDED,
        TICKS,
        NEIGHBOUR_PROMISES,
        NEIGHBOURS_GIVEN_UP,
        NEIGHBOUR_ENTRIES_REPEATED,
        NEIGHBOUR_ENTRIES_PASSED
    }

    private final long[] counts = new long[Name.values().length];

    public long get(Name name) {
        return counts[name.ordinal()];
    }

    void add(Name name) {
        add(name, 1);
    }

    void add(Name name, long amount) {
        counts[name.ordinal()] += amount;
    }

    /** All of them, in order of their names' declaration. */
    public Map<String, Long> asMap() {
        Map<String, Long> map = new LinkedHashMap<>();
        for (Name name : Name.values()) {
            map.put(name.name(), get(name));
        }
        return map;
    }

    void write(DataOutput out) throws IOException {
        for (long count : counts) {
            out.writeLong(count);
        }
    }

    void read(DataInput in) throws IOException {
        for (int i = 0; i < counts.length; i++) {
            counts[i] = in.readLong();
        }
    }
}
