package org.sweeptally.stream;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.nio.charset.StandardCharsets;
import java.time.Duration;
import java.time.Instant;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalLong;
import java.util.Properties;
import java.util.Set;
import java.util.TreeMap;
import java.util.TreeSet;
import org.apache.kafka.common.serialization.ByteArrayDeserializer;
import org.apache.kafka.common.serialization.ByteArraySerializer;
import org.apache.kafka.common.utils.Bytes;
import org.apache.kafka.streams.KeyValue;
import org.apache.kafka.streams.Topology;
import org.apache.kafka.streams.TopologyDescription;
import org.apache.kafka.streams.TopologyTestDriver;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.Count;
import org.sweeptally.event.Heartbeat;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Part;
import org.sweeptally.event.ProgressMarkBody;
import org.sweeptally.event.Reject;
import org.sweeptally.event.RejectReason;
import org.sweeptally.event.TickBody;
import org.sweeptally.event.Track;
import org.sweeptally.region.LocalSite;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/** The wiring, without a bus. */
class OperatorTopologyTest {

    private static final Instant BEGIN = Instant.parse("2031-05-01T05:00:00Z");

    private final Site site = TestSite.withSnapshotScans(TestSite.twins(), 40);
    private final TopicNames names = new TopicNames(site.name(), "detections");
    private final TreeMap<Bytes, byte[]> snapshots = new TreeMap<>();
    private final TreeMap<Bytes, byte[]> progress = new TreeMap<>();
    private final List<KeyValue<byte[], byte[]>> log = new ArrayList<>();
    private String refusal;
    private final TreeMap<Integer, Long> tails = new TreeMap<>();
    private Duration longestTail = Duration.ofMinutes(1);
    private final List<String> said = new ArrayList<>();
    private final Revisions revisions = new Revisions(List.of(Revision.of(site)));

    /** All that came has been read, always. */
    private static final class AllRead implements ReadingWatch, ReadingWatch.Reading {
        @Override
        public Reading begins(int partition) {
            return this;
        }

        @Override
        public void routed(long offset) {}

        @Override
        public OptionalLong readToEndAt() {
            return OptionalLong.of(BEGIN.toEpochMilli() * 1000);
        }

        @Override
        public void ends() {}

        @Override
        public int partitions() {
            return 1;
        }
    }

    private final TailStarts tailStarts = new TailStarts() {
        @Override
        public void startsAt(int partition, long offset) {
            tails.put(partition, offset);
        }

        @Override
        public void ends(int partition) {
            tails.remove(partition);
        }
    };

    private Topology topology() {
        RegionPartitions regions = new RegionPartitions(site.regions().stream().map(region -> region.name()).toList());
        LogReader reader = (partition, from, to, sink) -> {
            for (long offset = from; offset <= to; offset++) {
                sink.entry(offset, log.get((int) offset).key, log.get((int) offset).value);
            }
            return to - from + 1;
        };
        return new OperatorTopology(
                        names,
                        new RouterPlan(regions, revisions, new AllRead(), true),
                        new RegionPlan(regions, 1, LocalSite::readSettings, SnapshotSchedule.of(site, 10_000), reader,
                                partition -> Optional.ofNullable(refusal), tailStarts, longestTail),
                        new OperatorStores(MapStore.over(RegionProcessor.SNAPSHOTS, snapshots),
                                MapStore.over(RegionProcessor.PROGRESS, progress)),
                        said::add)
                .get();
    }

    private TopologyTestDriver driver() {
        Properties properties = new Properties();
        properties.put("application.id", names.applicationId());
        properties.put("bootstrap.servers", "nowhere:1");
        return new TopologyTestDriver(topology(), properties, BEGIN);
    }

    private void send(TopologyTestDriver driver, String topic, byte[] key, byte[] value) {
        driver.createInputTopic(topic, new ByteArraySerializer(), new ByteArraySerializer())
                .pipeInput(key, value, BEGIN.toEpochMilli());
    }

    private void settings(TopologyTestDriver driver) {
        for (var region : site.regions()) {
            byte[] key = RegionPartitions.key(region.name());
            byte[] value = Wire.encode(revisions.all().get(0).entry());
            send(driver, names.regionLog(), key, value);
            log.add(KeyValue.pair(key, value));
        }
    }

    private List<KeyValue<byte[], byte[]>> read(TopologyTestDriver driver, String topic) {
        return driver.createOutputTopic(topic, new ByteArrayDeserializer(), new ByteArrayDeserializer())
                .readKeyValuesToList();
    }

    @Test
    void theRegionLogAloneJoinsTheTwoParts() {
        TopologyDescription description = topology().describe();
        assertThat(description.globalStores()).isEmpty();
        assertThat(description.subtopologies()).hasSize(2);
        List<Set<String>> sources = new ArrayList<>();
        List<Set<String>> sinks = new ArrayList<>();
        for (TopologyDescription.Subtopology part : description.subtopologies()) {
            Set<String> from = new TreeSet<>();
            Set<String> to = new TreeSet<>();
            for (TopologyDescription.Node node : part.nodes()) {
                if (node instanceof TopologyDescription.Source source) {
                    from.addAll(source.topicSet());
                } else if (node instanceof TopologyDescription.Sink sink) {
                    to.add(sink.topic());
                }
            }
            sources.add(from);
            sinks.add(to);
        }
        assertThat(sources).containsExactlyInAnyOrder(Set.of("detections"), Set.of(names.regionLog()));
        Set<String> ofRouter = sinks.get(sources.indexOf(Set.of("detections")));
        Set<String> ofRegion = sinks.get(sources.indexOf(Set.of(names.regionLog())));
        assertThat(ofRouter).containsExactlyInAnyOrder(names.regionLog(), names.rejects());
        assertThat(ofRegion).containsExactlyInAnyOrder(names.regionLog(), names.rejects(), names.tracks(),
                names.births(), names.ends(), names.counts(), names.picture(),
                names.heartbeat(), names.findings(), names.snapshots());
    }

    @Test
    void theRecordingGivesTheRecordsOfADryRun() {
        List<Part> parts = TestSite.recording(site);
        Published expected = DryRunOf.of(site, parts);
        Published published = new Published();
        try (TopologyTestDriver driver = driver()) {
            settings(driver);
            parts.forEach(part -> send(driver, "detections", null, Wire.encode(part)));
            read(driver, names.tracks()).forEach(r -> published.add("tracks", RegionPartitions.region(r.key),
                    Wire.decode(r.value, Track.class)));
            read(driver, names.counts()).forEach(r -> published.add("counts", RegionPartitions.region(r.key),
                    Wire.decode(r.value, Count.class)));
        }
        for (var region : site.regions()) {
            assertThat(published.of("tracks", region.name()))
                    .isNotEmpty()
                    .isEqualTo(expected.of("tracks", region.name()));
            assertThat(published.of("counts", region.name())).isEqualTo(expected.of("counts", region.name()));
        }
    }

    @Test
    void ticksAndProgressMarksGoThroughTheLogAndTheHeartbeatFollows() {
        try (TopologyTestDriver driver = driver()) {
            settings(driver);
            send(driver, "detections", null, Wire.encode(TestSite.recording(site).get(0)));
            driver.advanceWallClockTime(Duration.ofSeconds(1));
            List<Object> bodies = read(driver, names.regionLog()).stream()
                    .map(r -> Wire.decode(r.value, LogEntry.class).getBody())
                    .toList();
            assertThat(bodies).filteredOn(TickBody.class::isInstance).hasSize(2);
            assertThat(bodies).filteredOn(ProgressMarkBody.class::isInstance).hasSize(2);
            assertThat(read(driver, names.heartbeat()))
                    .hasSize(2)
                    .allSatisfy(r -> assertThat(Wire.decode(r.value, Heartbeat.class).getWallMicros())
                            .isEqualTo((BEGIN.toEpochMilli() + 1000) * 1000));
        }
    }

    @Test
    void whatIsNoPartIsRejectedBeforeAnyRegion() {
        try (TopologyTestDriver driver = driver()) {
            send(driver, "detections", null, "no part".getBytes(StandardCharsets.UTF_8));
            send(driver, "detections", null, null);
            assertThat(read(driver, names.regionLog())).isEmpty();
            assertThat(read(driver, names.rejects()))
                    .hasSize(2)
                    .allSatisfy(r -> assertThat(Wire.decode(r.value, Reject.class).getReasons().get(0).getReason())
                            .isEqualTo(RejectReason.NOT_A_PART));
        }
    }

    @Test
    void partsAreReadByTheSettingsThatHoldAtTheirTime() {
        List<Part> parts = TestSite.recording(site);
        Part early = parts.get(0);
        OptionalLong from = OptionalLong.of(early.getScanTimeMicros() + 10);
        Site later = TestSite.withoutSensor(site, 2, from, early.getSensor());
        revisions.add(Revision.of(later));
        Part late = TestSite.at(early, early.getScanTimeMicros() + 10);
        try (TopologyTestDriver driver = driver()) {
            send(driver, "detections", null, Wire.encode(early));
            assertThat(read(driver, names.rejects())).isEmpty();
            assertThat(read(driver, names.regionLog())).hasSize(2);
            send(driver, "detections", null, Wire.encode(late));
            assertThat(read(driver, names.rejects())).singleElement().satisfies(r -> assertThat(
                    Wire.decode(r.value, Reject.class).getReasons().get(0).getReason())
                    .isEqualTo(RejectReason.UNKNOWN_SENSOR));
        }
    }

    @Test
    void whereTheTailStartsIsToldWithEveryTickWhileThePartitionIsHere() {
        try (TopologyTestDriver driver = driver()) {
            settings(driver);
            driver.advanceWallClockTime(Duration.ofSeconds(1));
            assertThat(tails).as("no snapshot yet").containsExactlyEntriesOf(new TreeMap<>(Map.of(0, 0L)));
        }
        assertThat(tails).isEmpty();
    }

    @Test
    void regionsWithoutStateBeginOnlyWhereTheyMay() {
        refusal = "its state has been deleted";
        assertThatThrownBy(this::driver)
                .rootCause()
                .isInstanceOf(OperatorStoppedException.class)
                .hasMessage("partition 0 of the region log: its state has been deleted");
    }

    @Test
    void anEntryThatComesAgainStopsTheOperator() {
        try (TopologyTestDriver driver = driver()) {
            settings(driver);
        }
        try (TopologyTestDriver setBack = driver()) {
            assertThatThrownBy(() -> settings(setBack))
                    .rootCause()
                    .isInstanceOf(OperatorStoppedException.class)
                    .hasMessageContaining("offset 0 of partition 0 of the region log comes again")
                    .hasMessageContaining("set them to 2");
        }
    }

    @Test
    void aSecondDriverRecoversWhatTheFirstOneHad() {
        try (TopologyTestDriver driver = driver()) {
            settings(driver);
            for (Part part : TestSite.recording(site)) {
                send(driver, "detections", null, Wire.encode(part));
            }
            log.addAll(read(driver, names.regionLog()));
        }
        assertThat(snapshots.keySet()).as("snapshots").isNotEmpty();
        Progress before = Progress.of(progress.values().iterator().next());
        assertThat(before.entries()).isEqualTo(log.size());
        assertThat(before.applied()).isEqualTo(log.size() - 1);
        driver().close();
        assertThat(said).singleElement().asString().contains("of " + log.size() + " entries applied again");
        longestTail = Duration.ZERO.minusMillis(1);
        driver().close();
        assertThat(said).last().asString().contains("longer than half the transaction timeout");
        progress.replaceAll((key, value) ->
                new Progress(before.applied(), before.tailStart(), before.entries() - 1).toBytes());
        assertThatThrownBy(this::driver).rootCause().hasMessageContaining("entries were brought back");
    }
}
