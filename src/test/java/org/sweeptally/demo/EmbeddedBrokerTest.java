package org.sweeptally.demo;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import org.apache.kafka.clients.admin.Admin;
import org.apache.kafka.clients.admin.NewTopic;
import org.apache.kafka.clients.consumer.KafkaConsumer;
import org.apache.kafka.clients.producer.KafkaProducer;
import org.apache.kafka.clients.producer.ProducerRecord;
import org.apache.kafka.common.TopicPartition;
import org.apache.kafka.common.serialization.ByteArrayDeserializer;
import org.apache.kafka.common.serialization.ByteArraySerializer;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class EmbeddedBrokerTest {

    @Test
    void whatATransactionCommitsIsReadAndWhatItAbortsIsNot(@TempDir Path folder) throws Exception {
        try (EmbeddedBroker broker = EmbeddedBroker.start(folder.resolve("broker"))) {
            Map<String, Object> bus = Map.of("bootstrap.servers", broker.bootstrapServers());
            try (Admin admin = Admin.create(bus)) {
                admin.createTopics(List.of(new NewTopic("words", 1, (short) 1))).all().get();
            }
            write(broker);
            assertThat(read(broker)).containsExactly("kept");
        }
    }

    @Test
    void nothingIsLeftOnTheDiskAndASecondOneMayFollow(@TempDir Path folder) throws Exception {
        for (int n = 0; n < 2; n++) {
            Path of = folder.resolve("broker");
            try (EmbeddedBroker broker = EmbeddedBroker.start(of)) {
                assertThat(of).isNotEmptyDirectory();
                assertThat(broker.bootstrapServers()).startsWith("127.0.0.1:");
            }
            assertThat(Files.exists(of)).isFalse();
        }
    }

    private static void write(EmbeddedBroker broker) {
        Map<String, Object> settings = Map.of("bootstrap.servers", broker.bootstrapServers(), "transactional.id", "t");
        ByteArraySerializer bytes = new ByteArraySerializer();
        try (KafkaProducer<byte[], byte[]> producer = new KafkaProducer<>(settings, bytes, bytes)) {
            producer.initTransactions();
            producer.beginTransaction();
            producer.send(new ProducerRecord<>("words", "dropped".getBytes(StandardCharsets.UTF_8)));
            producer.flush();
            producer.abortTransaction();
            producer.beginTransaction();
            producer.send(new ProducerRecord<>("words", "kept".getBytes(StandardCharsets.UTF_8)));
            producer.commitTransaction();
        }
    }

    private static List<String> read(EmbeddedBroker broker) {
        Map<String, Object> settings = Map.of(
                "bootstrap.servers", broker.bootstrapServers(),
                "isolation.level", "read_committed",
                "auto.offset.reset", "earliest");
        ByteArrayDeserializer bytes = new ByteArrayDeserializer();
        TopicPartition words = new TopicPartition("words", 0);
        List<String> read = new ArrayList<>();
        try (KafkaConsumer<byte[], byte[]> consumer = new KafkaConsumer<>(settings, bytes, bytes)) {
            consumer.assign(List.of(words));
            long end = consumer.endOffsets(List.of(words)).get(words);
            while (consumer.position(words) < end) {
                consumer.poll(Duration.ofMillis(100)).forEach(record ->
                        read.add(new String(record.value(), StandardCharsets.UTF_8)));
            }
        }
        return read;
    }
}
