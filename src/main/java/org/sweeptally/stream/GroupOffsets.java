package org.sweeptally.stream;

import java.time.Duration;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.TreeSet;
import org.apache.kafka.clients.consumer.CloseOptions;
import org.apache.kafka.clients.consumer.ConsumerConfig;
import org.apache.kafka.clients.consumer.KafkaConsumer;
import org.apache.kafka.common.KafkaException;
import org.apache.kafka.common.TopicPartition;

/**
 * Checks that the group's offsets are there where its state is. A bus forgets the offsets of a group that was away for
 * long (7 days, usually); the operator would then read all parts again that are still there.
 */
final class GroupOffsets {

    private static final Duration POLL = Duration.ofMillis(100);

    private final ClientSettings clients;
    private final TopicNames names;

    GroupOffsets(ClientSettings clients, TopicNames names) {
        this.clients = clients;
        this.names = names;
    }

    /**
     * Checks all partitions of the region log. State is looked at first: whoever runs meanwhile commits both together.
     *
     * @throws OperatorStoppedException if the offsets of one are lost, or the bus cannot be asked
     */
    void check(Topics topics, int logPartitions) {
        String changelog = names.changelog(RegionProcessor.PROGRESS);
        if (topics.partitions(changelog).isEmpty()) {
            return;
        }
        Set<Integer> without = new TreeSet<>();
        for (int partition = 0; partition < logPartitions; partition++) {
            without.add(partition);
        }
        without.removeAll(topics.committed(names.applicationId(), names.regionLog(), false));
        without.removeIf(partition -> !holdsRecords(new TopicPartition(changelog, partition)));
        if (!without.isEmpty()) {
            // What a process that died was about to commit is waited for.
            without.removeAll(topics.committed(names.applicationId(), names.regionLog(), true));
        }
        if (!without.isEmpty()) {
            throw new OperatorStoppedException("group " + names.applicationId() + " has no offsets on partitions "
                    + without + " of " + names.regionLog() + ", and the state made from them is there (" + changelog
                    + "): the bus has forgotten them, as it does after a long absence, or somebody deleted them; all"
                    + " parts would be read again. Set them to where the state ends, or delete the topics of the site"
                    + " and begin anew");
        }
    }

    private boolean holdsRecords(TopicPartition partition) {
        Map<String, Object> settings = clients.consumer(partition.topic() + "-look");
        settings.put(ConsumerConfig.MAX_POLL_RECORDS_CONFIG, "1");
        KafkaConsumer<byte[], byte[]> consumer = new KafkaConsumer<>(settings);
        try {
            consumer.assign(List.of(partition));
            consumer.seekToBeginning(List.of(partition));
            long end = consumer.endOffsets(List.of(partition)).get(partition);
            while (consumer.position(partition) < end) {
                if (!consumer.poll(POLL).isEmpty()) {
                    return true;
                }
            }
            return false;
        } catch (KafkaException e) {
            throw new OperatorStoppedException("topic " + partition.topic() + " cannot be read: " + e.getMessage(), e);
        } finally {
            consumer.close(CloseOptions.timeout(Duration.ZERO));
        }
    }
}
