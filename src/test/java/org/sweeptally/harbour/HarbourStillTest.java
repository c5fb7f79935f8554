package org.sweeptally.harbour;

import static org.assertj.core.api.Assertions.assertThat;
import static org.junit.jupiter.api.Assumptions.assumeTrue;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.InputStream;
import java.io.PrintStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.TreeMap;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import org.sweeptally.cli.Main;
import org.sweeptally.harbour.HarbourRecordings.Order;

/**
 * The canal, where most of what is not a vessel stands still (moored craft, structures): with a kind of object for it,
 * what stands is told from what sails.
 */
class HarbourStillTest {

    private static final Path HARBOUR = Path.of("src", "test", "resources", "harbour");
    private static final String ONE_KIND = """
            motion:
              accelerationNoise: 0.2
              speedSigmaMetresPerSecond: 3
              largestSpeedMetresPerSecond: 15
            """;
    private static final String TWO_KINDS = """
            motion:
              profiles:
                craft:
                  share: 0.8
                  speedSigmaMetresPerSecond: 3
                  largestSpeedMetresPerSecond: 15
                  modes: {straight: {accelerationNoise: 0.2}}
                structure:
                  share: 0.2
                  lifetimeSeconds: 36000
                  speedSigmaMetresPerSecond: 0
                  modes: {still: {positionNoise: 0.1}}
            """;

    @TempDir
    private Path folder;

    @ParameterizedTest
    @ValueSource(ints = {13, 22})
    void whatStandsInTheCanalIsToldFromWhatSails(int scenario) throws IOException {
        Path data = HarbourRecordings.folder();
        if (!Files.isRegularFile(data.resolve("scans.csv"))) {
            System.err.println("SKIPPED: no harbour recordings in " + data.toAbsolutePath()
                    + "; standing still was NOT tried on real data.");
        }
        assumeTrue(Files.isRegularFile(data.resolve("scans.csv")), () -> "no harbour recordings in " + data);
        Path out = dryRun(scenario);
        ObjectMapper json = new ObjectMapper();
        Map<String, double[]> objects = new TreeMap<>();
        for (String line : Files.readAllLines(out.resolve("tracks.ndjson"))) {
            JsonNode track = json.readTree(line);
            double[] sums = objects.computeIfAbsent(track.get("object").asText(), name -> new double[5]);
            double east = track.get("eastMetres").asDouble();
            double north = track.get("northMetres").asDouble();
            if (sums[0] == 0) {
                sums[2] = east;
                sums[3] = north;
            }
            sums[0]++;
            sums[1] += track.get("moving").asBoolean() ? 1 : 0;
            sums[4] = Math.max(sums[4], Math.sqrt(
                    (east - sums[2]) * (east - sums[2]) + (north - sums[3]) * (north - sums[3])));
        }
        int still = 0;
        int sailing = 0;
        int wrong = 0;
        for (double[] sums : objects.values()) {
            boolean longShown = sums[0] >= 50;
            boolean calledMoving = sums[1] > 0.5 * sums[0];
            still += longShown && !calledMoving ? 1 : 0;
            sailing += longShown && calledMoving ? 1 : 0;
            // Whoever came so far did not stand, by any reading.
            wrong += longShown && !calledMoving && sums[4] > 30 ? 1 : 0;
        }
        double all = 0;
        double moving = 0;
        List<String> counts = Files.readAllLines(out.resolve("counts.ndjson"));
        for (String line : counts) {
            all += json.readTree(line).get("all").get("mean").asDouble() / counts.size();
            moving += json.readTree(line).get("moving").get("mean").asDouble() / counts.size();
        }
        System.out.printf(
                Locale.ROOT, "canal, scenario %d: of objects shown for 50 scans and more %d stand and %d sail, %d called still"
                        + " though they went over 30 m; mean number %.2f, moving %.2f%n",
                scenario, still, sailing, wrong, all, moving);
        assertThat(still).isPositive();
        assertThat(sailing).isBetween(2, 6);
        assertThat(wrong).isZero();
        assertThat(moving).isBetween(1.0, all);
    }

    private Path dryRun(int scenario) throws IOException {
        String site = Files.readString(HARBOUR.resolve("site.yaml"));
        assertThat(site).contains(ONE_KIND);
        Path changed = folder.resolve("site.yaml");
        Files.writeString(changed, site.replace(ONE_KIND, TWO_KINDS));
        Files.copy(HARBOUR.resolve("regions.geojson"), folder.resolve("regions.geojson"));
        Path parts = folder.resolve("parts.ndjson");
        Path out = folder.resolve("out");
        List<String> sensors = List.of("radar", "lidar");
        Files.write(parts, new HarbourRecordings(HarbourRecordings.folder()).parts(scenario, sensors, Order.TIME));
        ByteArrayOutputStream said = new ByteArrayOutputStream();
        PrintStream stream = new PrintStream(said, true, StandardCharsets.UTF_8);
        String[] command = {
            "dry-run", "--site", changed.toString(), "--parts", parts.toString(), "--out", out.toString()
        };
        int exit = Main.run(command, InputStream.nullInputStream(), stream, stream);
        assertThat(exit).as(said.toString(StandardCharsets.UTF_8)).isZero();
        return out;
    }
}
