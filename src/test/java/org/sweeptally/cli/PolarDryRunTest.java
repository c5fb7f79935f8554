package org.sweeptally.cli;

import static org.assertj.core.api.Assertions.assertThat;

import com.fasterxml.jackson.databind.JsonNode;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Instant;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlanePoint;

/**
 * A rotating radar that measures slant range, azimuth and range rate, in a region whose plane touches 9 km away: a
 * launch that passes by is where the truth is. Invented.
 */
class PolarDryRunTest {

    private static final LatLon RADAR = new LatLon(44.05, -33.55);
    private static final double MAST_METRES = 60;
    private static final double SWEEP = 2.5;

    private static final String SITE = """
            site: polar-basin
            revision: 1
            sensors:
              mast:
                position: {latitude: 44.05, longitude: -33.55}
                reachMetres: 16000
                measures: polar
                rangeSigmaMetres: 15
                azimuthSigmaDegrees: 0.4
                rangeRateSigmaMetresPerSecond: 0.3
                heightMetres: 60
                objectHeightMetres: 2
                detectionProbability: 0.9
                clutterPerScan: 20
                intervalSeconds: 2.5
                sweepSeconds: 2.5
            motion: {accelerationNoise: 0.05, speedSigmaMetresPerSecond: 5}
            lifetimeSeconds: 900
            unseen: {birthsPerSquareKilometrePerHour: 1}
            regions:
              basin: {polygon: [[[-33.5, 43.98], [-33.4, 43.98], [-33.4, 44.08], [-33.5, 44.08], [-33.5, 43.98]]]}
            """;

    @TempDir
    private Path folder;

    private final LocalPlane plane = new LocalPlane(RADAR);

    /** 7 m/s to the south-east, 5 km from the radar. */
    private double[] launch(double seconds) {
        return new double[] {5000 + 5 * seconds, -1000 - 5 * seconds};
    }

    /** One turn: false detections over the whole reach, and the launch where the beam passes it. */
    private String turn(int number, SplittableRandom random) {
        double begin = SWEEP * number;
        List<String> detections = new ArrayList<>();
        for (int i = 0; i < 20; i++) {
            double range = 16_000 * Math.sqrt(random.nextDouble());
            double degrees = 360 * random.nextDouble();
            double rate = random.nextDouble(-20, 20);
            detections.add(detection("false", begin + SWEEP * degrees / 360, range, degrees, rate));
        }
        double seconds = begin;
        for (int i = 0; i < 5; i++) {
            double[] x = launch(seconds);
            seconds = begin + SWEEP * Math.toDegrees(Math.atan2(x[0], x[1])) / 360;
        }
        double[] x = launch(seconds);
        double height = MAST_METRES - 2;
        double slant = Math.sqrt(x[0] * x[0] + x[1] * x[1] + height * height);
        double rate = (x[0] * 5 - x[1] * 5) / slant;
        if (random.nextDouble() < 0.9) {
            detections.add(detection(
                    "launch",
                    seconds,
                    slant + 15 * gaussian(random),
                    Math.toDegrees(Math.atan2(x[0], x[1])) + 0.4 * gaussian(random),
                    rate + 0.3 * gaussian(random)));
        }
        return "{\"sensor\":\"mast\",\"scanTime\":\"" + time(begin) + "\",\"closesScan\":true,\"detections\":["
                + String.join(",", detections) + "]}";
    }

    private static String detection(String id, double seconds, double range, double degrees, double rate) {
        return String.format(Locale.ROOT, "{\"id\":\"%s\",\"time\":\"%s\",\"rangeMetres\":%.3f,\"azimuthDegrees\":%.5f,"
                + "\"rangeRateMetresPerSecond\":%.3f}", id, time(seconds), range, degrees, rate);
    }

    private static String time(double seconds) {
        return Instant.parse("2031-05-01T04:00:00Z").plusNanos(Math.round(seconds * 1e6) * 1000).toString();
    }

    @Test
    void aLaunchIsFollowedByAPolarRadar() throws IOException {
        SplittableRandom random = new SplittableRandom(3);
        List<String> lines = new ArrayList<>();
        for (int number = 0; number < 60; number++) {
            lines.add(turn(number, random));
        }
        DryRunOf run = run(lines);
        assertThat(run.err()).isEmpty();
        assertThat(run.exitCode()).isZero();
        assertThat(run.rejects()).isEmpty();
        assertThat(run.counts()).hasSize(60);
        String launch = run.births().stream()
                .map(birth -> birth.get("object").asText())
                .filter(object -> usesLaunch(tracksOf(run, object)))
                .findFirst()
                .orElseThrow();
        List<JsonNode> tracks = tracksOf(run, launch);
        assertThat(tracks).as("shown throughout, seed 3").hasSizeGreaterThan(54);
        double sum = 0;
        double velocity = 0;
        int n = 0;
        for (JsonNode track : tracks.subList(10, tracks.size())) {
            double seconds = (Instant.parse(track.get("time").asText()).toEpochMilli()
                    - Instant.parse("2031-05-01T04:00:00Z").toEpochMilli()) / 1000.0;
            PlanePoint at = plane.toPlane(
                    new LatLon(track.get("latitude").asDouble(), track.get("longitude").asDouble()));
            double[] x = launch(seconds);
            sum += Math.pow(at.eastMetres() - x[0], 2) + Math.pow(at.northMetres() - x[1], 2);
            velocity += Math.hypot(
                    track.get("eastMetresPerSecond").asDouble() - 5, track.get("northMetresPerSecond").asDouble() + 5);
            n++;
        }
        // A single detection is off by 15 m along and 36 to 40 m across.
        assertThat(Math.sqrt(sum / n)).as("seed 3").isLessThan(25);
        assertThat(velocity / n).as("seed 3").isLessThan(1);
        assertThat(run.births()).as("false ones are rare").hasSizeLessThan(4);
    }

    private static boolean usesLaunch(List<JsonNode> tracks) {
        return tracks.stream().anyMatch(track -> track.get("used").findValuesAsText("id").contains("launch"));
    }

    private static List<JsonNode> tracksOf(DryRunOf run, String object) {
        try {
            return run.tracks().stream().filter(track -> track.get("object").asText().equals(object)).toList();
        } catch (IOException e) {
            throw new IllegalStateException(e);
        }
    }

    private DryRunOf run(List<String> lines) throws IOException {
        Path site = Files.writeString(folder.resolve("site.yaml"), SITE);
        Path parts = Files.write(folder.resolve("parts.ndjson"), lines);
        CliRun run = CliRun.of(
                "dry-run", "--site", site.toString(), "--parts", parts.toString(), "--out", folder.toString());
        return new DryRunOf(run, folder);
    }

    /** Bad ranges beside good ones, and a whole run goes on. */
    @Test
    void badRangesAreRejectedAndTheLaunchIsFollowedAllTheSame() throws IOException {
        SplittableRandom random = new SplittableRandom(4);
        List<String> lines = new ArrayList<>();
        for (int number = 0; number < 20; number++) {
            String bad = "{\"rangeMetres\":-5,\"azimuthDegrees\":10},{\"rangeMetres\":5,\"azimuthDegrees\":400},"
                    + "{\"rangeMetres\":1,\"azimuthDegrees\":10},{\"rangeMetres\":100,\"azimuthDegrees\":NaN},";
            String turn = turn(number, random);
            lines.add(number == 5 ? turn.replace("\"detections\":[", "\"detections\":[" + bad) : turn);
        }
        DryRunOf run = run(lines);
        assertThat(run.exitCode()).isZero();
        assertThat(run.rejects()).hasSize(1);
        JsonNode reasons = run.rejects().get(0).get("reasons");
        assertThat(reasons.findValuesAsText("sentence")).anyMatch(s -> s.contains("rangeMetres is -5.0"))
                .anyMatch(s -> s.contains("azimuthDegrees is 400.0"));
        assertThat(run.tracks()).anyMatch(track -> track.get("sequence").asInt() > 15);
    }

    @Test
    void checkTellsWhatAPolarSensorMeasures() throws IOException {
        Path site = Files.writeString(folder.resolve("site.yaml"),
                SITE.replace("    sweepSeconds: 2.5\n", "    sweepSeconds: 2.5\n    timeOffsetSeconds: -0.4\n"));
        CliRun run = CliRun.of("check", "--site", site.toString());
        assertThat(run.err()).isEmpty();
        assertThat(run.exitCode()).isZero();
        assertThat(run.out())
                .contains("mast: measures range within 15 m and azimuth within 0.4 degrees, across at the end of its"
                        + " reach 111.701 m; range rate within 0.3 m/s, false ones up to 20 m/s")
                .contains("mast: -0.4 s are added to its times");
    }

    /** Box and Muller 1958. */
    private static double gaussian(SplittableRandom random) {
        double radius = Math.sqrt(-2 * Math.log(1 - random.nextDouble()));
        return radius * Math.cos(2 * Math.PI * random.nextDouble());
    }
}
