package org.sweeptally.replay;

import java.util.List;
import java.util.Optional;

/**
 * What would have been other under other settings, of one region.
 *
 * @param scans               that took effect under both
 * @param alone               that took effect under one of them only
 * @param differing           of the scans, how many have any record that differs
 * @param existenceDifference greatest, of an object in a scan
 * @param countDifference     greatest, of the expected number of objects after a scan
 * @param meanCountDifference its mean over the scans
 * @param rows                objects shown under either
 */
public record WhatIfReport(
        String region,
        long scans,
        long alone,
        long differing,
        double existenceDifference,
        double countDifference,
        double meanCountDifference,
        List<Row> rows) {

    /**
     * When an object was shown in the span.
     *
     * @param firstSequence of the region's scans, after which it was shown first
     * @param shown         after how many scans it was
     */
    public record Shown(String object, long firstMicros, long firstSequence, long lastMicros, long shown) {}

    /** One object as it was, and as it would have been; empty where it was not shown. */
    public record Row(Optional<Shown> recorded, Optional<Shown> changed) {

        /** Scans by which it would have been shown later; earlier where negative. */
        public long scansLater() {
            return changed.orElseThrow().firstSequence() - recorded.orElseThrow().firstSequence();
        }

        /** Whether it was shown after the same number of scans, from and until the same time. */
        public boolean isSame() {
            return recorded.isPresent() && changed.isPresent()
                    && recorded.get().firstMicros() == changed.get().firstMicros()
                    && recorded.get().lastMicros() == changed.get().lastMicros()
                    && recorded.get().shown() == changed.get().shown();
        }
    }

    public WhatIfReport {
        rows = List.copyOf(rows);
    }

    /** Whether nothing at all would have been other. */
    public boolean isSame() {
        return differing == 0 && alone == 0;
    }
}
