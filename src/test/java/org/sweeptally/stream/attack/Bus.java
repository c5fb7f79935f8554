package org.sweeptally.stream.attack;

import java.time.Duration;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.TimeoutException;
import java.util.function.Consumer;
import java.util.stream.IntStream;
import org.apache.kafka.clients.admin.Admin;
import org.apache.kafka.clients.admin.OffsetSpec;
import org.apache.kafka.clients.consumer.ConsumerRecord;
import org.apache.kafka.clients.consumer.KafkaConsumer;
import org.apache.kafka.common.KafkaFuture;
import org.apache.kafka.common.TopicPartition;
import org.sweeptally.stream.ClientSettings;
import org.sweeptally.stream.TestBus;

/** The broker that the attacked operators run beside, and what stands on it. */
final class Bus {

    /** Short, so that a killed operator is missed soon. They hold for the operators and the tests' own clients. */
    static final Map<String, String> SHORT_TIMES = Map.of(
            "consumer.session.timeout.ms", "1500",
            "consumer.heartbeat.interval.ms", "400",
            "producer.transaction.timeout.ms", "4000");

    private Bus() {}

    static String address() {
        return TestBus.address();
    }

    static ClientSettings clients() {
        Map<String, String> given = new LinkedHashMap<>(SHORT_TIMES);
        given.put("bootstrap.servers", address());
        return new ClientSettings(given);
    }

    /** Every committed record of a topic, partition by partition, each in its order. */
    static List<ConsumerRecord<byte[], byte[]>> committed(String topic) {
        List<ConsumerRecord<byte[], byte[]>> records = new ArrayList<>();
        try (KafkaConsumer<byte[], byte[]> consumer = consumer(topic)) {
            int partitions = consumer.partitionsFor(topic).size();
            IntStream.range(0, partitions).forEach(p -> read(consumer, new TopicPartition(topic, p), records::add));
        }
        return records;
    }

    private static void read(
            KafkaConsumer<byte[], byte[]> consumer,
            TopicPartition partition,
            Consumer<ConsumerRecord<byte[], byte[]>> sink) {
        consumer.assign(List.of(partition));
        consumer.seekToBeginning(List.of(partition));
        long end = consumer.endOffsets(List.of(partition)).get(partition);
        while (consumer.position(partition) < end) {
            consumer.poll(Duration.ofMillis(100)).forEach(sink);
        }
    }

    /** Offset where each partition of a topic ends. */
    static List<Long> ends(String topic) {
        Map<TopicPartition, OffsetSpec> asked = new LinkedHashMap<>();
        partitions(topic).forEach(partition -> asked.put(partition, OffsetSpec.latest()));
        var ends = get(Asking.ADMIN.listOffsets(asked).all());
        return asked.keySet().stream().map(partition -> ends.get(partition).offset()).toList();
    }

    /** Offsets up to which a group has committed the partitions of a topic; 0 where it has committed nothing. */
    static List<Long> committedOffsets(String group, String topic) {
        var offsets = get(Asking.ADMIN.listConsumerGroupOffsets(group).partitionsToOffsetAndMetadata());
        return partitions(topic).stream()
                .map(offsets::get)
                .map(offset -> offset == null ? 0 : offset.offset())
                .toList();
    }

    private static List<TopicPartition> partitions(String topic) {
        var description = get(Asking.ADMIN.describeTopics(List.of(topic)).allTopicNames()).get(topic);
        int partitions = description.partitions().size();
        return IntStream.range(0, partitions).mapToObj(p -> new TopicPartition(topic, p)).toList();
    }

    /** One client for all questions, ended with the virtual machine. */
    private static final class Asking {
        static final Admin ADMIN = Admin.create(Map.of("bootstrap.servers", address()));
    }

    private static <T> T get(KafkaFuture<T> answer) {
        try {
            return answer.get(60, TimeUnit.SECONDS);
        } catch (ExecutionException | TimeoutException e) {
            throw new IllegalStateException("the bus does not answer", e);
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
            throw new IllegalStateException(e);
        }
    }

    private static KafkaConsumer<byte[], byte[]> consumer(String topic) {
        return new KafkaConsumer<>(clients().consumer(topic + "-attack"));
    }
}
