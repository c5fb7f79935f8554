package org.sweeptally.cli;

import static java.nio.charset.StandardCharsets.UTF_8;
import static org.assertj.core.api.Assertions.assertThat;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Instant;
import java.time.temporal.ChronoUnit;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.SplittableRandom;
import java.util.TreeSet;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.model.FieldOfView;
import org.sweeptally.model.Look;
import org.sweeptally.site.PlaneSight;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/** The example of a site with a rotating radar, a camera and a moving lidar, checked and run as it stands. */
class SkerriesDryRunTest {

    private static final Path SITE = Path.of("src/main/resources/skerries/site.yaml");
    private static final double SECONDS = 150;
    private static final long BEGIN_MICROS = 1_935_374_400_000_000L; // 2031-05-01T04:00:00Z
    private static final double METRES_A_DEGREE = 111_200;
    private static final double METRES_A_DEGREE_EAST = 75_900;

    /** Two craft, by where they are and how they sail: the first passes behind the skerries as the radar sees it. */
    private static final double[][] VESSELS = {
        {-27.9985, 47.0073, 0.5, -9}, // longitude and latitude of the start, metres a second east and north
        {-28.0150, 47.0000, 5, -1.5},
    };

    @TempDir
    private Path folder;

    @Test
    void checkAcceptsItAndSaysWhatEachSensorSees() {
        CliRun run = CliRun.of("check", "--site", SITE.toString());
        assertThat(run.err()).isEmpty();
        assertThat(run.exitCode()).isZero();
        assertThat(run.out()).containsPattern("tower-radar +100 +\\d+ +\\d+ ").contains("from the middle");
        assertThat(run.out()).containsPattern("seen by no sensor: \\d+ %");
    }

    @Test
    void dryRunFollowsACraftBehindTheSkerriesWithoutLosingIt() throws IOException {
        Path parts = Files.write(folder.resolve("parts.ndjson"), parts(CliRun.site(SITE)));
        CliRun run = CliRun.of(
                "dry-run", "--site", SITE.toString(), "--parts", parts.toString(), "--out", folder.toString());
        assertThat(run.err()).isEmpty();
        assertThat(run.exitCode()).isZero();
        DryRunOf records = new DryRunOf(run, folder);
        assertThat(records.rejects()).isEmpty();
        assertThat(records.ends()).isEmpty();
        assertThat(objectsNear(records.tracks(), 0)).hasSize(1);
        assertThat(objectsNear(records.tracks(), 1)).hasSize(1);
    }

    /** The objects that were ever shown within 60 m of a vessel. */
    private static TreeSet<String> objectsNear(List<JsonNode> tracks, int vessel) {
        TreeSet<String> objects = new TreeSet<>();
        for (JsonNode track : tracks) {
            long micros = ChronoUnit.MICROS.between(
                    Instant.EPOCH, Instant.parse(track.get("time").asText()));
            LatLon truth = place(vessel, (micros - BEGIN_MICROS) / 1e6);
            double north = (track.get("latitude").asDouble() - truth.latitude()) * METRES_A_DEGREE;
            double east = (track.get("longitude").asDouble() - truth.longitude()) * METRES_A_DEGREE_EAST;
            if (Math.hypot(north, east) < 60) {
                objects.add(track.get("object").asText());
            }
        }
        return objects;
    }

    private static LatLon place(int vessel, double seconds) {
        double[] v = VESSELS[vessel];
        return new LatLon(v[1] + v[3] * seconds / METRES_A_DEGREE, v[0] + v[2] * seconds / METRES_A_DEGREE_EAST);
    }

    // The recording: what the sensors would send, by their own settings.

    private record Sent(double seconds, Map<String, Object> part) {}

    private static byte[] parts(Site site) throws IOException {
        SplittableRandom random = new SplittableRandom(11);
        LocalPlane plane = new LocalPlane(site.regions().get(0).core().middle());
        PlaneArea core = PlaneArea.of(site.regions().get(0).core(), plane);
        List<Sent> all = new ArrayList<>();
        for (SensorSettings sensor : site.sensors()) {
            PlaneSight sight = new PlaneSight(sensor, plane);
            for (double at = 0; at < SECONDS; at += sensor.intervalSeconds()) {
                all.add(new Sent(at + sensor.sweepSeconds(), part(sensor, sight, plane, core, at, random)));
            }
        }
        all.sort(Comparator.comparingDouble(Sent::seconds));
        ObjectMapper json = new ObjectMapper();
        StringBuilder lines = new StringBuilder();
        for (Sent sent : all) {
            lines.append(json.writeValueAsString(sent.part())).append('\n');
        }
        return lines.toString().getBytes(UTF_8);
    }

    private static Map<String, Object> part(
            SensorSettings sensor, PlaneSight sight, LocalPlane plane, PlaneArea core, double at, SplittableRandom random) {
        Map<String, Object> part = new LinkedHashMap<>();
        part.put("sensor", sensor.name());
        part.put("scanTime", time(at));
        part.put("closesScan", true);
        LatLon position = sensor.position().orElse(new LatLon(46.9950 + at * 2 / METRES_A_DEGREE, -27.9900));
        Double heading = sensor.position().isPresent() ? null : 5.0;
        if (heading != null) {
            part.put("sensorPosition", Map.of("latitude", position.latitude(), "longitude", position.longitude()));
            part.put("sensorHeadingDegrees", heading);
        }
        FieldOfView view = sight.from(position, heading);
        Look look = new Look(sensor.model(), view, Optional.empty(), core, 200);
        LocalPlane own = new LocalPlane(position);
        List<Map<String, Object>> detections = new ArrayList<>();
        for (int vessel = 0; vessel < VESSELS.length; vessel++) {
            double seen = at + sensor.sweepSeconds() * sweptShare(own.toPlane(place(vessel, at)));
            PlanePoint truth = own.toPlane(place(vessel, seen));
            PlanePoint inPlane = plane.toPlane(place(vessel, seen));
            if (random.nextDouble() < look.probabilityOfDetection(inPlane.eastMetres(), inPlane.northMetres())) {
                detections.add(detection(sensor, truth, seen, random));
            }
        }
        for (double left = sensor.clutterPerScan() + Math.log(1 - random.nextDouble());
                left > 0;
                left += Math.log(1 - random.nextDouble())) {
            PlanePoint place = falsePlace(sensor, view, own, plane, random);
            detections.add(detection(sensor, place, at + sensor.sweepSeconds() * sweptShare(place), random));
        }
        part.put("detections", detections);
        return part;
    }

    private static PlanePoint falsePlace(
            SensorSettings sensor, FieldOfView view, LocalPlane own, LocalPlane plane, SplittableRandom random) {
        while (true) {
            double range = sensor.reachMetres() * Math.sqrt(random.nextDouble());
            double azimuth = 2 * Math.PI * random.nextDouble();
            PlanePoint place = new PlanePoint(range * Math.sin(azimuth), range * Math.cos(azimuth));
            PlanePoint inPlane = plane.toPlane(own.toGeodetic(place));
            if (view.sees(inPlane.eastMetres(), inPlane.northMetres())) {
                return place;
            }
        }
    }

    /** How far a sweep that starts in the north has come when it passes a place. */
    private static double sweptShare(PlanePoint place) {
        double turns = Math.atan2(place.eastMetres(), place.northMetres()) / (2 * Math.PI);
        return turns - Math.floor(turns);
    }

    private static Map<String, Object> detection(
            SensorSettings sensor, PlanePoint at, double seconds, SplittableRandom random) {
        double range = Math.max(1, Math.hypot(at.eastMetres(), at.northMetres()));
        Map<String, Object> detection = new LinkedHashMap<>();
        detection.put("time", time(seconds));
        if (sensor.polar().isPresent()) {
            double azimuth = Math.toDegrees(Math.atan2(at.eastMetres(), at.northMetres()))
                    + sensor.polar().get().azimuthSigmaDegrees() * gaussian(random);
            detection.put("rangeMetres", range + sensor.polar().get().rangeSigmaMetres() * gaussian(random));
            detection.put("azimuthDegrees", azimuth - 360 * Math.floor(azimuth / 360));
            return detection;
        }
        double along = sensor.noise().alongSigmaMetres() * gaussian(random) / range;
        double across = sensor.noise().acrossSigmaMetres() * gaussian(random) / range;
        detection.put("eastMetres", at.eastMetres() + along * at.eastMetres() + across * at.northMetres());
        detection.put("northMetres", at.northMetres() + along * at.northMetres() - across * at.eastMetres());
        return detection;
    }

    private static String time(double seconds) {
        return Instant.EPOCH
                .plus(BEGIN_MICROS + Math.round(seconds * 1e6), ChronoUnit.MICROS)
                .toString();
    }

    private static double gaussian(SplittableRandom random) {
        return Math.sqrt(-2 * Math.log(1 - random.nextDouble())) * Math.cos(2 * Math.PI * random.nextDouble());
    }
}
