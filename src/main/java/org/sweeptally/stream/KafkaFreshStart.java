package org.sweeptally.stream;

import java.time.Duration;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalLong;
import java.util.Set;
import org.apache.kafka.clients.consumer.CloseOptions;
import org.apache.kafka.clients.consumer.ConsumerConfig;
import org.apache.kafka.clients.consumer.ConsumerRecord;
import org.apache.kafka.clients.consumer.KafkaConsumer;
import org.apache.kafka.clients.consumer.OffsetAndMetadata;
import org.apache.kafka.common.TopicPartition;

/**
 * Asks the bus. State, outputs and the group's offset are committed together; so where the group has taken entries in
 * and no state is there, somebody deleted the state, and regions that began from nothing would publish what is wrong.
 */
final class KafkaFreshStart implements FreshStart {

    private static final Duration POLL = Duration.ofMillis(100);

    private final ClientSettings clients;
    private final TopicNames names;

    KafkaFreshStart(ClientSettings clients, TopicNames names) {
        this.clients = clients;
        this.names = names;
    }

    @Override
    public Optional<String> refusal(int partition) {
        TopicPartition log = new TopicPartition(names.regionLog(), partition);
        KafkaConsumer<byte[], byte[]> consumer = new KafkaConsumer<>(settings(partition));
        try {
            return refusal(consumer, log);
        } finally {
            consumer.close(CloseOptions.timeout(Duration.ZERO));
        }
    }

    private Map<String, Object> settings(int partition) {
        Map<String, Object> settings = clients.consumer(names.regionLog() + "-beginning-" + partition);
        // In the group only to ask what it has committed; it never joins.
        settings.put(ConsumerConfig.GROUP_ID_CONFIG, names.applicationId());
        settings.put(ConsumerConfig.MAX_POLL_RECORDS_CONFIG, "1");
        return settings;
    }

    private Optional<String> refusal(KafkaConsumer<byte[], byte[]> consumer, TopicPartition log) {
        String state = "and the state made from it is not there (" + names.changelog(RegionProcessor.PROGRESS) + ", "
                + names.changelog(RegionProcessor.SNAPSHOTS) + "): ";
        long begin = consumer.beginningOffsets(List.of(log)).get(log);
        if (begin > 0) {
            return Optional.of("it begins at offset " + begin + ", what came before has been deleted, " + state
                    + "its regions would begin in the middle");
        }
        OffsetAndMetadata committed = consumer.committed(Set.of(log)).get(log);
        long next = committed == null ? 0 : committed.offset();
        OptionalLong first = firstBefore(consumer, log, next);
        return first.isEmpty()
                ? Optional.empty()
                : Optional.of("group " + names.applicationId() + " has taken it in from offset " + first.getAsLong()
                        + " to " + (next - 1) + ", " + state + "its regions would begin in the middle, as if nothing"
                        + " had been");
    }

    /** Offset of the first record before another offset: the bus uses some offsets for itself. */
    private static OptionalLong firstBefore(KafkaConsumer<byte[], byte[]> consumer, TopicPartition log, long end) {
        consumer.assign(List.of(log));
        consumer.seek(log, 0);
        while (consumer.position(log) < end) {
            for (ConsumerRecord<byte[], byte[]> record : consumer.poll(POLL)) {
                if (record.offset() < end) {
                    return OptionalLong.of(record.offset());
                }
            }
        }
        return OptionalLong.empty();
    }
}
