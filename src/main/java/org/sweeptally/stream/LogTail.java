package org.sweeptally.stream;

import java.time.Duration;
import java.util.List;
import java.util.OptionalLong;
import org.apache.kafka.clients.consumer.CloseOptions;
import org.apache.kafka.clients.consumer.ConsumerRecord;
import org.apache.kafka.clients.consumer.KafkaConsumer;
import org.apache.kafka.common.KafkaException;
import org.apache.kafka.common.TopicPartition;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.PartBody;
import org.sweeptally.region.wire.Wire;

/** Looks at the last entries of the region log, to see how far the sensors' time has come. */
final class LogTail implements AutoCloseable {

    /** Far more than may be out of order; where only the operator's own entries are found, it looks further back. */
    private static final long OFFSETS = 10_000;

    private static final Duration POLL = Duration.ofMillis(100);

    private final String topic;
    private final KafkaConsumer<byte[], byte[]> consumer;

    LogTail(ClientSettings clients, String topic) {
        this.topic = topic;
        this.consumer = new KafkaConsumer<>(clients.consumer(topic + "-look"));
    }

    /** Whether nothing has ever been committed to a partition. */
    boolean isNew(int partition) {
        return end(new TopicPartition(topic, partition)) == 0;
    }

    /**
     * The latest scan time of the parts among the last entries of a partition, microseconds since 1970-01-01T00:00:00Z;
     * empty if the partition holds no part.
     *
     * @throws OperatorStoppedException if it cannot be read
     */
    OptionalLong latestScanMicros(int partition) {
        TopicPartition log = new TopicPartition(topic, partition);
        try {
            long end = end(log);
            long begin = consumer.beginningOffsets(List.of(log)).get(log);
            OptionalLong latest = OptionalLong.empty();
            while (latest.isEmpty() && end > begin) {
                long from = Math.max(begin, end - OFFSETS);
                latest = latestScanMicros(log, from, end);
                end = from;
            }
            return latest;
        } catch (KafkaException e) {
            throw new OperatorStoppedException("topic " + topic + " cannot be read: " + e.getMessage(), e);
        }
    }

    private long end(TopicPartition log) {
        return consumer.endOffsets(List.of(log)).get(log);
    }

    private OptionalLong latestScanMicros(TopicPartition log, long from, long end) {
        OptionalLong latest = OptionalLong.empty();
        consumer.assign(List.of(log));
        consumer.seek(log, from);
        while (consumer.position(log) < end) {
            for (ConsumerRecord<byte[], byte[]> record : consumer.poll(POLL)) {
                OptionalLong scan = scanMicros(record);
                if (scan.isPresent() && (latest.isEmpty() || scan.getAsLong() > latest.getAsLong())) {
                    latest = scan;
                }
            }
        }
        return latest;
    }

    /** What is no entry of ours is for the regions to stop at. */
    private static OptionalLong scanMicros(ConsumerRecord<byte[], byte[]> record) {
        try {
            return Wire.decode(record.value(), LogEntry.class).getBody() instanceof PartBody body
                    ? OptionalLong.of(body.getPart().getScanTimeMicros())
                    : OptionalLong.empty();
        } catch (IllegalArgumentException e) {
            return OptionalLong.empty();
        }
    }

    @Override
    public void close() {
        consumer.close(CloseOptions.timeout(Duration.ZERO));
    }
}
