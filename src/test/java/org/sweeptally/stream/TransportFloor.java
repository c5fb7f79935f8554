package org.sweeptally.stream;

import java.time.Duration;
import java.util.Collections;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;
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
import org.apache.kafka.streams.state.KeyValueBytesStoreSupplier;
import org.apache.kafka.streams.state.KeyValueStore;
import org.apache.kafka.streams.state.StoreBuilder;
import org.apache.kafka.streams.state.Stores;
import org.sweeptally.event.Count;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.NumberDistribution;
import org.sweeptally.event.Part;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.Picture;
import org.sweeptally.region.wire.Wire;

/**
 * The operator with the regions' machines taken out: the same topics, router, settings of the bus, commits and stores,
 * and in place of the machines something that decodes each entry and writes, for each closed scan, the records that a
 * machine made of the same scans beforehand ({@link RecordedScans}), encoded anew each time, and as many snapshots.
 * What the operator takes beyond it is the machine's: order of the scans, filter, making of the records. With nothing
 * recorded it is the bare floor, which writes a record of a count's size a closed scan and nothing else.
 */
public final class TransportFloor implements AutoCloseable {

    private final OperatorSettings settings;
    private final RecordedScans recorded;
    private final CountDownLatch running = new CountDownLatch(1);
    private KafkaStreams streams;
    private KafkaReadingWatch watch;

    public TransportFloor(OperatorSettings settings, RecordedScans recorded) {
        this.settings = settings;
        this.recorded = recorded;
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

    private Topology topology(TopicNames names, RegionPartitions regions, int partitions, RouterPlan router) {
        Topology topology = new Topology();
        source(topology, "detections", names.detections());
        topology.addProcessor(RouterProcessor.NAME, () -> new RouterProcessor(router), "detections");
        for (Output output : List.of(Output.REGION_LOG, Output.REJECTS)) {
            sink(topology, output, names, regions, RouterProcessor.NAME);
        }
        source(topology, "region-log", names.regionLog());
        int snapshotScans = settings.site().bounds().snapshotScans();
        topology.addProcessor(RegionProcessor.NAME,
                () -> new ReplayingProcessor(regions, partitions, recorded, snapshotScans), "region-log");
        OperatorStores stores = OperatorStores.onDisk();
        topology.addStateStore(store(stores.progress()).withCachingEnabled(), RegionProcessor.NAME);
        topology.addStateStore(store(stores.snapshots()).withCachingDisabled(), RegionProcessor.NAME);
        for (Output output : Output.values()) {
            sink(topology, output, names, regions, RegionProcessor.NAME);
        }
        return topology;
    }

    private static StoreBuilder<KeyValueStore<String, byte[]>> store(KeyValueBytesStoreSupplier supplier) {
        return Stores.keyValueStoreBuilder(supplier, Serdes.String(), Serdes.ByteArray())
                .withLoggingEnabled(Map.of(TopicConfig.MIN_CLEANABLE_DIRTY_RATIO_CONFIG, "0.1"));
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

    /** Replays where the operator filters. */
    private static final class ReplayingProcessor implements Processor<byte[], byte[], byte[], byte[]> {

        /** As many probabilities as a count of some dozens of objects usually has. */
        private static final int BAND = 20;

        private final RegionPartitions regions;
        private final int partitions;
        private final RecordedScans recorded;
        private final int snapshotScans;
        private final Map<String, Long> scans = new TreeMap<>();
        private Forwarding forwarding;
        private KeyValueStore<String, byte[]> progress;
        private SnapshotStore snapshots;
        private long entries;

        ReplayingProcessor(RegionPartitions regions, int partitions, RecordedScans recorded, int snapshotScans) {
            this.regions = regions;
            this.partitions = partitions;
            this.recorded = recorded;
            this.snapshotScans = snapshotScans;
        }

        @Override
        public void init(ProcessorContext<byte[], byte[]> context) {
            forwarding = new Forwarding(context, RegionProcessor.NAME);
            progress = context.getStateStore(RegionProcessor.PROGRESS);
            snapshots = new SnapshotStore(context.getStateStore(RegionProcessor.SNAPSHOTS));
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
                String region = RegionPartitions.region(record.key());
                long n = scans.merge(region, 1L, Long::sum) - 1;
                if (recorded.isEmpty()) {
                    forwarding.count(count(region, n, body.getPart(), flat()));
                } else {
                    replay(region, n, body.getPart());
                }
            }
            progress.put(RegionProcessor.PROGRESS, new Progress(entries, entries, entries).toBytes());
        }

        private void replay(String region, long n, Part part) {
            RecordedScans.Scan scan = recorded.scan(region, n);
            scan.before().forEach(record -> record.accept(forwarding));
            Count count = count(region, n, part, scan.count().getAll());
            forwarding.count(count);
            if (scan.inPicture()) {
                forwarding.picture(region, new Picture(region, count));
            }
            if ((n + 1) % snapshotScans == 0) {
                snapshots.put(recorded.snapshot(region));
                forwarding.snapshot(recorded.snapshot(region));
            }
        }

        /** With the scan's own times, by which it is known again. */
        private static Count count(String region, long n, Part part, NumberDistribution all) {
            return Count.newBuilder()
                    .setRegion(region)
                    .setSequence(n)
                    .setSensor(part.getSensor())
                    .setScanTimeMicros(part.getScanTimeMicros())
                    .setTimeMicros(part.getScanTimeMicros())
                    .setAll(all)
                    .setExpectedUnseen(0)
                    .setTracks(0).setBirths(0).setEnds(0).setSettingsRevision(1).setMachineVersion(1)
                    .build();
        }

        private static NumberDistribution flat() {
            return NumberDistribution.newBuilder()
                    .setMean(0).setVariance(0).setBandOffset(0)
                    .setBand(Collections.nCopies(BAND, 1.0 / BAND))
                    .setBelow(0).setAbove(0).setLeast(0).setMost(0).setHeld(0)
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
