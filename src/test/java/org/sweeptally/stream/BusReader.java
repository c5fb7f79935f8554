package org.sweeptally.stream;

import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;
import java.util.function.Consumer;
import org.apache.kafka.clients.consumer.ConsumerRecord;
import org.apache.kafka.clients.consumer.KafkaConsumer;
import org.apache.kafka.common.TopicPartition;
import org.sweeptally.event.Birth;
import org.sweeptally.event.Count;
import org.sweeptally.event.End;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Reject;
import org.sweeptally.event.SilentBody;
import org.sweeptally.event.Track;
import org.sweeptally.region.LocalSite;
import org.sweeptally.region.RegionMachine;
import org.sweeptally.region.wire.Wire;

/** Reads topics from their beginning to where they are committed, as anybody may. */
final class BusReader {

    private final TopicNames names;

    BusReader(TopicNames names) {
        this.names = names;
    }

    /** Every committed record of a topic, by partition and offset. */
    List<ConsumerRecord<byte[], byte[]>> all(String topic) {
        List<ConsumerRecord<byte[], byte[]>> found = new ArrayList<>();
        forEach(topic, found::add);
        return found;
    }

    void forEach(String topic, Consumer<ConsumerRecord<byte[], byte[]>> sink) {
        try (KafkaConsumer<byte[], byte[]> consumer =
                new KafkaConsumer<>(TestBus.clients().consumer(topic + "-test"))) {
            int partitions = consumer.partitionsFor(topic).size();
            for (int p = 0; p < partitions; p++) {
                TopicPartition partition = new TopicPartition(topic, p);
                consumer.assign(List.of(partition));
                consumer.seekToBeginning(List.of(partition));
                Map<TopicPartition, Long> ends = consumer.endOffsets(List.of(partition));
                while (consumer.position(partition) < ends.get(partition)) {
                    consumer.poll(Duration.ofMillis(200)).forEach(sink);
                }
            }
        }
    }

    /** What stands in the output topics. */
    Published published() {
        Published published = new Published();
        forEach(names.tracks(), r -> published.add("tracks", region(r), Wire.decode(r.value(), Track.class)));
        forEach(names.births(), r -> published.add("births", region(r), Wire.decode(r.value(), Birth.class)));
        forEach(names.ends(), r -> published.add("ends", region(r), Wire.decode(r.value(), End.class)));
        forEach(names.counts(), r -> published.add("counts", region(r), Wire.decode(r.value(), Count.class)));
        forEach(names.rejects(), r -> {
            Reject reject = Wire.decode(r.value(), Reject.class);
            if (reject.getRegion() != null) {
                published.reject(reject);
            }
        });
        return published;
    }

    private static String region(ConsumerRecord<byte[], byte[]> record) {
        return RegionPartitions.region(record.key());
    }

    /** What the machine makes of the committed log, and nothing else. */
    Published fold() {
        Published folded = new Published();
        Map<String, RegionMachine> machines = new TreeMap<>();
        forEach(names.regionLog(), record -> machines
                .computeIfAbsent(region(record), name -> new RegionMachine(name, LocalSite::readSettings))
                .apply(Wire.decode(record.value(), LogEntry.class), folded.outputsOf(region(record))));
        return folded;
    }

    /** How many silent entries the log holds. */
    long silences() {
        return all(names.regionLog()).stream()
                .filter(r -> Wire.decode(r.value(), LogEntry.class).getBody() instanceof SilentBody)
                .count();
    }

    /** How many counts have been published. */
    long counts() {
        return all(names.counts()).size();
    }
}
