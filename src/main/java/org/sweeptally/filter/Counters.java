package org.sweeptally.filter;

import java.io.DataInput;
import java.io.DataOutput;
import java.io.IOException;
import java.util.LinkedHashMap;
import java.util.Map;

/**
 * How often what happened, and how often each bound bit. Part of the state, so that a restored filter goes on
 * counting.
 */
public final class Counters {

    /** What is counted. The order is the order in snapshots. */
    public enum Name {
        SCANS,
        OBSERVATIONS,
        GATED_COMPONENT_PAIRS,
        GATED_TERM_PAIRS,
        PAIRS_OVER_BOUND,
        CLUSTERS_CLOSED_FORM,
        CLUSTERS_EXACT,
        CLUSTERS_PROPAGATED,
        CLUSTERS_IMPOSSIBLE,
        CLUSTERS_UNDERFLOWED,
        PROPAGATION_SWEEPS,
        PROPAGATION_CAPPED,
        COMPONENTS_BEGUN,
        IDENTITIES_RETURNED,
        COMPONENTS_RECYCLED,
        COMPONENTS_GONE,
        COMPONENTS_OVER_BOUND,
        TERMS_TOO_LIGHT,
        TERMS_RETURNED_WIDE,
        TERMS_RETURNED_FAINT,
        TERMS_GONE,
        TERMS_OVER_BOUND,
        INNOVATIONS_NOT_POSITIVE
    }

    private final long[] counts = new long[Name.values().length];

    public long get(Name name) {
        return counts[name.ordinal()];
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
