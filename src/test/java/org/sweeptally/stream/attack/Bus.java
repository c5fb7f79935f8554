package org.sweeptally.stream.attack;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.time.Duration;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.concurrent.ExecutionException;
import java.util.function.Consumer;
import java.util.stream.IntStream;
import org.apache.kafka.clients.admin.Admin;
import org.apache.kafka.clients.consumer.ConsumerRecord;
import org.apache.kafka.clients.consumer.KafkaConsumer;
import org.apache.kafka.common.TopicPartition;
import org.sweeptally.demo.EmbeddedBroker;
import org.sweeptally.stream.ClientSettings;

/** The broker that the attacked operators run beside, one for all tests of a virtual machine. */
final class Bus {

    /** Short, so that a killed operator is missed soon. They hold for the operators and the tests' own clients. */
    static final Map<String, String> SHORT_TIMES = Map.of(
            "consumer.session.timeout.ms", "1500",
            "consumer.heartbeat.interval.ms", "400",
            "producer.transaction.timeout.ms", "4000");

    private Bus() {}

    /** Begun when first asked for, ended with the virtual machine. */
    private static final class Holder {
        static final EmbeddedBroker BROKER = start();

        private static EmbeddedBroker start() {
            try {
                EmbeddedBroker broker = EmbeddedBroker.start(Files.createTempDirectory("attacked-bus"));
                Runtime.getRuntime().addShutdownHook(new Thread(broker::close));
                return broker;
            } catch (IOException e) {
                throw new UncheckedIOException(e);
            }
        }
    }

    static String address() {
        return Holder.BROKER.bootstrapServers();
    }

    static ClientSettings clients() {
        Map<String, String> given = new LinkedHashMap<>(SHORT_TIMES);
        given.put("bootstrap.servers", address());
        return new ClientSettings(given);
    }

    static Admin admin() {
        return Admin.create(Map.of("bootstrap.servers", address()));
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
        try (KafkaConsumer<byte[], byte[]> consumer = consumer(topic)) {
            List<TopicPartition> partitions = consumer.partitionsFor(topic).stream()
                    .map(p -> new TopicPartition(topic, p.partition()))
                    .toList();
            Map<TopicPartition, Long> ends = consumer.endOffsets(partitions);
            return partitions.stream().map(ends::get).toList();
        }
    }

    /** Offsets up to which a group has committed the partitions of a topic; 0 where it has committed nothing. */
    static List<Long> committedOffsets(String group, String topic) {
        try (Admin admin = admin(); KafkaConsumer<byte[], byte[]> consumer = consumer(topic)) {
            var offsets = admin.listConsumerGroupOffsets(group).partitionsToOffsetAndMetadata().get();
            return consumer.partitionsFor(topic).stream()
                    .map(p -> offsets.get(new TopicPartition(topic, p.partition())))
                    .map(offset -> offset == null ? 0 : offset.offset())
                    .toList();
        } catch (ExecutionException e) {
            throw new IllegalStateException("the group " + group + " cannot be asked", e);
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
            throw new IllegalStateException(e);
        }
    }

    private static KafkaConsumer<byte[], byte[]> consumer(String topic) {
        return new KafkaConsumer<>(clients().consumer(topic + "-attack"));
    }
}
