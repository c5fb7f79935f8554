package org.sweeptally.replay;

import java.time.Duration;
import java.util.ArrayDeque;
import java.util.Deque;
import java.util.List;
import java.util.Map;
import java.util.OptionalLong;
import java.util.concurrent.ExecutionException;
import java.util.function.Function;
import org.apache.kafka.clients.admin.Admin;
import org.apache.kafka.clients.admin.ListOffsetsOptions;
import org.apache.kafka.clients.admin.OffsetSpec;
import org.apache.kafka.clients.consumer.CloseOptions;
import org.apache.kafka.clients.consumer.ConsumerConfig;
import org.apache.kafka.clients.consumer.ConsumerRecord;
import org.apache.kafka.clients.consumer.KafkaConsumer;
import org.apache.kafka.common.IsolationLevel;
import org.apache.kafka.common.KafkaException;
import org.apache.kafka.common.TopicPartition;
import org.sweeptally.stream.ClientSettings;
import org.sweeptally.stream.RegionPartitions;

/**
 * Reads the records of one region in one partition of a topic: committed ones only, in no group, up to where the
 * partition ended when it was opened.
 */
final class BusPartition implements AutoCloseable {

    private static final Duration POLL = Duration.ofMillis(100);
    private static final Duration STALL = Duration.ofSeconds(60);

    /** So few offsets are read through rather than halved. */
    private static final long NEAR = 2_000;

    private final TopicPartition partition;
    private final String region;
    private final KafkaConsumer<byte[], byte[]> consumer;
    private final Deque<ConsumerRecord<byte[], byte[]>> polled = new ArrayDeque<>();
    private final long begin;
    private long end;

    BusPartition(ClientSettings clients, Admin admin, String topic, int number, String region) {
        this.partition = new TopicPartition(topic, number);
        this.region = region;
        this.end = written(admin, partition);
        Map<String, Object> settings = clients.consumer("replay-" + topic + "-" + number + "-" + region);
        settings.put(ConsumerConfig.FETCH_MAX_WAIT_MS_CONFIG, "50");
        consumer = new KafkaConsumer<>(settings);
        consumer.assign(List.of(partition));
        begin = consumer.beginningOffsets(List.of(partition)).get(partition);
        seek(begin);
    }

    /** All that has been written, so that what is just being committed is waited for. */
    private static long written(Admin admin, TopicPartition partition) {
        try {
            return admin.listOffsets(Map.of(partition, OffsetSpec.latest()),
                            new ListOffsetsOptions(IsolationLevel.READ_UNCOMMITTED))
                    .partitionResult(partition)
                    .get()
                    .offset();
        } catch (ExecutionException e) {
            throw new ReplayFailedException(
                    "topic " + partition.topic() + " cannot be read: " + e.getCause().getMessage(), e);
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
            throw new ReplayFailedException("interrupted", e);
        }
    }

    long begin() {
        return begin;
    }

    long end() {
        return end;
    }

    /** Reads no further than to an offset, itself excluded. */
    void endAt(long offset) {
        end = Math.min(end, offset);
    }

    void seek(long offset) {
        polled.clear();
        consumer.seek(partition, offset);
    }

    /** From the first record that was appended at a time or later. */
    void seekToAppended(long millis) {
        var found = consumer.offsetsForTimes(Map.of(partition, millis)).get(partition);
        seek(found == null ? end : found.offset());
    }

    /** Where a record stands, for a person. */
    String where(ConsumerRecord<byte[], byte[]> record) {
        return "offset " + record.offset() + " of partition " + partition.partition() + " of " + partition.topic();
    }

    /** The region's next record, null if there is none before the end. */
    ConsumerRecord<byte[], byte[]> next() {
        return next(end);
    }

    private ConsumerRecord<byte[], byte[]> next(long until) {
        while (true) {
            while (!polled.isEmpty()) {
                ConsumerRecord<byte[], byte[]> record = polled.remove();
                if (record.offset() >= until) {
                    return null;
                }
                if (record.key() != null && RegionPartitions.region(record.key()).equals(region)) {
                    return record;
                }
            }
            if (position() >= until) {
                return null;
            }
            poll();
        }
    }

    private long position() {
        return consumer.position(partition);
    }

    private void poll() {
        long before = position();
        long beginNanos = System.nanoTime();
        while (true) {
            try {
                consumer.poll(POLL).forEach(polled::add);
            } catch (KafkaException e) {
                throw new ReplayFailedException("topic " + partition.topic() + " cannot be read: " + e.getMessage(), e);
            }
            if (!polled.isEmpty() || position() > before) {
                return;
            }
            if (System.nanoTime() - beginNanos > STALL.toNanos()) {
                throw new ReplayFailedException("partition " + partition.partition() + " of " + partition.topic()
                        + " cannot be read beyond offset " + before + ": nothing came for " + STALL.toSeconds() + " s");
            }
        }
    }

    /**
     * An offset before which all of the region's records are earlier than a time, and not far before the first that is
     * not; where the region's records never go back in time.
     *
     * @param time time of a record, empty where it has none
     */
    long search(long micros, Function<ConsumerRecord<byte[], byte[]>, OptionalLong> time) {
        long low = begin;
        long high = end;
        while (high - low > NEAR) {
            long middle = low + (high - low) / 2;
            ConsumerRecord<byte[], byte[]> found = firstWithTime(middle, high, time);
            if (found == null || time.apply(found).getAsLong() >= micros) {
                high = middle;
            } else {
                low = found.offset();
            }
        }
        return low;
    }

    private ConsumerRecord<byte[], byte[]> firstWithTime(
            long from, long until, Function<ConsumerRecord<byte[], byte[]>, OptionalLong> time) {
        seek(from);
        ConsumerRecord<byte[], byte[]> record = next(until);
        while (record != null && time.apply(record).isEmpty()) {
            record = next(until);
        }
        return record;
    }

    @Override
    public void close() {
        consumer.close(CloseOptions.timeout(Duration.ZERO));
    }
}
