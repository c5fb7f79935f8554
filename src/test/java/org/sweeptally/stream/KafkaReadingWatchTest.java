package org.sweeptally.stream;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Map;
import java.util.OptionalLong;
import org.apache.kafka.clients.consumer.ConsumerRecord;
import org.apache.kafka.clients.consumer.MockConsumer;
import org.apache.kafka.common.TopicPartition;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;

/** When a partition of the detections counts as read to its end. */
class KafkaReadingWatchTest {

    private static final TopicPartition PARTITION = new TopicPartition("detections", 0);

    private final MockConsumer<byte[], byte[]> consumer = new MockConsumer<>("none");
    private final KafkaReadingWatch watch =
            new KafkaReadingWatch(consumer, new TopicNames("a-site", "detections"), 1);

    @BeforeEach
    void partition() {
        holds(0, 10);
    }

    /** Offsets of the first record of the partition, and behind its last one. */
    private void holds(long begin, long end) {
        consumer.updateBeginningOffsets(Map.of(PARTITION, begin));
        consumer.updateEndOffsets(Map.of(PARTITION, end));
    }

    /** A record that the consumer finds when it looks itself. */
    private void finds(long offset) {
        consumer.schedulePollTask(() ->
                consumer.addRecord(new ConsumerRecord<>("detections", 0, offset, new byte[0], new byte[0])));
    }

    @Test
    void aPartitionIsReadToItsEndOnceTheLastRecordHasBeenRouted() {
        ReadingWatch.Reading reading = watch.begins(0);
        finds(9);
        reading.routed(8);
        watch.ask();
        assertThat(reading.readToEndAt()).isEmpty();
        reading.routed(9);
        assertThat(reading.readToEndAt()).isPresent();
    }

    @Test
    void aThreadThatLostAPartitionTakesNothingFromTheThreadThatHasItNow() {
        ReadingWatch.Reading before = watch.begins(0);
        ReadingWatch.Reading now = watch.begins(0);
        before.routed(9);
        before.ends();
        now.routed(3);
        finds(4);
        watch.ask();
        assertThat(now.readToEndAt()).isEmpty();
        now.routed(9);
        assertThat(now.readToEndAt()).isPresent();
    }

    @Test
    void whoseReadingHasEndedIsNotAskedFor() {
        ReadingWatch.Reading reading = watch.begins(0);
        reading.routed(9);
        reading.ends();
        watch.ask();
        assertThat(reading.readToEndAt()).isEqualTo(OptionalLong.empty());
    }

    /** Otherwise nobody would ever be taken to be silent after such an absence. */
    @Test
    void whatWasDeletedUnreadIsNotWaitedFor() {
        ReadingWatch.Reading reading = watch.begins(0);
        reading.routed(4);
        holds(10, 10);
        watch.ask();
        assertThat(reading.readToEndAt()).isPresent();
    }
}
