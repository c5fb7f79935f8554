package org.sweeptally.cli;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.SplittableRandom;
import org.sweeptally.event.Detection;
import org.sweeptally.event.GeodeticFix;
import org.sweeptally.event.OffsetFix;
import org.sweeptally.event.Part;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.region.text.PartJson;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/**
 * Makes the invented recording that comes with the program: ninety seconds of the estuary, as its three sensors would
 * see two ferries and four small craft, with what goes wrong on any real bus. Its {@link #main} writes the file anew.
 */
final class EstuaryRecording {

    static final Path SITE = Path.of("src/main/resources/estuary/site.yaml");
    static final Path FILE = Path.of("src/main/resources/estuary/parts.ndjson");

    private static final long SEED = 20310501;
    private static final long BEGIN_MICROS = 1_935_374_400_000_000L; // 2031-05-01T04:00:00Z
    private static final double SECONDS = 90;

    private static final LocalPlane PLANE = new LocalPlane(new LatLon(44.0, -33.5));

    /** The sensor that measures offsets from itself; the others measure latitude and longitude. */
    private static final String OFFSETS = "pilot-house";

    /**
     * A vessel: where it is at the beginning, how it moves, how fast it turns to the right, and when it is there.
     * Metres, metres a second, radians a second, seconds, in a plane that touches in the middle of the region.
     */
    private record Vessel(
            double east, double north, double speed, double headingDegrees, double turn, double from, double until) {

        PlanePoint at(double seconds) {
            double heading = StrictMath.toRadians(headingDegrees);
            if (turn == 0) {
                double way = speed * seconds;
                return new PlanePoint(east + way * StrictMath.sin(heading), north + way * StrictMath.cos(heading));
            }
            double radius = speed / turn;
            double turned = heading + turn * seconds;
            return new PlanePoint(
                    east + radius * (StrictMath.cos(heading) - StrictMath.cos(turned)),
                    north + radius * (StrictMath.sin(turned) - StrictMath.sin(heading)));
        }
    }

    private static final List<Vessel> VESSELS = List.of(
            new Vessel(-600, -1500, 7, 10, 0, 0, SECONDS), // a ferry, northbound
            new Vessel(500, 1400, 6.5, 185, 0, 0, SECONDS), // a ferry, southbound
            new Vessel(1650, 900, 8, 80, 0, 0, SECONDS), // leaves to the east after some 45 s
            new Vessel(900, -300, 3, 300, 0.012, 0, SECONDS), // fishes in a wide curve
            new Vessel(-1500, 250, 5, 20, 0, 0, SECONDS), // passes the pilot's landing
            new Vessel(-200, 600, 2, 120, 0, 30, SECONDS)); // casts off half a minute later

    /** A part, and when it arrives. */
    private record Sent(double seconds, Part part) {}

    private final Site site;
    private final SplittableRandom random = new SplittableRandom(SEED);

    EstuaryRecording(Site site) {
        this.site = site;
    }

    public static void main(String[] args) throws IOException {
        Files.write(FILE, new EstuaryRecording(CliRun.site(SITE)).lines());
    }

    /** The whole recording, line by line, in the order of arrival. */
    List<String> lines() {
        List<Sent> sent = new ArrayList<>();
        double offset = 0;
        for (SensorSettings sensor : site.sensors()) {
            long number = 1;
            for (double at = offset; at < SECONDS; at += sensor.intervalSeconds()) {
                sent.add(new Sent(at, scan(sensor, at, number++)));
            }
            offset += 0.3;
        }
        sent.sort(Comparator.comparingDouble(Sent::seconds));
        List<String> lines = new ArrayList<>();
        sent.forEach(one -> lines.add(PartJson.write(one.part())));
        return withMishaps(lines);
    }

    /** One look of a sensor: what it sees of the vessels, and what it takes for some. */
    private Part scan(SensorSettings sensor, double seconds, long number) {
        LocalPlane sensorPlane = new LocalPlane(sensor.position().orElseThrow());
        List<PlanePoint> seen = new ArrayList<>();
        for (Vessel vessel : VESSELS) {
            PlanePoint at = sensorPlane.toPlane(PLANE.toGeodetic(vessel.at(seconds)));
            double range = Math.sqrt(at.eastMetres() * at.eastMetres() + at.northMetres() * at.northMetres());
            boolean there = seconds >= vessel.from() && seconds <= vessel.until();
            if (there && range <= sensor.reachMetres()
                    && random.nextDouble() < sensor.detectionProbability().at(range)) {
                seen.add(measured(sensor, at, range));
            }
        }
        for (int left = poisson(sensor.clutterPerScan()); left > 0; left--) {
            double range = sensor.reachMetres() * Math.sqrt(random.nextDouble());
            double bearing = 2 * StrictMath.PI * random.nextDouble();
            seen.add(new PlanePoint(range * StrictMath.sin(bearing), range * StrictMath.cos(bearing)));
        }
        seen.sort(Comparator.comparingDouble(PlanePoint::eastMetres)); // so that their order tells nothing
        List<Detection> detections = new ArrayList<>();
        for (PlanePoint at : seen) {
            detections.add(detection(sensor, sensorPlane, at, number, detections.size()));
        }
        return Part.newBuilder()
                .setSensor(sensor.name())
                .setScanTimeMicros(BEGIN_MICROS + Math.round(seconds * 1e6))
                .setScan(number)
                .setPart(0)
                .setClosesScan(true)
                .setDetections(detections)
                .build();
    }

    /** With the sensor's error along and across its line of sight. */
    private PlanePoint measured(SensorSettings sensor, PlanePoint at, double range) {
        double along = sensor.noise().alongSigmaMetres() * gaussian() / range;
        double across = sensor.noise().acrossSigmaMetres() * gaussian() / range;
        return new PlanePoint(
                at.eastMetres() + along * at.eastMetres() + across * at.northMetres(),
                at.northMetres() + along * at.northMetres() - across * at.eastMetres());
    }

    private static Detection detection(
            SensorSettings sensor, LocalPlane sensorPlane, PlanePoint at, long number, int index) {
        Object measurement;
        if (sensor.name().equals(OFFSETS)) {
            measurement = new OffsetFix(rounded(at.eastMetres(), 1e1), rounded(at.northMetres(), 1e1));
        } else {
            LatLon place = sensorPlane.toGeodetic(at);
            measurement = new GeodeticFix(rounded(place.latitude(), 1e7), rounded(place.longitude(), 1e7));
        }
        return Detection.newBuilder()
                .setIndex(index)
                .setId(sensor.name().charAt(0) + "" + number + "-" + index)
                .setMeasurement(measurement)
                .build();
    }

    private static double rounded(double value, double parts) {
        return Math.rint(value * parts) / parts;
    }

    /** What goes wrong on any real bus: a broken number, a sensor with a slip in its name, a part sent twice. */
    private static List<String> withMishaps(List<String> sound) {
        List<String> lines = new ArrayList<>();
        for (int i = 0; i < sound.size(); i++) {
            String line = sound.get(i);
            if (i == 40) {
                int second = line.indexOf("},{", line.indexOf("\"detections\"")) + 2;
                line = line.substring(0, second) + "{\"id\":\"broken\",\"latitude\":NaN,\"longitude\":-33.5082},"
                        + line.substring(second);
            }
            lines.add(line);
            if (i == 70) {
                lines.add(line.replaceFirst("\"sensor\":\"[a-z-]+\"", "\"sensor\":\"sooth-shore\""));
            }
            if (i == 100) {
                lines.add(line);
            }
        }
        return lines;
    }

    /** By counting the events of a unit-rate process (Knuth 1969, "Seminumerical Algorithms", 3.4.1, from memory). */
    private int poisson(double mean) {
        int events = -1;
        for (double left = mean; left >= 0; events++) {
            left += StrictMath.log(1 - random.nextDouble());
        }
        return events;
    }

    /** Box and Muller 1958. */
    private double gaussian() {
        double radius = Math.sqrt(-2 * StrictMath.log(1 - random.nextDouble()));
        return radius * StrictMath.cos(2 * StrictMath.PI * random.nextDouble());
    }
}
