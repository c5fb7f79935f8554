package org.sweeptally.stream;

import java.nio.file.Path;
import java.time.Duration;
import java.util.Collections;
import java.util.List;
import java.util.Map;
import java.util.concurrent.CountDownLatch;
import java.util.concurrent.TimeUnit;
import org.apache.kafka.common.config.TopicConfig;
import org.apache.kafka.common.serialization.ByteArrayDeserializer;
import org.apache.kafka.common.serialization.ByteArraySerializer;
import org.apache.kafka.common.serialization.Serdes;
import org.apache.kafka.streams.KafkaStreams;
import org.apache.kafka.streams.Topology;
import org.apache.kafka.streams.processor.PunctuationType;
import org.apache.kafka.streams.processor.api.Processor;
import org.apache.kafka.streams.processor.api.ProcessorContext;
import org.apache.kafka.streams.processor.api.Record;
import org.apache.kafka.streams.state.KeyValueStore;
import org.apache.kafka.streams.state.Stores;
import org.sweeptally.event.Count;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.NumberDistribution;
import org.sweeptally.event.Part;
import org.sweeptally.event.PartBody;
import org.sweeptally.region.wire.Wire;

/**
 * The operator with the filter taken out: the same topics, router, settings of the bus, commits and stores, and in place
 * of the regions something that decodes each entry, counts it, and writes one record of a count's size for each closed
 * scan. What the operator takes beyond it is the filter's, not the bus's.
 */
public final class TransportFloor implements AutoCloseable {

    private final OperatorSettings settings;
    private final CountDownLatch running = new CountDownLatch(1);
    private KafkaStreams streams;
    private KafkaReadingWatch watch;

    public TransportFloor(OperatorSettings settings) {
        this.settings = settings;
    }

    /** Begins as the operator does; returns when the threads have been started. */
    public void start() {
        TopicNames names = settings.topics();
        ClientSettings clients = settings.clients();
        Preflight.Found found;
        try (Topics topics = new Topics(clients)) {
            found = new Preflight(topics, names).check();
        }
        RegionPartitions regions = new RegionPartitions(
                settings.site().regions().stream().map(region -> region.name()).toList());
        List<Revision> known = new SettingsAgreement(clients, names, regions, found.logPartitions(), sentence -> { })
                .agree(Revision.of(settings.site()));
        watch = new KafkaReadingWatch(clients, names, found.detectionPartitions());
        RouterPlan router = new RouterPlan(regions, new Revisions(known), watch, found.appendTimes());
        streams = new KafkaStreams(topology(names, regions, found.logPartitions(), router),
                clients.streams(names.applicationId(), settings.stateFolder().toString()));
        streams.setStateListener((now, before) -> {
            if (now == KafkaStreams.State.RUNNING) {
                running.countDown();
            }
        });
        watch.start();
        streams.start();
    }

    private static Topology topology(TopicNames names, RegionPartitions regions, int partitions, RouterPlan router) {
        Topology topology = new Topology();
        source(topology, "detections", names.detections());
        topology.addProcessor(RouterProcessor.NAME, () -> new RouterProcessor(router), "detections");
        for (Output output : List.of(Output.REGION_LOG, Output.REJECTS)) {
            sink(topology, output, names, regions, RouterProcessor.NAME);
        }
        source(topology, "region-log", names.regionLog());
        topology.addProcessor(
                RegionProcessor.NAME, () -> new CountingProcessor(regions, partitions), "region-log");
        topology.addStateStore(
                Stores.keyValueStoreBuilder(OperatorStores.onDisk().progress(), Serdes.String(), Serdes.ByteArray())
                        .withCachingEnabled()
                        .withLoggingEnabled(Map.of(TopicConfig.MIN_CLEANABLE_DIRTY_RATIO_CONFIG, "0.1")),
                RegionProcessor.NAME);
        for (Output output : List.of(Output.REGION_LOG, Output.COUNTS)) {
            sink(topology, output, names, regions, RegionProcessor.NAME);
        }
        return topology;
    }

    private static void source(Topology topology, String node, String topic) {
        topology.addSource(Topology.AutoOffsetReset.EARLIEST, node, (record, before) -> Math.max(0, record.timestamp()),
                new ByteArrayDeserializer(), new ByteArrayDeserializer(), topic);
    }

    private static void sink(
            Topology topology, Output output, TopicNames names, RegionPartitions regions, String processor) {
        topology.addSink(output.node(processor), output.topic(names), new ByteArraySerializer(),
                new ByteArraySerializer(), regions, processor);
    }

    /** Counts where the operator filters. */
    private static final class CountingProcessor implements Processor<byte[], byte[], byte[], byte[]> {

        /** As many probabilities as a count of some dozens of objects usually has. */
        private static final int BAND = 20;

        private final RegionPartitions regions;
        private final int partitions;
        private Forwarding forwarding;
        private KeyValueStore<String, byte[]> progress;
        private long entries;
        private long scans;

        CountingProcessor(RegionPartitions regions, int partitions) {
            this.regions = regions;
            this.partitions = partitions;
        }

        @Override
        public void init(ProcessorContext<byte[], byte[]> context) {
            forwarding = new Forwarding(context, RegionProcessor.NAME);
            progress = context.getStateStore(RegionProcessor.PROGRESS);
            List<String> own = regions.regionsOf(context.taskId().partition(), partitions);
            context.schedule(Duration.ofSeconds(1), PunctuationType.WALL_CLOCK_TIME, millis -> tick(own, millis));
        }

        private void tick(List<String> own, long wallMillis) {
            byte[] tick = Wire.encode(OperatorEntries.tick(wallMillis * 1000));
            for (String region : own) {
                forwarding.of(RegionPartitions.key(region), wallMillis);
                forwarding.send(Output.REGION_LOG, RegionPartitions.key(region), tick);
            }
        }

        @Override
        public void process(Record<byte[], byte[]> record) {
            LogEntry entry = Wire.decode(record.value(), LogEntry.class);
            entries++;
            if (entry.getBody() instanceof PartBody body && body.getPart().getClosesScan()) {
                forwarding.of(record.key(), record.timestamp());
                forwarding.count(count(RegionPartitions.region(record.key()), body.getPart()));
            }
            progress.put(RegionProcessor.PROGRESS, new Progress(entries, entries, entries).toBytes());
        }

        private Count count(String region, Part part) {
            return Count.newBuilder()
                    .setRegion(region)
                    .setSequence(scans++)
                    .setSensor(part.getSensor())
                    .setScanTimeMicros(part.getScanTimeMicros())
                    .setTimeMicros(part.getScanTimeMicros())
                    .setAll(NumberDistribution.newBuilder()
                            .setMean(0).setVariance(0).setBandOffset(0)
                            .setBand(Collections.nCopies(BAND, 1.0 / BAND))
                            .setBelow(0).setAbove(0).setLeast(0).setMost(0).setHeld(0)
                            .build())
                    .setExpectedUnseen(0)
                    .setTracks(0).setBirths(0).setEnds(0).setSettingsRevision(1).setMachineVersion(1)
                    .build();
        }
    }

    public boolean awaitRunning(Duration atMost) throws InterruptedException {
        return running.await(atMost.toMillis(), TimeUnit.MILLISECONDS);
    }

    @Override
    public void close() {
        streams.close(Duration.ofSeconds(30));
        watch.close();
    }
}
