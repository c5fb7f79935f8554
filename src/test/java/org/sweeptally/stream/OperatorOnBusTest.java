package org.sweeptally.stream;

import static org.assertj.core.api.Assertions.assertThat;
import static org.junit.jupiter.api.Assumptions.assumeTrue;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import java.util.OptionalLong;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import org.sweeptally.event.Count;
import org.sweeptally.event.Part;
import org.sweeptally.event.SnapshotHead;
import org.sweeptally.event.SnapshotPiece;
import org.sweeptally.harbour.HarbourRecordings;
import org.sweeptally.region.LocalSite;
import org.sweeptally.region.RegionMachine;
import org.sweeptally.region.wire.Message;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/** The operator beside a real broker. */
@Tag("long")
class OperatorOnBusTest {

    private static final Duration PATIENCE = Duration.ofSeconds(90);

    @TempDir
    private Path folder;

    @Test
    void theRecordingOnTheBusGivesTheRecordsOfADryRun() throws InterruptedException {
        Site site = TestSite.twins();
        TestBus.createTopics(site, 1, 2);
        List<Part> parts = TestSite.recording(site);
        TestBus.publish(site, parts);
        try (Operator operator = operator(site, "a")) {
            operator.start();
            awaitCounts(site, DryRunOf.of(site, parts));
        }
        assertIsTheDryRun(site, parts);
    }

    @ParameterizedTest
    @ValueSource(ints = {2, 4, 13, 22})
    void harbourRecordingsInOrderOfArrivalGiveTheRecordsOfADryRun(int scenario)
            throws IOException, InterruptedException {
        assumeTrue(Files.isDirectory(HarbourRecordings.folder()),
                "SKIPPED: no harbour recordings in " + HarbourRecordings.folder());
        Site site = TestSite.named(
                TestSite.read(Path.of("src/test/resources/harbour/site.yaml")), TestBus.newSiteName());
        List<Part> parts = TestSite.parts(TestSite.lines(new HarbourRecordings(HarbourRecordings.folder())
                .parts(scenario, List.of("radar", "lidar"), HarbourRecordings.Order.ARRIVAL)), site);
        TestBus.createTopics(site, 1, 1);
        TestBus.publish(site, parts);
        try (Operator operator = operator(site, "a")) {
            operator.start();
            awaitCounts(site, DryRunOf.of(site, parts));
        }
        assertIsTheDryRun(site, parts);
    }

    @ParameterizedTest
    @ValueSource(booleans = {false, true})
    void aRestartWithOrWithoutItsFolderGoesOnWhereItWas(boolean folderDeleted)
            throws InterruptedException {
        Site site = TestSite.withSnapshotScans(TestSite.twins(), 15);
        TestBus.createTopics(site, 1, 2);
        List<Part> parts = TestSite.recording(site);
        TestBus.publish(site, parts.subList(0, 90));
        try (Operator operator = operator(site, "a")) {
            operator.start();
            Waiting.until("counts", PATIENCE, () -> new BusReader(TestBus.names(site)).counts() > 60);
        }
        TestBus.publish(site, parts.subList(90, parts.size()));
        try (Operator operator = operator(site, folderDeleted ? "b" : "a")) {
            operator.start();
            awaitCounts(site, DryRunOf.of(site, parts));
        }
        assertIsTheDryRun(site, parts);
    }

    @Test
    void aBacklogReadUnevenlyMakesNoFalseLateness() throws InterruptedException {
        Site site = TestSite.withSnapshotScans(TestSite.twins(), 50);
        TestBus.createTopics(site, 2, 2);
        List<Part> parts = TestSite.repeated(TestSite.recording(site), 10, 90_000_000);
        String first = parts.get(0).getSensor();
        // All of one sensor before anything of the others, each on a partition of its own.
        TestBus.publish(site, 0, parts.stream().filter(part -> part.getSensor().equals(first)).toList());
        try (Operator operator = operator(site, "a")) {
            operator.start();
            assertThat(operator.awaitRunning(PATIENCE)).isTrue();
            Waiting.until("the first sensor's parts in the log", PATIENCE,
                    () -> new BusReader(TestBus.names(site)).all(TestBus.names(site).regionLog()).size() > 400);
            TestBus.publish(site, 1, parts.stream().filter(part -> !part.getSensor().equals(first)).toList());
            awaitCounts(site, DryRunOf.of(site, parts));
        }
        assertIsTheDryRun(site, parts);
        assertThat(new BusReader(TestBus.names(site)).all(TestBus.names(site).snapshots())).isNotEmpty();
    }

    @Test
    void settingsThatChangeInMidStreamHoldFromTheirTimeWhileTheOldProcessStillRuns() throws InterruptedException {
        Site site = TestSite.withSnapshotScans(TestSite.twins(), 15);
        TestBus.createTopics(site, 1, 2);
        List<Part> parts = TestSite.recording(site);
        long from = parts.get(100).getScanTimeMicros() + 1;
        Site later = TestSite.revised(site, 2, OptionalLong.of(from), 0.6);
        TestBus.publish(site, parts.subList(0, 90));
        try (Operator old = operator(site, "old"); Operator young = operator(later, "young")) {
            old.start();
            Waiting.until("counts", PATIENCE, () -> new BusReader(TestBus.names(site)).counts() > 60);
            young.start();
            TestBus.publish(site, parts.subList(90, parts.size()));
            awaitCounts(site, DryRunOf.of(site, parts));
        }
        BusReader reader = new BusReader(TestBus.names(site));
        assertThat(reader.published().all()).isEqualTo(reader.fold().all());
        assertThat(reader.silences()).isZero();
        assertThat(reader.all(TestBus.names(site).counts())).allSatisfy(record -> {
            Count count = Wire.decode(record.value(), Count.class);
            assertThat(count.getSettingsRevision()).isEqualTo(count.getTimeMicros() < from ? 1 : 2);
        });
    }

    @Test
    void snapshotsOnTheBusAddUpToMachinesThatRun() throws InterruptedException {
        Site site = TestSite.withSnapshotScans(TestSite.twins(), 15);
        TestBus.createTopics(site, 1, 1);
        List<Part> parts = TestSite.recording(site);
        TestBus.publish(site, parts);
        try (Operator operator = operator(site, "a")) {
            operator.start();
            awaitCounts(site, DryRunOf.of(site, parts));
        }
        List<SnapshotPiece> pieces = new ArrayList<>();
        int[] whole = new int[1];
        new BusReader(TestBus.names(site)).forEach(TestBus.names(site).snapshots(), record -> {
            if (Wire.open(record.value()) instanceof Message.Ours ours
                    && ours.schema().getName().equals("SnapshotPiece")) {
                pieces.add(Wire.decode(record.value(), SnapshotPiece.class));
                return;
            }
            SnapshotHead head = Wire.decode(record.value(), SnapshotHead.class);
            List<SnapshotPiece> its = pieces.stream()
                    .filter(p -> p.getRegion().equals(head.getRegion()) && p.getSnapshot() == head.getSnapshot())
                    .toList();
            byte[] state = new Snapshot(head, its).state();
            RegionMachine machine = RegionMachine.restore(state, LocalSite::readSettings);
            assertThat(machine.region()).isEqualTo(head.getRegion());
            assertThat(machine.sequence()).isEqualTo(head.getSequence());
            whole[0]++;
        });
        assertThat(whole[0]).isGreaterThanOrEqualTo(10);
    }

    private Operator operator(Site site, String stateFolder) {
        return new Operator(
                new OperatorSettings(site, TestBus.names(site), TestBus.clients(), folder.resolve(stateFolder)),
                said -> { });
    }

    private static void awaitCounts(Site site, Published expected) throws InterruptedException {
        BusReader reader = new BusReader(TestBus.names(site));
        long counts = expected.counts();
        Waiting.until(counts + " counts on the bus", PATIENCE, () -> reader.counts() >= counts);
    }

    private static void assertIsTheDryRun(Site site, List<Part> parts) {
        Published expected = DryRunOf.of(site, parts);
        BusReader reader = new BusReader(TestBus.names(site));
        assertThat(expected.records()).isPositive();
        assertThat(reader.published().all()).isEqualTo(expected.all());
        assertThat(reader.published().rejects()).isEqualTo(expected.rejects());
        assertThat(reader.fold().all()).isEqualTo(expected.all());
        assertThat(reader.silences()).isZero();
    }
}
