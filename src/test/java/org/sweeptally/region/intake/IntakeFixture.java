package org.sweeptally.region.intake;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.OptionalLong;
import java.util.Random;
import org.sweeptally.event.Coverage;
import org.sweeptally.event.Detection;
import org.sweeptally.event.GeoPoint;
import org.sweeptally.event.GeodeticFix;
import org.sweeptally.event.Noise;
import org.sweeptally.event.OffsetFix;
import org.sweeptally.event.Part;
import org.sweeptally.event.SensorPromise;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;
import org.sweeptally.model.DetectionProfile;
import org.sweeptally.site.BoundSettings;
import org.sweeptally.site.MotionSettings;
import org.sweeptally.site.RegionSettings;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;
import org.sweeptally.site.ThresholdSettings;
import org.sweeptally.site.UnseenSettings;

/** An invented site with one sensor ashore and one on a ferry, and parts that it accepts. */
public final class IntakeFixture {

    /** 2031-05-01T04:00:42.5Z. */
    public static final long SCAN_TIME = 1_935_374_442_500_000L;

    /** Sweep of the sensor north-shore. */
    public static final double SWEEP_SECONDS = 2.5;

    /** Most detections of a part. */
    public static final int MOST_DETECTIONS = 50;

    private IntakeFixture() {}

    /** Sensors north-shore, fixed and turning in 2.5 s, and ferry, moving and looking at instants. */
    public static Site site() {
        return new Site("estuary", 1, OptionalLong.empty(),
                List.of(sensor("north-shore", Optional.of(new LatLon(53.9, 8.1)), SWEEP_SECONDS),
                        sensor("ferry", Optional.empty(), 0)),
                List.of(new RegionSettings("outer", new GeoPolygon(
                        List.of(new LatLon(53.8, 8.0), new LatLon(53.8, 8.3), new LatLon(54.0, 8.3),
                                new LatLon(54.0, 8.0)),
                        List.of()), 500, 200)),
                MotionSettings.oneWay(0.05, 6, 30, 600), 600, new UnseenSettings(1, 1, 1), new ThresholdSettings(0.9, 0.1),
                new BoundSettings(4, 1000, 1000, 100_000, 200, MOST_DETECTIONS, 64 << 20, 60, 100, 30, 1e-5, 2_000_000), false);
    }

    /** A closing part of north-shore with detections at places. */
    public static Part part(int detections) {
        List<Detection> list = new ArrayList<>();
        for (int i = 0; i < detections; i++) {
            list.add(at(i, 53.91 + 0.001 * i, 8.12));
        }
        return Part.newBuilder().setSensor("north-shore").setScanTimeMicros(SCAN_TIME).setScan(17L).setPart(3)
                .setClosesScan(true).setDetections(list).build();
    }

    /** A detection at a place. */
    public static Detection at(int index, double latitude, double longitude) {
        return Detection.newBuilder().setIndex(index).setId("a" + index)
                .setMeasurement(new GeodeticFix(latitude, longitude)).build();
    }

    /** A valid part in which every field may or may not be given. */
    public static Part random(Random random) {
        boolean ferry = random.nextBoolean();
        List<Detection> detections = new ArrayList<>();
        int count = random.nextInt(6);
        for (int i = 0; i < count; i++) {
            detections.add(detection(random, i, ferry ? 0 : SWEEP_SECONDS));
        }
        return Part.newBuilder()
                .setSensor(ferry ? "ferry" : "north-shore")
                .setScanTimeMicros(SCAN_TIME + random.nextInt(1_000_000_000))
                .setScan(random.nextBoolean() ? null : (Long) Math.abs(random.nextLong() >> 1))
                .setPart(random.nextInt(20))
                .setClosesScan(random.nextBoolean())
                .setPromise(random.nextInt(4) > 0 ? null
                        : new SensorPromise(random.nextBoolean() ? null : (Long) (SCAN_TIME + random.nextInt())))
                .setCoverage(random.nextBoolean() ? null : coverage(random))
                .setSensorPosition(ferry || random.nextBoolean() ? place(random) : null)
                .setSensorHeadingDegrees(maybe(random, random.nextDouble() * 360))
                .setSensorEastMetresPerSecond(maybe(random, random.nextGaussian()))
                .setSensorNorthMetresPerSecond(maybe(random, random.nextGaussian()))
                .setDetections(detections)
                .build();
    }

    private static Detection detection(Random random, int index, double sweepSeconds) {
        double first = 1 + random.nextDouble();
        Detection detection = Detection.newBuilder()
                .setIndex(index)
                .setId(random.nextBoolean() ? null : "tr\u00e4ck \"" + random.nextInt(100) + "\" \ud83d\udea2")
                .setMeasurement(random.nextBoolean()
                        ? new GeodeticFix(random.nextDouble() * 180 - 90, random.nextDouble() * 360 - 180)
                        : new OffsetFix(random.nextGaussian() * 1000, random.nextGaussian() * 1000))
                .setNoise(random.nextBoolean() ? null : new Noise(first, random.nextDouble() - 0.5, 2 * first))
                .setHeightMetres(maybe(random, random.nextGaussian() * 100))
                .setStrength(maybe(random, random.nextGaussian()))
                .setDeclaredIdentity(random.nextBoolean() ? null : "the ferry")
                .build();
        detection.setTimeMicros(null);
        return detection;
    }

    private static Coverage coverage(Random random) {
        boolean sector = random.nextBoolean();
        return new Coverage(maybe(random, random.nextDouble() * 100), maybe(random, 100 + random.nextDouble() * 100),
                sector ? (Double) (random.nextDouble() * 360) : null,
                        sector ? (Double) (random.nextDouble() * 360) : null,
                random.nextBoolean() ? null : List.of(
                        new GeoPoint(53.9, 8.1, null), new GeoPoint(53.9, 8.2, 3.0), new GeoPoint(54.0, 8.2, null)));
    }

    private static GeoPoint place(Random random) {
        return new GeoPoint(random.nextDouble() * 180 - 90, random.nextDouble() * 360 - 180,
                maybe(random, random.nextDouble() * 50));
    }

    private static Double maybe(Random random, double value) {
        return random.nextBoolean() ? null : (Double) value;
    }

    private static SensorSettings sensor(String name, Optional<LatLon> position, double sweepSeconds) {
        return new SensorSettings(name, position, Optional.empty(), 5000, new SensorSettings.PositionNoise(10, 10),
                DetectionProfile.constant(0.9), 10, 2.5, sweepSeconds, 0, 0, 10);
    }
}
