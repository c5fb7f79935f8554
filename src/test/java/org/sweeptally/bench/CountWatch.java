package org.sweeptally.bench;

import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import java.util.function.BooleanSupplier;
import org.apache.kafka.clients.consumer.ConsumerRecord;
import org.apache.kafka.clients.consumer.KafkaConsumer;
import org.apache.kafka.common.TopicPartition;
import org.sweeptally.event.Count;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.PartBody;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;
import org.sweeptally.stream.BenchBus;

/** Reads a site's committed counts as they come, and keeps when each came. */
final class CountWatch implements AutoCloseable {

    private static final Duration PATIENCE = Duration.ofSeconds(240);

    /** A committed count: its partition, its scan, when the bus appended it, and when it reached a subscriber. */
    record Seen(int partition, long scanTimeMicros, long appendMillis, long nanos) {}

    private final KafkaConsumer<byte[], byte[]> consumer;
    private final String log;
    private final List<Seen> seen = new ArrayList<>();

    CountWatch(Site site) {
        var settings = BenchBus.clients().consumer("count-watch");
        settings.put("fetch.max.wait.ms", "50");
        log = BenchBus.names(site).regionLog();
        consumer = new KafkaConsumer<>(settings);
        List<TopicPartition> partitions = consumer.partitionsFor(BenchBus.names(site).counts()).stream()
                .map(info -> new TopicPartition(info.topic(), info.partition()))
                .toList();
        consumer.assign(partitions);
        consumer.seekToBeginning(partitions);
    }

    List<Seen> seen() {
        return seen;
    }

    /** Reads on until something holds. */
    void until(String what, BooleanSupplier holds) {
        long end = System.nanoTime() + PATIENCE.toNanos();
        while (!holds.getAsBoolean()) {
            if (System.nanoTime() > end) {
                throw new IllegalStateException("not within " + PATIENCE.toSeconds() + " s: " + what + "; "
                        + seen.size() + " counts came");
            }
            for (ConsumerRecord<byte[], byte[]> record : consumer.poll(Duration.ofMillis(20))) {
                Count count = Wire.decode(record.value(), Count.class);
                seen.add(new Seen(
                        record.partition(), count.getScanTimeMicros(), record.timestamp(), System.nanoTime()));
            }
        }
    }

    /** Seconds from the first part in the region log to the last count, by the bus's own times of append. */
    double seconds() {
        long last = seen.stream().mapToLong(Seen::appendMillis).max().orElseThrow();
        return Math.max(1, last - firstRouted()) / 1000.0;
    }

    private long firstRouted() {
        long first = Long.MAX_VALUE;
        List<TopicPartition> partitions = consumer.partitionsFor(log).stream()
                .map(info -> new TopicPartition(info.topic(), info.partition()))
                .toList();
        for (TopicPartition partition : partitions) {
            consumer.assign(List.of(partition));
            consumer.seekToBeginning(List.of(partition));
            first = Math.min(first, firstPart());
        }
        return first;
    }

    private long firstPart() {
        while (true) {
            for (ConsumerRecord<byte[], byte[]> record : consumer.poll(Duration.ofMillis(200))) {
                if (Wire.decode(record.value(), LogEntry.class).getBody() instanceof PartBody) {
                    return record.timestamp();
                }
            }
        }
    }

    @Override
    public void close() {
        consumer.close();
    }
}
