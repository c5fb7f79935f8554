package org.sweeptally.harbour;

import static org.assertj.core.api.Assertions.assertThat;
import static org.junit.jupiter.api.Assumptions.assumeTrue;

import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.PrintStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.cli.Main;

/** Real recordings in, object picture out, by the command that users run. */
class HarbourReplayTest {

    private static final List<String> FILES =
            List.of("tracks.ndjson", "births.ndjson", "ends.ndjson", "counts.ndjson", "rejects.ndjson");

    private HarbourRecordings recordings;

    @TempDir
    private Path folder;

    @BeforeEach
    void find() {
        recordings = HarbourRecordings.find();
        if (recordings == null) {
            System.err.println("SKIPPED, AND NOT SHOWN: the harbour recordings are not at ../shared/data"
                    + " (-Dsweeptally.shared=DIR names another folder)");
        }
        assumeTrue(recordings != null, "the harbour recordings are not there");
    }

    @Test
    void theRadarAloneFollowsTheVessels() throws IOException {
        HarbourScore mean = mean(List.of("radar"));
        System.out.println("harbour, radar alone, mean of four: " + mean);
        assertThat(mean.truthSideMetres()).isLessThanOrEqualTo(8.6);
        assertThat(mean.identityChangesPerVessel()).isLessThanOrEqualTo(0.6);
        assertThat(mean.meanConfirmed()).isLessThanOrEqualTo(5.0);
    }

    @Test
    void radarAndLidarFollowThemBetter() throws IOException {
        HarbourScore mean = mean(List.of("radar", "lidar"));
        System.out.println("harbour, radar and lidar, mean of four: " + mean);
        assertThat(mean.truthSideMetres()).isLessThanOrEqualTo(7.0);
        assertThat(mean.identityChangesPerVessel()).isLessThanOrEqualTo(1.15);
        assertThat(mean.meanConfirmed()).isLessThanOrEqualTo(5.0);
    }

    @Test
    void theOrderOfArrivalDoesNotMatter() throws IOException {
        List<String> sensors = List.of("radar", "lidar");
        for (int scenario : HarbourRecordings.SCENARIOS) {
            Path inTime = run(scenario, sensors, false);
            Path asArrived = run(scenario, sensors, true);
            for (String file : FILES) {
                assertThat(asArrived.resolve(file)).as("scenario %s", scenario).hasSameBinaryContentAs(inTime.resolve(file));
            }
        }
    }

    private HarbourScore mean(List<String> sensors) throws IOException {
        double metres = 0;
        double changes = 0;
        double confirmed = 0;
        for (int scenario : HarbourRecordings.SCENARIOS) {
            Path out = run(scenario, sensors, false);
            HarbourScore score = HarbourScore.of(recordings, scenario, out.resolve("tracks.ndjson"));
            metres += score.truthSideMetres();
            changes += score.identityChangesPerVessel();
            confirmed += score.meanConfirmed();
        }
        int n = HarbourRecordings.SCENARIOS.size();
        return new HarbourScore(metres / n, changes / n, confirmed / n);
    }

    private Path run(int scenario, List<String> sensors, boolean asArrived) throws IOException {
        Path out = Files.createTempDirectory(folder, "out");
        byte[] lines = String.join("\n", recordings.lines(scenario, sensors, asArrived)).getBytes(StandardCharsets.UTF_8);
        ByteArrayOutputStream printed = new ByteArrayOutputStream();
        PrintStream print = new PrintStream(printed, true, StandardCharsets.UTF_8);
        int exit = Main.run(
                new String[] {
                    "dry-run", "--site", "src/test/resources/harbour/site.yaml", "--parts", "-", "--out", out.toString()
                },
                new ByteArrayInputStream(lines), print, print);
        assertThat(exit).as(printed.toString(StandardCharsets.UTF_8)).isZero();
        assertThat(out.resolve("rejects.ndjson")).isEmptyFile();
        return out;
    }
}
