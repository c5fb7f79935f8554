package org.sweeptally.stream;

import java.time.Duration;
import java.util.Map;
import java.util.Set;
import java.util.TreeMap;
import java.util.TreeSet;
import java.util.concurrent.ConcurrentHashMap;
import org.apache.kafka.clients.consumer.CloseOptions;
import org.apache.kafka.clients.consumer.Consumer;
import org.apache.kafka.clients.consumer.KafkaConsumer;
import org.apache.kafka.common.KafkaException;
import org.apache.kafka.common.TopicPartition;
import org.apache.kafka.common.errors.InterruptException;
import org.apache.kafka.common.errors.WakeupException;
import org.slf4j.Logger;
import org.slf4j.LoggerFactory;

/**
 * Asks the bus every minute where the region log begins, and says when it no longer reaches back to where it would have
 * to be applied again: from then until the next snapshots a failure would lose the regions of that partition.
 */
final class RetentionWatch implements TailStarts, AutoCloseable {

    private static final Logger LOG = LoggerFactory.getLogger(RetentionWatch.class);

    private static final Duration PERIOD = Duration.ofMinutes(1);
    private static final Duration CLOSING = Duration.ofSeconds(5);

    private final String topic;
    private final Consumer<byte[], byte[]> consumer;
    private final java.util.function.Consumer<String> says;
    private final Map<Integer, Long> tailStarts = new ConcurrentHashMap<>();
    private final Set<Integer> cut = new TreeSet<>();
    private final Thread thread = new Thread(this::run, "retention-watch");

    RetentionWatch(ClientSettings clients, String topic, java.util.function.Consumer<String> says) {
        this(new KafkaConsumer<>(clients.consumer(topic + "-retention-watch")), topic, says);
    }

    RetentionWatch(Consumer<byte[], byte[]> consumer, String topic, java.util.function.Consumer<String> says) {
        this.consumer = consumer;
        this.topic = topic;
        this.says = says;
        thread.setDaemon(true);
    }

    void start() {
        thread.start();
    }

    @Override
    public void startsAt(int partition, long offset) {
        tailStarts.put(partition, offset);
    }

    @Override
    public void ends(int partition) {
        tailStarts.remove(partition);
    }

    private void run() {
        try {
            while (true) {
                Thread.sleep(PERIOD.toMillis());
                lookPatiently();
            }
        } catch (InterruptedException | InterruptException | WakeupException e) {
            // Closed.
        }
    }

    private void lookPatiently() {
        try {
            look();
        } catch (InterruptException | WakeupException e) {
            throw e;
        } catch (KafkaException e) {
            LOG.warn("the beginning of {} could not be asked for: {}", topic, e.getMessage());
        }
    }

    /** Looks once; says something about a partition once, until it is well again. */
    void look() {
        Map<Integer, Long> needed = new TreeMap<>(tailStarts);
        Map<TopicPartition, Long> begins = consumer.beginningOffsets(
                needed.keySet().stream().map(partition -> new TopicPartition(topic, partition)).toList());
        needed.forEach((partition, from) -> {
            long begin = begins.get(new TopicPartition(topic, partition));
            if (begin <= from) {
                cut.remove(partition);
            } else if (cut.add(partition)) {
                says.accept("partition " + partition + " of " + topic + " begins at offset " + begin
                        + ", and is needed from offset " + from + ": its retention is too short; if the operator failed"
                        + " now, the regions on it could not be recovered");
            }
        });
    }

    @Override
    public void close() {
        consumer.wakeup();
        thread.interrupt();
        try {
            thread.join(CLOSING.toMillis());
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
        }
        if (!thread.isAlive()) {
            consumer.close(CloseOptions.timeout(Duration.ZERO));
        }
    }
}
