package org.sweeptally.stream;

import java.time.Duration;
import java.util.ArrayList;
import java.util.Collections;
import java.util.List;
import java.util.NavigableMap;
import java.util.TreeMap;
import org.apache.kafka.common.config.TopicConfig;

/**
 * A topic as it should be.
 *
 * @param name       of the topic
 * @param purpose    what it holds, for a person
 * @param ours       whether it is ours; what is not ours is created where it is missing, and otherwise left as it is
 * @param partitions how many
 * @param settings   settings of the bus that matter, by their names; the others are the bus's own
 */
public record TopicPlan(
        String name, String purpose, boolean ours, int partitions, NavigableMap<String, String> settings) {

    /**
     * Largest record of the region log in bytes. A part fills at most 1 MiB of a topic with a bus's usual limits, and
     * its entry is little longer, but the bus counts compressed bytes on one side and plain ones on the other.
     */
    public static final int LARGEST_ENTRY_BYTES = 4 * 1024 * 1024;

    /** The region log and what was made from it can be looked at together for this long. */
    private static final Duration LOG_KEPT = Duration.ofDays(7);

    private static final Duration TROUBLE_KEPT = Duration.ofDays(30);
    private static final Duration PULSE_KEPT = Duration.ofDays(1);
    private static final String COMPACTED_SEGMENT_BYTES = Integer.toString(64 * 1024 * 1024);

    public TopicPlan {
        settings = Collections.unmodifiableNavigableMap(new TreeMap<>(settings));
    }

    /** How many partitions a site gets that nobody chose a number for: one a region, up to 12. */
    public static int partitionsFor(int regions) {
        return Math.min(Math.max(regions, 1), 12);
    }

    /**
     * All topics of a site, the detections first.
     *
     * @param partitions of each topic that is partitioned by region
     */
    public static List<TopicPlan> of(TopicNames names, int partitions) {
        List<TopicPlan> plans = new ArrayList<>();
        plans.add(new TopicPlan(names.detections(), "parts of the sensors' scans", false, 1, new TreeMap<>()));
        plans.add(regionLog(names, partitions));
        plans.add(kept(names.tracks(), "every object at every scan", partitions, LOG_KEPT));
        plans.add(kept(names.births(), "objects published from here on", partitions, LOG_KEPT));
        plans.add(kept(names.ends(), "objects no longer published", partitions, LOG_KEPT));
        plans.add(kept(names.counts(), "how many objects, after every scan", partitions, LOG_KEPT));
        plans.add(compacted(names.picture(), "the last track of each object and count of each region", partitions));
        plans.add(kept(names.rejects(), "what could not be used, and why", partitions, TROUBLE_KEPT));
        plans.add(kept(names.heartbeat(), "by the clock: regions are alive", partitions, PULSE_KEPT));
        plans.add(kept(names.findings(), "what does not look as the site file says", partitions, TROUBLE_KEPT));
        plans.add(kept(names.snapshots(), "whole states of regions, in pieces", partitions, LOG_KEPT));
        plans.add(compacted(names.settings(), "the site's settings, by revision", 1));
        return List.copyOf(plans);
    }

    private static TopicPlan regionLog(TopicNames names, int partitions) {
        NavigableMap<String, String> settings = kept(LOG_KEPT);
        settings.put(TopicConfig.RETENTION_BYTES_CONFIG, "-1");
        settings.put(TopicConfig.MAX_MESSAGE_BYTES_CONFIG, Integer.toString(LARGEST_ENTRY_BYTES));
        return new TopicPlan(names.regionLog(), "all that can change a region's state", true, partitions, settings);
    }

    private static TopicPlan kept(String name, String purpose, int partitions, Duration kept) {
        return new TopicPlan(name, purpose, true, partitions, kept(kept));
    }

    private static NavigableMap<String, String> kept(Duration kept) {
        NavigableMap<String, String> settings = appended();
        settings.put(TopicConfig.CLEANUP_POLICY_CONFIG, TopicConfig.CLEANUP_POLICY_DELETE);
        settings.put(TopicConfig.RETENTION_MS_CONFIG, Long.toString(kept.toMillis()));
        return settings;
    }

    private static TopicPlan compacted(String name, String purpose, int partitions) {
        NavigableMap<String, String> settings = appended();
        settings.put(TopicConfig.CLEANUP_POLICY_CONFIG, TopicConfig.CLEANUP_POLICY_COMPACT);
        settings.put(TopicConfig.SEGMENT_BYTES_CONFIG, COMPACTED_SEGMENT_BYTES);
        return new TopicPlan(name, purpose, true, partitions, settings);
    }

    /** By the time of arrival on the bus, or what comes from an old recording would be deleted at once. */
    private static NavigableMap<String, String> appended() {
        NavigableMap<String, String> settings = new TreeMap<>();
        settings.put(TopicConfig.MESSAGE_TIMESTAMP_TYPE_CONFIG, "LogAppendTime");
        return settings;
    }
}
