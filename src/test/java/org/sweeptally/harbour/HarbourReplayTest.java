package org.sweeptally.harbour;

import static org.assertj.core.api.Assertions.assertThat;
import static org.junit.jupiter.api.Assumptions.assumeTrue;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.InputStream;
import java.io.PrintStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Locale;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.sweeptally.cli.Main;
import org.sweeptally.harbour.HarbourRecordings.Order;

/**
 * Real recordings through the {@code dry-run} command, with one site file for all of them and for both sets of sensors.
 * Limits are our own: the mean over the four scenarios must stay below them.
 */
class HarbourReplayTest {

    private static final Path SITE = Path.of("src", "test", "resources", "harbour", "site.yaml");

    @TempDir
    private Path folder;

    @BeforeEach
    void recordingsAreThere() {
        Path recordings = HarbourRecordings.folder();
        boolean there = Files.isRegularFile(recordings.resolve("scans.csv"));
        if (!there) {
            System.err.println("SKIPPED: no harbour recordings in " + recordings.toAbsolutePath()
                    + "; name another folder by -Dsweeptally.shared=DIR. The product was NOT tried on real data.");
        }
        assumeTrue(there, () -> "no harbour recordings in " + recordings.toAbsolutePath());
    }

    @ParameterizedTest
    @CsvSource({"radar, 8.6, 0.3, 5.0", "radar+lidar, 6.9, 0.5, 5.0"})
    void theVesselsAreShownWhereTheyAreUnderOneIdentity(String sensors, double metres, double changes, double confirmed)
            throws IOException {
        List<String> names = List.of(sensors.split("\\+"));
        HarbourRecordings recordings = new HarbourRecordings(HarbourRecordings.folder());
        double[] mean = new double[3];
        for (int scenario : HarbourRecordings.SCENARIOS) {
            Path picture = dryRun(scenario, names, Order.TIME);
            HarbourScore score = HarbourScore.of(
                    recordings.scanSeconds(scenario, "radar"),
                    recordings.truth(scenario),
                    Files.readAllLines(picture.resolve("tracks.ndjson")),
                    "radar",
                    HarbourScore.CUT_METRES);
            System.out.printf(
                    Locale.ROOT, "harbour, %s, scenario %d: %.3f m, %.1f identity changes a vessel, %.2f shown%n",
                    sensors, scenario, score.truthSideMetres(), score.identityChangesPerVessel(),
                    score.meanConfirmed());
            mean[0] += score.truthSideMetres() / HarbourRecordings.SCENARIOS.size();
            mean[1] += score.identityChangesPerVessel() / HarbourRecordings.SCENARIOS.size();
            mean[2] += score.meanConfirmed() / HarbourRecordings.SCENARIOS.size();
        }
        System.out.printf(Locale.ROOT, "harbour, %s, mean: %.3f m, %.2f identity changes a vessel, %.2f shown%n",
                sensors, mean[0], mean[1], mean[2]);
        assertThat(mean[0]).as("metres off").isBetween(1.0, metres);
        assertThat(mean[1]).as("identity changes a vessel").isLessThanOrEqualTo(changes);
        assertThat(mean[2]).as("objects shown").isBetween(2.0, confirmed);
    }

    @Test
    void scansThatArriveLateGiveTheSameBytes() throws IOException {
        HarbourRecordings recordings = new HarbourRecordings(HarbourRecordings.folder());
        List<String> sensors = List.of("radar", "lidar");
        int differentlyOrdered = 0;
        for (int scenario : HarbourRecordings.SCENARIOS) {
            Path inTime = dryRun(scenario, sensors, Order.TIME);
            Path asArrived = dryRun(scenario, sensors, Order.ARRIVAL);
            for (String records : List.of("tracks", "births", "ends", "counts", "rejects")) {
                byte[] expected = Files.readAllBytes(inTime.resolve(records + ".ndjson"));
                assertThat(Files.readAllBytes(asArrived.resolve(records + ".ndjson")))
                        .as("%s of scenario %s", records, scenario)
                        .isEqualTo(expected);
            }
            assertThat(Files.size(inTime.resolve("tracks.ndjson"))).as("scenario %s", scenario).isPositive();
            assertThat(Files.size(inTime.resolve("rejects.ndjson"))).as("scenario %s", scenario).isZero();
            differentlyOrdered += recordings.parts(scenario, sensors, Order.TIME)
                            .equals(recordings.parts(scenario, sensors, Order.ARRIVAL))
                    ? 0
                    : 1;
        }
        assertThat(differentlyOrdered).as("scenarios whose order of arrival is not that of time").isPositive();
    }

    private Path dryRun(int scenario, List<String> sensors, Order order) throws IOException {
        String name = scenario + "-" + String.join("-", sensors) + "-" + order;
        Path parts = folder.resolve(name + ".ndjson");
        Path out = folder.resolve(name);
        Files.write(parts, new HarbourRecordings(HarbourRecordings.folder()).parts(scenario, sensors, order));
        ByteArrayOutputStream said = new ByteArrayOutputStream();
        PrintStream stream = new PrintStream(said, true, StandardCharsets.UTF_8);
        int exit = Main.run(
                new String[] {
                    "dry-run", "--site", SITE.toString(), "--parts", parts.toString(), "--out", out.toString()
                },
                InputStream.nullInputStream(), stream, stream);
        assertThat(exit).as(said.toString(StandardCharsets.UTF_8)).isZero();
        return out;
    }
}
