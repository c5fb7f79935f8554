package org.sweeptally.stream;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.Future;
import java.util.concurrent.atomic.AtomicInteger;
import org.apache.kafka.clients.producer.KafkaProducer;
import org.apache.kafka.clients.producer.ProducerRecord;
import org.apache.kafka.clients.producer.RecordMetadata;
import org.sweeptally.demo.EmbeddedBroker;
import org.sweeptally.event.Part;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/** One broker for all tests of a virtual machine; every test has a site, and topics, of its own name. */
public final class TestBus {

    private static final AtomicInteger SITES = new AtomicInteger();

    private TestBus() {}

    /** Begun when first asked for, ended with the virtual machine. */
    private static final class Holder {
        static final EmbeddedBroker BROKER = start();

        private static EmbeddedBroker start() {
            try {
                EmbeddedBroker broker = EmbeddedBroker.start(Files.createTempDirectory("test-bus"));
                Runtime.getRuntime().addShutdownHook(new Thread(broker::close));
                return broker;
            } catch (IOException e) {
                throw new UncheckedIOException(e);
            }
        }
    }

    /** Where the broker is found; it is begun when first asked for. */
    public static String address() {
        return Holder.BROKER.bootstrapServers();
    }

    /** A name that no other site on the bus has. */
    static String newSiteName() {
        return "site-" + SITES.incrementAndGet();
    }

    /** Clients of the bus, with further properties: keys and values by turns. */
    static ClientSettings clients(String... further) {
        Map<String, String> given = new LinkedHashMap<>();
        given.put("bootstrap.servers", address());
        given.put("consumer.session.timeout.ms", "3000");
        given.put("consumer.heartbeat.interval.ms", "700");
        given.put("producer.transaction.timeout.ms", "5000");
        for (int i = 0; i < further.length; i += 2) {
            given.put(further[i], further[i + 1]);
        }
        return new ClientSettings(given);
    }

    /** Names of a site with a topic of parts of its own. */
    static TopicNames names(Site site) {
        return new TopicNames(site.name(), site.name() + "-detections");
    }

    /** Creates all topics of a site. */
    static void createTopics(Site site, int detectionPartitions, int regionPartitions) {
        try (Topics topics = new Topics(clients())) {
            topics.create(TopicPlan.of(names(site), regionPartitions).stream()
                    .map(plan -> plan.ours()
                            ? plan
                            : new TopicPlan(plan.name(), plan.purpose(), false, detectionPartitions, plan.settings()))
                    .toList());
        }
    }

    /** Publishes parts as their sensors would. */
    static void publish(Site site, List<Part> parts) {
        try (PartPublisher publisher = new PartPublisher(clients(), names(site).detections())) {
            parts.forEach(publisher::publish);
            publisher.flush();
        }
    }

    /** Publishes parts to one partition. */
    static void publish(Site site, int partition, List<Part> parts) {
        sendAll(names(site).detections(), partition, parts.stream().map(Wire::encode).toList());
    }

    /** Puts records without a key on a partition of any topic. */
    static void sendAll(String topic, int partition, List<byte[]> values, String... producerSettings) {
        try (KafkaProducer<byte[], byte[]> producer =
                new KafkaProducer<>(clients(producerSettings).producer("test-producer"))) {
            List<Future<RecordMetadata>> sent = new ArrayList<>();
            values.forEach(value -> sent.add(producer.send(new ProducerRecord<>(topic, partition, null, value))));
            for (Future<RecordMetadata> one : sent) {
                one.get();
            }
        } catch (InterruptedException | ExecutionException e) {
            throw new IllegalStateException(e);
        }
    }
}
