package org.sweeptally.stream;

import java.util.EnumSet;
import java.util.Map;
import java.util.Set;
import java.util.function.Consumer;
import java.util.function.Supplier;
import org.apache.kafka.clients.consumer.ConsumerRecord;
import org.apache.kafka.common.config.TopicConfig;
import org.apache.kafka.common.serialization.ByteArrayDeserializer;
import org.apache.kafka.common.serialization.ByteArraySerializer;
import org.apache.kafka.common.serialization.Serdes;
import org.apache.kafka.streams.Topology;
import org.apache.kafka.streams.state.KeyValueStore;
import org.apache.kafka.streams.state.StoreBuilder;
import org.apache.kafka.streams.state.Stores;

/**
 * The wiring: detections to router to region log, region log to regions to everything else. Two parts that only the
 * region log joins, so that the order in which a region takes things in is the order of its log, and nothing else.
 */
public final class OperatorTopology implements Supplier<Topology> {

    private static final Set<Output> OF_ROUTER = EnumSet.of(Output.REGION_LOG, Output.REJECTS);
    private static final Set<Output> OF_REGION = EnumSet.allOf(Output.class);

    /** Compaction leaves the last segment alone, so it must not grow long. */
    private static final Map<String, String> CHANGELOG = Map.of(
            TopicConfig.SEGMENT_BYTES_CONFIG, Integer.toString(64 * 1024 * 1024),
            TopicConfig.MIN_CLEANABLE_DIRTY_RATIO_CONFIG, "0.1");

    private final TopicNames names;
    private final RouterPlan router;
    private final RegionPlan region;
    private final OperatorStores stores;
    private final Consumer<String> says;

    OperatorTopology(
            TopicNames names, RouterPlan router, RegionPlan region, OperatorStores stores, Consumer<String> says) {
        this.names = names;
        this.router = router;
        this.region = region;
        this.stores = stores;
        this.says = says;
    }

    @Override
    public Topology get() {
        Topology topology = new Topology();
        source(topology, "detections", names.detections());
        topology.addProcessor(RouterProcessor.NAME, () -> new RouterProcessor(router), "detections");
        sinks(topology, RouterProcessor.NAME, OF_ROUTER);
        source(topology, "region-log", names.regionLog());
        topology.addProcessor(RegionProcessor.NAME, () -> new RegionProcessor(region, says), "region-log");
        topology.addStateStore(snapshots(), RegionProcessor.NAME);
        topology.addStateStore(progress(), RegionProcessor.NAME);
        sinks(topology, RegionProcessor.NAME, OF_REGION);
        return topology;
    }

    /** Bytes: what cannot be read is for the router to reject, or for the regions to stop at. */
    private static void source(Topology topology, String node, String topic) {
        topology.addSource(Topology.AutoOffsetReset.EARLIEST, node, OperatorTopology::timestamp,
                new ByteArrayDeserializer(), new ByteArrayDeserializer(), topic);
    }

    /** Records with a time before 1970 would be passed over by the bus's library without a word. */
    private static long timestamp(
            ConsumerRecord<Object, Object> record, long partitionTime) {
        return Math.max(0, record.timestamp());
    }

    private void sinks(Topology topology, String processor, Set<Output> outputs) {
        for (Output output : outputs) {
            topology.addSink(output.node(processor), output.topic(names), new ByteArraySerializer(),
                    new ByteArraySerializer(), region.regions(), processor);
        }
    }

    private StoreBuilder<KeyValueStore<String, byte[]>> snapshots() {
        return Stores.keyValueStoreBuilder(stores.snapshots(), Serdes.String(), Serdes.ByteArray())
                .withCachingDisabled()
                .withLoggingEnabled(CHANGELOG);
    }

    /** Put at every entry, and written once a commit. */
    private StoreBuilder<KeyValueStore<String, byte[]>> progress() {
        return Stores.keyValueStoreBuilder(stores.progress(), Serdes.String(), Serdes.ByteArray())
                .withCachingEnabled()
                .withLoggingEnabled(CHANGELOG);
    }
}
