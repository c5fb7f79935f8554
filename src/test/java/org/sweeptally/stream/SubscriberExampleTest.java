package org.sweeptally.stream;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import java.util.Properties;
import java.util.function.BooleanSupplier;
import java.util.function.Consumer;
import org.apache.kafka.clients.consumer.KafkaConsumer;
import org.apache.kafka.common.serialization.ByteArrayDeserializer;
import org.apache.kafka.common.serialization.StringDeserializer;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.event.Count;
import org.sweeptally.event.Part;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/** The subscriber that the README shows, run as it stands there. */
class SubscriberExampleTest {

    private static final Duration PATIENCE = Duration.ofSeconds(90);
    private static final Path SOURCE =
            Path.of("src/test/java/org/sweeptally/stream/SubscriberExampleTest.java");

    @TempDir
    private Path folder;

    /** What is between the two marks is in the README. */
    private static void subscribe(String bus, String topic, BooleanSupplier goesOn, Consumer<Count> use) {
        // begin of the example
        Properties settings = new Properties();
        settings.put("bootstrap.servers", bus);
        settings.put("group.id", "harbour-office");
        settings.put("auto.offset.reset", "earliest");
        settings.put("isolation.level", "read_committed");
        try (var consumer = new KafkaConsumer<>(settings, new StringDeserializer(), new ByteArrayDeserializer())) {
            consumer.subscribe(List.of(topic));
            while (goesOn.getAsBoolean()) {
                for (var record : consumer.poll(Duration.ofMillis(200))) {
                    use.accept(Wire.decode(record.value(), Count.class));
                }
            }
        }
        // end of the example
    }

    @Test
    void itReadsEveryCountOfTheRecording() {
        Site site = TestSite.estuary();
        List<Part> parts = TestSite.recording(site);
        long expected = DryRunOf.of(site, parts).counts();
        TestBus.createTopics(site, 1, 1);
        TestBus.publish(site, parts);
        List<Count> counts = new ArrayList<>();
        long begin = System.nanoTime();
        try (Operator operator = new Operator(
                new OperatorSettings(site, TestBus.names(site), TestBus.clients(), folder), said -> { })) {
            operator.start();
            subscribe(TestBus.address(), TestBus.names(site).counts(),
                    () -> counts.size() < expected && System.nanoTime() - begin < PATIENCE.toNanos(), counts::add);
        }
        assertThat(expected).isPositive();
        assertThat(counts).hasSize((int) expected);
        for (int i = 0; i < counts.size(); i++) {
            assertThat(counts.get(i).getSequence()).isEqualTo(counts.get(0).getSequence() + i);
        }
    }

    @Test
    void theReadmeShowsIt() throws IOException {
        String source = Files.readString(SOURCE);
        int begin = source.indexOf("begin of the example\n") + "begin of the example\n".length();
        String example = source.substring(begin, source.lastIndexOf("\n", source.indexOf("// end of the example")))
                .stripIndent();
        assertThat(example).contains("read_committed");
        assertThat(Files.readString(Path.of("README.md"))).contains("```java\n" + example + "\n```\n");
    }
}
