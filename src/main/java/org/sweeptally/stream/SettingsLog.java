package org.sweeptally.stream;

import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.function.Consumer;
import org.apache.kafka.clients.consumer.CloseOptions;
import org.apache.kafka.clients.consumer.ConsumerRecord;
import org.apache.kafka.clients.consumer.KafkaConsumer;
import org.apache.kafka.common.KafkaException;
import org.apache.kafka.common.TopicPartition;
import org.apache.kafka.common.errors.InterruptException;

/** Reads the compacted settings topic, which has one partition, from its beginning, as far as it is committed. */
final class SettingsLog implements AutoCloseable {

    private static final Duration POLL = Duration.ofMillis(100);
    private static final Duration PATIENCE = Duration.ofSeconds(30);

    private final String topic;
    private final TopicPartition partition;
    private final KafkaConsumer<byte[], byte[]> consumer;

    SettingsLog(ClientSettings clients, String topic) {
        this.topic = topic;
        this.partition = new TopicPartition(topic, 0);
        this.consumer = new KafkaConsumer<>(clients.consumer(topic + "-reader"));
        consumer.assign(List.of(partition));
        consumer.seekToBeginning(List.of(partition));
    }

    /**
     * What was written since the last call and before this one.
     *
     * @throws OperatorStoppedException if the topic cannot be read, or holds what is no settings
     */
    List<Revision> news() {
        List<Revision> news = new ArrayList<>();
        try {
            Map<TopicPartition, Long> ends = consumer.endOffsets(List.of(partition));
            long begin = System.nanoTime();
            while (consumer.position(partition) < ends.get(partition)) {
                read(news::add);
                if (System.nanoTime() - begin > PATIENCE.toNanos()) {
                    throw new OperatorStoppedException("topic " + topic + " cannot be read to its end within "
                            + PATIENCE.toSeconds() + " s");
                }
            }
        } catch (InterruptException e) {
            throw e;
        } catch (KafkaException e) {
            throw new OperatorStoppedException("topic " + topic + " cannot be read: " + e.getMessage(), e);
        }
        return news;
    }

    private void read(Consumer<Revision> found) {
        for (ConsumerRecord<byte[], byte[]> record : consumer.poll(POLL)) {
            if (record.value() != null) {
                found.accept(Revision.read(topic, record.value()));
            }
        }
    }

    @Override
    public void close() {
        consumer.close(CloseOptions.timeout(Duration.ZERO));
    }
}
