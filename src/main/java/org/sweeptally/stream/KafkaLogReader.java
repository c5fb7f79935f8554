package org.sweeptally.stream;

import java.time.Duration;
import java.util.List;
import java.util.Map;
import org.apache.kafka.clients.consumer.CloseOptions;
import org.apache.kafka.clients.consumer.ConsumerConfig;
import org.apache.kafka.clients.consumer.ConsumerRecord;
import org.apache.kafka.clients.consumer.KafkaConsumer;
import org.apache.kafka.clients.consumer.OffsetOutOfRangeException;
import org.apache.kafka.common.KafkaException;
import org.apache.kafka.common.TopicPartition;
import org.apache.kafka.common.errors.RetriableException;

/** Reads the region log with a consumer of its own, which belongs to no group. */
final class KafkaLogReader implements LogReader {

    private static final Duration STALL = Duration.ofSeconds(60);
    private static final Duration POLL = Duration.ofMillis(100);

    private final ClientSettings clients;
    private final String topic;

    KafkaLogReader(ClientSettings clients, String topic) {
        this.clients = clients;
        this.topic = topic;
    }

    @Override
    public long read(int partition, long from, long toInclusive, Sink sink) {
        TopicPartition log = new TopicPartition(topic, partition);
        KafkaConsumer<byte[], byte[]> consumer = new KafkaConsumer<>(settings(partition));
        try {
            consumer.assign(List.of(log));
            checkReach(consumer, log, from, toInclusive);
            consumer.seek(log, from);
            return read(consumer, log, toInclusive, sink);
        } catch (OffsetOutOfRangeException e) {
            throw new OperatorStoppedException(tooShort(log, from, "it was cut while it was read"), e);
        } finally {
            consumer.close(CloseOptions.timeout(Duration.ZERO));
        }
    }

    private Map<String, Object> settings(int partition) {
        Map<String, Object> settings = clients.consumer(topic + "-tail-" + partition);
        settings.put(ConsumerConfig.MAX_POLL_RECORDS_CONFIG, "10000");
        settings.put(ConsumerConfig.FETCH_MAX_WAIT_MS_CONFIG, "50");
        return settings;
    }

    /** Without this, a log that has been cut or made anew would be waited for in vain. */
    private static void checkReach(
            KafkaConsumer<byte[], byte[]> consumer, TopicPartition log, long from, long toInclusive) {
        long begin = patiently(log, () -> consumer.beginningOffsets(List.of(log)).get(log));
        if (begin > from) {
            throw new OperatorStoppedException(tooShort(log, from, "it begins at offset " + begin));
        }
        long end = patiently(log, () -> consumer.endOffsets(List.of(log)).get(log));
        if (end <= toInclusive) {
            throw new OperatorStoppedException("partition " + log.partition() + " of " + log.topic()
                    + " ends at offset " + end + ", and it had been applied to offset " + toInclusive
                    + ": it is not the log that the state was made from");
        }
    }

    private static String tooShort(TopicPartition log, long from, String what) {
        return "partition " + log.partition() + " of " + log.topic() + " is needed from offset " + from
                + ", and " + what + ": its retention is too short, and the regions on it cannot be recovered";
    }

    /** Ends by position and not by a record, since the last offset may be none of a record. */
    private static long read(
            KafkaConsumer<byte[], byte[]> consumer, TopicPartition log, long toInclusive, Sink sink) {
        long records = 0;
        long position = consumer.position(log);
        long movedNanos = System.nanoTime();
        while (position <= toInclusive) {
            for (ConsumerRecord<byte[], byte[]> record : consumer.poll(POLL)) {
                if (record.offset() <= toInclusive) {
                    sink.entry(record.offset(), record.key(), record.value());
                    records++;
                }
            }
            long now = System.nanoTime();
            if (consumer.position(log) > position) {
                position = consumer.position(log);
                movedNanos = now;
            } else if (now - movedNanos > STALL.toNanos()) {
                throw new OperatorStoppedException("partition " + log.partition() + " of " + log.topic()
                        + " cannot be read beyond offset " + position + ": nothing came for " + STALL.toSeconds()
                        + " s");
            }
        }
        return records;
    }

    private interface Question {
        long ask();
    }

    private static long patiently(TopicPartition log, Question question) {
        long begin = System.nanoTime();
        while (true) {
            try {
                return question.ask();
            } catch (RetriableException e) {
                if (System.nanoTime() - begin > STALL.toNanos()) {
                    throw e;
                }
            } catch (KafkaException e) {
                throw new OperatorStoppedException(
                        "partition " + log.partition() + " of " + log.topic() + " cannot be read: " + e.getMessage(),
                        e);
            }
        }
    }
}
