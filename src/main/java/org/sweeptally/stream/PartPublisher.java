package org.sweeptally.stream;

import java.nio.charset.StandardCharsets;
import java.time.Duration;
import java.util.concurrent.atomic.AtomicReference;
import org.apache.kafka.clients.producer.KafkaProducer;
import org.apache.kafka.clients.producer.ProducerConfig;
import org.apache.kafka.clients.producer.ProducerRecord;
import org.apache.kafka.common.KafkaException;
import org.sweeptally.event.Part;
import org.sweeptally.region.wire.Wire;

/**
 * Publishes parts onto the detections as their sensors would: keyed by sensor, so that one sensor's parts stay on one
 * partition, in the order in which they are given. Not for several threads.
 */
public final class PartPublisher implements AutoCloseable {

    private final KafkaProducer<byte[], byte[]> producer;
    private final String topic;
    private final AtomicReference<Exception> failure = new AtomicReference<>();
    private long published;

    public PartPublisher(ClientSettings clients, String topic) {
        this.topic = topic;
        var settings = clients.producer(topic + "-publisher");
        settings.putIfAbsent(ProducerConfig.LINGER_MS_CONFIG, "5");
        settings.putIfAbsent(ProducerConfig.MAX_BLOCK_MS_CONFIG, "30000");
        settings.putIfAbsent(ProducerConfig.DELIVERY_TIMEOUT_MS_CONFIG, "60000");
        this.producer = new KafkaProducer<>(settings);
    }

    public String topic() {
        return topic;
    }

    /** How many parts were given so far. */
    public long published() {
        return published;
    }

    /**
     * Sends a part, soon.
     *
     * @throws OperatorStoppedException if an earlier part could not be sent
     */
    public void publish(Part part) {
        throwFailure();
        byte[] key = part.getSensor().getBytes(StandardCharsets.UTF_8);
        try {
            producer.send(new ProducerRecord<>(topic, key, Wire.encode(part)), (at, e) -> {
                if (e != null) {
                    failure.compareAndSet(null, e);
                }
            });
        } catch (KafkaException e) {
            failure.compareAndSet(null, e);
            throwFailure();
        }
        published++;
    }

    /**
     * Waits until all parts are on the bus.
     *
     * @throws OperatorStoppedException if one could not be sent
     */
    public void flush() {
        producer.flush();
        throwFailure();
    }

    private void throwFailure() {
        Exception e = failure.get();
        if (e != null) {
            throw new OperatorStoppedException("publishing to topic " + topic + " failed: " + e.getMessage(), e);
        }
    }

    @Override
    public void close() {
        producer.close(Duration.ofSeconds(5));
    }
}
