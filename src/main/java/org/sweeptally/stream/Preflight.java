package org.sweeptally.stream;

import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.apache.kafka.common.config.TopicConfig;

/** What must be right on the bus before the operator begins, and how it finds the bus otherwise. */
final class Preflight {

    /** The region log must outlast the operator's absence; shorter than this, a night's outage would lose the state. */
    private static final Duration LEAST_LOG_KEPT = Duration.ofHours(1);

    /** What an entry of the region log has more than the part that it holds. */
    private static final int ENTRY_OVERHEAD_BYTES = 4 * 1024;

    private static final long FOREVER = -1;

    private final Topics topics;
    private final TopicNames names;

    /**
     * What was found.
     *
     * @param detectionPartitions of the detections
     * @param logPartitions       of the region log, and of everything that is partitioned by region
     * @param appendTimes         whether the records of the detections carry the time when the bus appended them
     */
    record Found(int detectionPartitions, int logPartitions, boolean appendTimes) {}

    Preflight(Topics topics, TopicNames names) {
        this.topics = topics;
        this.names = names;
    }

    /**
     * Looks at the topics.
     *
     * @throws OperatorStoppedException with a sentence for every fault
     */
    Found check() {
        int partitions = topics.partitions(names.regionLog()).orElse(1);
        List<TopicState> states = topics.look(TopicPlan.of(names, partitions));
        List<String> faults = new ArrayList<>();
        for (TopicState state : states) {
            faults.addAll(faults(state));
        }
        if (faults.isEmpty()) {
            sizes(states).ifPresent(faults::add);
            changelogs(partitions, faults);
        }
        if (!faults.isEmpty()) {
            throw new OperatorStoppedException(String.join("\n", faults));
        }
        TopicState detections = states.get(0);
        return new Found(detections.partitions(), partitions,
                "LogAppendTime".equals(detections.settings().get(TopicConfig.MESSAGE_TIMESTAMP_TYPE_CONFIG)));
    }

    private List<String> faults(TopicState state) {
        String topic = "topic " + state.plan().name();
        if (state.isMissing()) {
            return List.of(topic + " is missing: the command topics creates it");
        }
        List<String> faults = new ArrayList<>();
        if (state.plan().ours() && state.partitions() != state.plan().partitions()) {
            faults.add(topic + " has " + state.partitions() + " partitions, and " + state.plan().partitions()
                    + " are needed" + (state.plan().name().equals(names.settings())
                            ? "" : ", as many as " + names.regionLog() + " has"));
        }
        String policy = state.plan().settings().get(TopicConfig.CLEANUP_POLICY_CONFIG);
        String actual = state.settings().get(TopicConfig.CLEANUP_POLICY_CONFIG);
        if (policy != null && !policy.equals(actual)) {
            faults.add(topic + " has " + TopicConfig.CLEANUP_POLICY_CONFIG + " " + actual + ", and " + policy
                    + " is needed");
        }
        if (state.plan().name().equals(names.regionLog())) {
            faults.addAll(regionLog(state));
        }
        return faults;
    }

    private static List<String> regionLog(TopicState log) {
        List<String> faults = new ArrayList<>();
        String topic = "topic " + log.plan().name();
        long kept = log.number(TopicConfig.RETENTION_MS_CONFIG, FOREVER);
        if (kept != FOREVER && kept < LEAST_LOG_KEPT.toMillis()) {
            faults.add(topic + " has a retention (" + TopicConfig.RETENTION_MS_CONFIG + ") of " + kept
                    + " ms, and at least " + LEAST_LOG_KEPT.toMillis()
                    + " are needed: after a longer absence the regions could not be recovered from it");
        }
        if (!"LogAppendTime".equals(log.settings().get(TopicConfig.MESSAGE_TIMESTAMP_TYPE_CONFIG))) {
            faults.add(topic + " has " + TopicConfig.MESSAGE_TIMESTAMP_TYPE_CONFIG + " "
                    + log.settings().get(TopicConfig.MESSAGE_TIMESTAMP_TYPE_CONFIG)
                    + ", and LogAppendTime is needed: what was recorded long ago would be deleted at once");
        }
        long largest = log.number(TopicConfig.MAX_MESSAGE_BYTES_CONFIG, TopicPlan.LARGEST_ENTRY_BYTES);
        if (largest < TopicPlan.LARGEST_ENTRY_BYTES) {
            faults.add(topic + " has " + TopicConfig.MAX_MESSAGE_BYTES_CONFIG + " " + largest + ", and at least "
                    + TopicPlan.LARGEST_ENTRY_BYTES + " are needed");
        }
        return faults;
    }

    private Optional<String> sizes(List<TopicState> states) {
        TopicState detections = states.get(0);
        long part = detections.number(TopicConfig.MAX_MESSAGE_BYTES_CONFIG, 0);
        return part + ENTRY_OVERHEAD_BYTES <= TopicPlan.LARGEST_ENTRY_BYTES
                ? Optional.empty()
                : Optional.of("topic " + names.detections() + " allows messages of " + part + " bytes, and at most "
                        + (TopicPlan.LARGEST_ENTRY_BYTES - ENTRY_OVERHEAD_BYTES) + " are allowed ("
                        + TopicConfig.MAX_MESSAGE_BYTES_CONFIG + "): a part has to fit into " + names.regionLog());
    }

    /** The bus's library would say the same, but not so that a person understands it. */
    private void changelogs(int partitions, List<String> faults) {
        for (String store : List.of(RegionProcessor.SNAPSHOTS, RegionProcessor.PROGRESS)) {
            String changelog = names.changelog(store);
            topics.partitions(changelog).filter(actual -> actual != partitions).ifPresent(actual -> faults.add(
                    "topic " + names.regionLog() + " has " + partitions + " partitions, and the operator has run on "
                            + actual + " (" + changelog + "): the number cannot be changed under a running site"));
        }
    }
}
