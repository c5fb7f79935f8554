package org.sweeptally.newyork;

import com.fasterxml.jackson.databind.ObjectMapper;
import com.fasterxml.jackson.databind.node.ArrayNode;
import com.fasterxml.jackson.databind.node.ObjectNode;
import java.io.IOException;
import java.time.Instant;
import java.time.ZoneOffset;
import java.time.format.DateTimeFormatter;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.SplittableRandom;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlanePoint;

/**
 * One invented shore radar, on the waterfront of Jersey City, on real traffic. Its figures are those
 * that IMO resolution MSC.192(79), performance standards for ship radar, demands of a navigation radar:
 *
 * <ul>
 *   <li>5.3.1.1: a target is shown in 8 of 10 scans, at a probability of false alarm of 1e-4: P_D 0.8, and 1e-4 false
 *       detections a resolution cell and scan.
 *   <li>Cells of 40 m and 2.5 degrees (discrimination, second hand).
 *   <li>Range within 30 m and bearing within 1 degree (clause 5.2, from memory): taken for two standard deviations.
 *   <li>Table 2: a ship above 500 GT is seen at 8 NM: the reach.
 * </ul>
 *
 * It turns once in 3 s (20 a minute: IALA V-128, from memory; the IMO's text at hand names no rate). False detections
 * fall evenly over the disc.
 */
final class SimulatedRadar {

    static final String NAME = "jersey-city";
    static final LatLon PLACE = new LatLon(40.7065, -74.0335);
    static final double REACH_METRES = 8 * 1852;
    static final double TURN_SECONDS = 3;
    static final double PROBABILITY_OF_DETECTION = 0.8;
    static final double RANGE_SIGMA_METRES = 15;
    static final double BEARING_SIGMA_RADIANS = StrictMath.toRadians(0.5);
    static final double FALSE_DETECTIONS_A_SCAN = 1e-4 * (REACH_METRES / 40) * (360 / 2.5);

    static final Instant BEGINNING = Instant.parse("2022-01-03T12:00:00Z");
    private static final DateTimeFormatter STAMP =
            DateTimeFormatter.ofPattern("yyyy-MM-dd'T'HH:mm:ss.SSSSSS'Z'").withZone(ZoneOffset.UTC);
    private static final ObjectMapper JSON = new ObjectMapper();

    private record Echo(double seconds, double range, double bearing) {}

    private final NewYorkVessels vessels;
    private final LocalPlane plane = new LocalPlane(PLACE);
    private final Shadow shadow;
    private final SplittableRandom random;

    /** @param shadow that it does not see into */
    SimulatedRadar(NewYorkVessels vessels, Shadow shadow, long seed) {
        this.vessels = vessels;
        this.shadow = shadow;
        this.random = new SplittableRandom(seed);
    }

    /** Parts of so many scans, one JSON object a line, one part a turn. */
    List<String> parts(int scans) throws IOException {
        List<String> lines = new ArrayList<>();
        for (int scan = 0; scan < scans; scan++) {
            lines.add(JSON.writeValueAsString(part(scan)));
        }
        return lines;
    }

    /** When a scan begins; it takes effect a turn later. */
    static double seconds(int scan) {
        return scan * TURN_SECONDS;
    }

    private ObjectNode part(int scan) {
        List<Echo> echoes = new ArrayList<>();
        vessels.at(seconds(scan)).keySet().forEach(vessel -> echo(vessel, seconds(scan), echoes));
        for (int left = poisson(FALSE_DETECTIONS_A_SCAN); left > 0; left--) {
            double range = REACH_METRES * Math.sqrt(random.nextDouble());
            double bearing = 2 * StrictMath.PI * random.nextDouble();
            if (!shadow.hides(range * StrictMath.sin(bearing), range * StrictMath.cos(bearing))) {
                echoes.add(new Echo(seconds(scan) + TURN_SECONDS * bearing / (2 * StrictMath.PI), range, bearing));
            }
        }
        echoes.sort(Comparator.comparingDouble(Echo::seconds));
        ObjectNode part = JSON.createObjectNode();
        part.put("sensor", NAME);
        part.put("scan", scan);
        part.put("scanTime", stamp(seconds(scan)));
        part.put("closesScan", true);
        ArrayNode list = part.putArray("detections");
        echoes.forEach(echo -> detection(list.addObject(), echo));
        return part;
    }

    /** The beam passes a vessel where it is by then: two rounds settle that to a millimetre. */
    private void echo(int vessel, double turnBegins, List<Echo> echoes) {
        double seconds = turnBegins;
        double[] at = null;
        for (int round = 0; round < 3; round++) {
            at = vessels.at(seconds).get(vessel);
            if (at == null) {
                return;
            }
            seconds = turnBegins + TURN_SECONDS * bearing(at[0], at[1]) / (2 * StrictMath.PI);
        }
        double range = Math.hypot(at[0], at[1]);
        if (range <= REACH_METRES && !shadow.hides(at[0], at[1]) && random.nextDouble() < PROBABILITY_OF_DETECTION) {
            echoes.add(new Echo(
                    seconds,
                    range + RANGE_SIGMA_METRES * gaussian(),
                    bearing(at[0], at[1]) + BEARING_SIGMA_RADIANS * gaussian()));
        }
    }

    private void detection(ObjectNode detection, Echo echo) {
        double sine = StrictMath.sin(echo.bearing());
        double cosine = StrictMath.cos(echo.bearing());
        double along = RANGE_SIGMA_METRES * RANGE_SIGMA_METRES;
        double across = echo.range() * echo.range() * BEARING_SIGMA_RADIANS * BEARING_SIGMA_RADIANS;
        detection.put("time", stamp(echo.seconds()));
        LatLon place = plane.toGeodetic(new PlanePoint(echo.range() * sine, echo.range() * cosine));
        detection.put("latitude", place.latitude()).put("longitude", place.longitude());
        detection.putObject("noise")
                .put("first", along * sine * sine + across * cosine * cosine)
                .put("cross", (along - across) * sine * cosine)
                .put("second", along * cosine * cosine + across * sine * sine);
    }

    private static double bearing(double east, double north) {
        double bearing = StrictMath.atan2(east, north);
        return bearing < 0 ? bearing + 2 * StrictMath.PI : bearing;
    }

    private static String stamp(double seconds) {
        return STAMP.format(BEGINNING.plusNanos(1000 * Math.round(seconds * 1e6)));
    }

    private int poisson(double mean) {
        double left = StrictMath.exp(-mean);
        int count = -1;
        for (double product = 1; product > left; product *= random.nextDouble()) {
            count++;
        }
        return count;
    }

    private double gaussian() {
        return Math.sqrt(-2 * StrictMath.log(1 - random.nextDouble()))
                * StrictMath.cos(2 * StrictMath.PI * random.nextDouble());
    }
}
