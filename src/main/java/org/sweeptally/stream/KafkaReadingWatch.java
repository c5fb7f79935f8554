package org.sweeptally.stream;

import java.time.Duration;
import java.util.List;
import java.util.Map;
import java.util.OptionalLong;
import java.util.Set;
import java.util.concurrent.ConcurrentHashMap;
import java.util.concurrent.atomic.AtomicLong;
import org.apache.kafka.clients.consumer.CloseOptions;
import org.apache.kafka.clients.consumer.Consumer;
import org.apache.kafka.clients.consumer.ConsumerConfig;
import org.apache.kafka.clients.consumer.KafkaConsumer;
import org.apache.kafka.clients.consumer.OffsetAndMetadata;
import org.apache.kafka.common.KafkaException;
import org.apache.kafka.common.TopicPartition;
import org.apache.kafka.common.errors.InterruptException;
import org.apache.kafka.common.errors.WakeupException;
import org.slf4j.Logger;
import org.slf4j.LoggerFactory;

/**
 * Asks the bus every second where the partitions of the detections end, with a consumer and a thread of its own. A
 * partition had been read to its end at the moment of the question once the router has got to the offset of the answer.
 *
 * <p>The last offsets before the end may hold no record (a sender's transactions leave marks there). Where the router
 * stands still before the end, the consumer reads from there itself, and finds whether anything is left. Where the
 * router has not routed anything yet, it stands where the group last committed.
 */
final class KafkaReadingWatch implements ReadingWatch, AutoCloseable {

    private static final Logger LOG = LoggerFactory.getLogger(KafkaReadingWatch.class);

    private static final Duration PERIOD = Duration.ofSeconds(1);
    private static final Duration LOOK = Duration.ofMillis(500);
    private static final long UNKNOWN = -1;

    private final String topic;
    private final Consumer<byte[], byte[]> consumer;
    private final Set<KafkaReading> readings = ConcurrentHashMap.newKeySet();
    private final Thread thread;
    private volatile int partitions;
    private volatile boolean closing;

    /** Offset of the next record to route, by its router, and the last answer of the bus. */
    private final class KafkaReading implements Reading {
        private final int partition;
        private final AtomicLong next = new AtomicLong(UNKNOWN);
        private volatile Answer answer;

        private KafkaReading(int partition) {
            this.partition = partition;
        }

        @Override
        public void routed(long offset) {
            next.set(offset + 1);
        }

        @Override
        public OptionalLong readToEndAt() {
            Answer latest = answer;
            boolean reached = latest != null && latest.isReachedBy(next.get());
            return reached ? OptionalLong.of(latest.askedMicros()) : OptionalLong.empty();
        }

        @Override
        public void ends() {
            readings.remove(this);
        }
    }

    /**
     * An answer of the bus.
     *
     * @param askedMicros when it was asked
     * @param end         offset where the partition ended
     * @param emptyFrom   from this offset to the end there was no record
     */
    private record Answer(long askedMicros, long end, long emptyFrom) {

        boolean isReachedBy(long next) {
            return next >= end || next >= emptyFrom;
        }
    }

    KafkaReadingWatch(ClientSettings clients, TopicNames names, int partitions) {
        this(new KafkaConsumer<>(settings(clients, names)), names, partitions);
    }

    KafkaReadingWatch(Consumer<byte[], byte[]> consumer, TopicNames names, int partitions) {
        this.topic = names.detections();
        this.partitions = partitions;
        this.consumer = consumer;
        this.thread = new Thread(this::run, "reading-watch");
        this.thread.setDaemon(true);
    }

    private static Map<String, Object> settings(ClientSettings clients, TopicNames names) {
        Map<String, Object> settings = clients.consumer(names.applicationId() + "-reading-watch");
        // In the group only to ask what it has committed; it never joins.
        settings.put(ConsumerConfig.GROUP_ID_CONFIG, names.applicationId());
        settings.put(ConsumerConfig.MAX_POLL_RECORDS_CONFIG, "1");
        settings.put(ConsumerConfig.MAX_PARTITION_FETCH_BYTES_CONFIG, Integer.toString(64 * 1024));
        return settings;
    }

    void start() {
        thread.start();
    }

    @Override
    public Reading begins(int partition) {
        KafkaReading reading = new KafkaReading(partition);
        readings.add(reading);
        return reading;
    }

    @Override
    public int partitions() {
        return partitions;
    }

    private void run() {
        while (!closing) {
            try {
                partitions = Math.max(partitions, consumer.partitionsFor(topic).size());
                ask();
                Thread.sleep(PERIOD.toMillis());
            } catch (WakeupException | InterruptException | InterruptedException e) {
                return;
            } catch (KafkaException e) {
                // Without an answer nobody is taken to be silent; the next question may have more luck.
                LOG.warn("the end of {} could not be asked for: {}", topic, e.getMessage());
                pause();
            }
        }
    }

    private void pause() {
        try {
            Thread.sleep(PERIOD.toMillis());
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
        }
    }

    /** Asks once. */
    void ask() {
        List<KafkaReading> asked = List.copyOf(readings);
        if (asked.isEmpty()) {
            return;
        }
        asked.forEach(this::begin);
        List<TopicPartition> ours = asked.stream().map(this::partition).distinct().toList();
        long askedMicros = System.currentTimeMillis() * 1000;
        Map<TopicPartition, Long> ends = consumer.endOffsets(ours);
        for (KafkaReading reading : asked) {
            long end = ends.get(partition(reading));
            long next = reading.next.get();
            long emptyFrom = next == UNKNOWN || next >= end || !isEmpty(partition(reading), next, end) ? end : next;
            reading.answer = new Answer(askedMicros, end, emptyFrom);
        }
    }

    private TopicPartition partition(KafkaReading reading) {
        return new TopicPartition(topic, reading.partition);
    }

    /** Finds where a partition begins of which nothing has been routed here. */
    private void begin(KafkaReading reading) {
        if (reading.next.get() != UNKNOWN) {
            return;
        }
        TopicPartition partition = partition(reading);
        OffsetAndMetadata committed = consumer.committed(Set.of(partition)).get(partition);
        long begin = committed == null
                ? consumer.beginningOffsets(List.of(partition)).get(partition)
                : committed.offset();
        // The router may have routed something meanwhile, and knows better.
        reading.next.compareAndSet(UNKNOWN, begin);
    }

    /** What the owner of the detections has deleted unread is no longer left to read. */
    private boolean isEmpty(TopicPartition partition, long from, long end) {
        consumer.assign(List.of(partition));
        long begin = consumer.beginningOffsets(List.of(partition)).get(partition);
        if (begin >= end) {
            return true;
        }
        consumer.seek(partition, Math.max(from, begin));
        long until = System.nanoTime() + LOOK.toNanos();
        while (consumer.position(partition) < end && System.nanoTime() < until) {
            if (!consumer.poll(Duration.ofMillis(50)).isEmpty()) {
                return false;
            }
        }
        return consumer.position(partition) >= end;
    }

    @Override
    public void close() {
        closing = true;
        consumer.wakeup();
        thread.interrupt();
        try {
            thread.join(PERIOD.multipliedBy(5).toMillis());
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
        }
        if (!thread.isAlive()) {
            consumer.close(CloseOptions.timeout(Duration.ZERO));
        }
    }
}
