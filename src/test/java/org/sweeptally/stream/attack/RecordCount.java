package org.sweeptally.stream.attack;

import java.time.Duration;
import java.util.List;
import org.apache.kafka.clients.consumer.KafkaConsumer;
import org.apache.kafka.common.TopicPartition;

/** Counts the committed records of a topic while they come. Not for several threads. */
final class RecordCount implements AutoCloseable {

    private final KafkaConsumer<byte[], byte[]> consumer;
    private long number;

    private RecordCount(String topic) {
        consumer = new KafkaConsumer<>(Bus.clients().consumer(topic + "-count"));
        consumer.assign(consumer.partitionsFor(topic).stream()
                .map(p -> new TopicPartition(topic, p.partition()))
                .toList());
    }

    /** Of all records that the topic has. */
    static RecordCount ofAll(String topic) {
        RecordCount count = new RecordCount(topic);
        count.consumer.seekToBeginning(List.of());
        return count;
    }

    /** Of the records that come from now on. */
    static RecordCount fromNow(String topic) {
        RecordCount count = new RecordCount(topic);
        count.consumer.seekToEnd(List.of());
        count.consumer.assignment().forEach(count.consumer::position);
        return count;
    }

    /** How many there are by now, or were a moment ago. */
    long now() {
        number += consumer.poll(Duration.ofMillis(20)).count();
        return number;
    }

    @Override
    public void close() {
        consumer.close();
    }
}
