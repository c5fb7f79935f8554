package org.sweeptally.stream;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.Comparator;
import java.util.List;
import java.util.Random;
import java.util.stream.Stream;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.event.Part;
import org.sweeptally.site.Site;

/**
 * Operators that are killed at random moments, while parts come in. The system property {@code sweeptally.kills} says
 * how often; 20 unless it is given.
 */
@Tag("long")
class OperatorKillTest {

    private static final int KILLS = Integer.getInteger("sweeptally.kills", 20);
    private static final Duration PATIENCE = Duration.ofSeconds(120);

    /** A part comes this often, so that parts come in as long as there is something to kill. */
    private static final long PART_MILLIS = 60;

    @TempDir
    private Path folder;

    private final Site site = TestSite.withSnapshotScans(TestSite.twins(), 30);
    private final BusReader reader = new BusReader(TestBus.names(site));

    @Test
    void killedAtRandomMomentsTheOutputIsThatOfTheUndisturbedRun() throws IOException, InterruptedException {
        long seed = System.nanoTime();
        Random random = new Random(seed);
        System.out.println("OperatorKillTest: " + KILLS + " kills, seed " + seed);
        List<Part> parts = parts(KILLS * 4_000L);
        TestBus.createTopics(site, 1, 2);
        Thread sensors = sending(parts);
        for (int kill = 0; kill < KILLS; kill++) {
            try (OperatorProcess operator = OperatorProcess.start(site, folder, "one")) {
                Thread.sleep(500 + random.nextInt(6_000));
                assertThat(operator.isAlive()).as("seed %s: %s", seed, operator.said()).isTrue();
                operator.kill();
            }
            if (kill % 4 == 3) {
                deleteState("one");
            }
        }
        assertThat(Files.readString(folder.resolve("one.txt"))).as("some recovered").contains("entries applied again");
        finish(sensors, parts, seed);
    }

    @Test
    void aSecondProcessTakesOverFromOneThatIsKilled() throws IOException, InterruptedException {
        long seed = System.nanoTime();
        Random random = new Random(seed);
        System.out.println("OperatorKillTest, take-over: seed " + seed);
        List<Part> parts = parts(4 * 7_000L);
        TestBus.createTopics(site, 1, 2);
        Thread sensors = sending(parts);
        OperatorProcess[] two = {OperatorProcess.start(site, folder, "a"), OperatorProcess.start(site, folder, "b")};
        for (int kill = 0; kill < 4; kill++) {
            Thread.sleep(5_000 + random.nextInt(2_000));
            two[kill % 2].kill();
            two[kill % 2] = OperatorProcess.start(site, folder, kill % 2 == 0 ? "a" : "b");
        }
        two[1].close();
        two[0].close();
        finish(sensors, parts, seed);
    }

    private List<Part> parts(long millis) {
        List<Part> recording = TestSite.recording(site);
        int times = (int) (millis / PART_MILLIS / recording.size()) + 1;
        return TestSite.repeated(recording, times, 90_000_000);
    }

    private Thread sending(List<Part> parts) {
        Thread sensors = new Thread(() -> {
            try (PartPublisher publisher = new PartPublisher(TestBus.clients(), TestBus.names(site).detections())) {
                for (Part part : parts) {
                    publisher.publish(part);
                    Thread.sleep(PART_MILLIS);
                }
                publisher.flush();
            } catch (InterruptedException e) {
                Thread.currentThread().interrupt();
            }
        });
        sensors.start();
        return sensors;
    }

    private void finish(Thread sensors, List<Part> parts, long seed) throws IOException, InterruptedException {
        Published expected = DryRunOf.of(site, parts);
        try (OperatorProcess last = OperatorProcess.start(site, folder, "last")) {
            sensors.join();
            Waiting.until(expected.counts() + " counts, seed " + seed, PATIENCE,
                    () -> reader.counts() >= expected.counts());
            assertThat(last.stop()).as(last.said()).isZero();
            assertThat(last.said()).contains("asked to stop", "stopped");
        }
        Published published = reader.published();
        Published folded = reader.fold();
        assertThat(published.all()).as("seed %s, the machine over the log", seed).isEqualTo(folded.all());
        assertThat(published.rejects()).as("seed %s", seed).isEqualTo(folded.rejects());
        assertThat(reader.silences()).as("seed %s: silences", seed).isZero();
        assertThat(published.all()).as("seed %s, the undisturbed run", seed).isEqualTo(expected.all());
    }

    private void deleteState(String name) throws IOException {
        Path state = folder.resolve(name + "-state");
        if (!Files.exists(state)) {
            return;
        }
        try (Stream<Path> files = Files.walk(state)) {
            for (Path file : files.sorted(Comparator.reverseOrder()).toList()) {
                Files.delete(file);
            }
        }
    }
}
