package org.sweeptally.demo;

import java.time.Duration;
import java.util.Collection;
import java.util.List;
import java.util.Map;
import org.apache.kafka.clients.consumer.ConsumerRecord;
import org.apache.kafka.clients.consumer.KafkaConsumer;
import org.apache.kafka.common.TopicPartition;
import org.sweeptally.stream.ClientSettings;

/** Reads topics from their beginning, committed records only, as any subscriber would. For one thread. */
final class OutputSubscriber implements AutoCloseable {

    private static final Duration PATIENCE = Duration.ofMillis(200);

    private final KafkaConsumer<byte[], byte[]> consumer;

    OutputSubscriber(ClientSettings clients, Collection<String> topics) {
        consumer = new KafkaConsumer<>(clients.consumer("demo-subscriber"));
        List<TopicPartition> partitions = topics.stream()
                .flatMap(topic -> consumer.partitionsFor(topic).stream())
                .map(info -> new TopicPartition(info.topic(), info.partition()))
                .toList();
        consumer.assign(partitions);
        consumer.seekToBeginning(partitions);
    }

    /** Takes a record with its topic. */
    interface Taker {
        void take(String topic, byte[] key, byte[] value);
    }

    /** Hands over what has come, after a short wait if there is nothing; how many records it was. */
    int poll(Taker taker) {
        int taken = 0;
        for (ConsumerRecord<byte[], byte[]> record : consumer.poll(PATIENCE)) {
            taker.take(record.topic(), record.key(), record.value());
            taken++;
        }
        return taken;
    }

    /** Hands over everything up to the present ends of the topics. */
    void readToEnd(Taker taker) {
        Map<TopicPartition, Long> ends = consumer.endOffsets(consumer.assignment());
        while (ends.entrySet().stream().anyMatch(end -> consumer.position(end.getKey()) < end.getValue())) {
            poll(taker);
        }
    }

    @Override
    public void close() {
        consumer.close();
    }
}
