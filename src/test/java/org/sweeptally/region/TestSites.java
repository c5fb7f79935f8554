package org.sweeptally.region;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.OptionalLong;
import java.util.TreeMap;
import java.util.function.Function;
import java.util.function.UnaryOperator;
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

/** Invented sites in open sea: one region 4 km square around 40 N 30 W, or several side by side. */
final class TestSites {

    static final LatLon MIDDLE = new LatLon(40, -30);
    static final String REGION = "skell-mouth";

    /** Settings texts and the sites that they stand for. */
    static final class Reader implements Function<String, Site> {
        private final TreeMap<String, Site> sites = new TreeMap<>();

        String text(Site site) {
            String text = "settings " + sites.size() + " of revision " + site.revision();
            sites.put(text, site);
            return text;
        }

        @Override
        public Site apply(String text) {
            Site site = sites.get(text);
            if (site == null) {
                throw new IllegalArgumentException("no site was written as: " + text);
            }
            return site;
        }
    }

    private TestSites() {}

    /** Place at an offset from the middle, in metres, near enough for tests that need no exact one. */
    static LatLon at(double east, double north) {
        double latitude = MIDDLE.latitude() + north / 111_035;
        return new LatLon(latitude, MIDDLE.longitude()
                + east / (111_320 * StrictMath.cos(StrictMath.toRadians(latitude))));
    }

    static GeoPolygon rectangle(double west, double south, double east, double north) {
        return new GeoPolygon(List.of(at(west, south), at(east, south), at(east, north), at(west, north)), List.of());
    }

    static RegionSettings region(String name, GeoPolygon core) {
        return new RegionSettings(name, core, 300, 250);
    }

    static SensorSettings sensor(String name, double east, double north) {
        return new SensorSettings(
                name,
                Optional.of(at(east, north)),
                Optional.empty(),
                6000,
                new SensorSettings.PositionNoise(15, 15),
                DetectionProfile.constant(0.9),
                2,
                2.5,
                0,
                0,
                0,
                10);
    }

    static SensorSettings moving(String name) {
        return new SensorSettings(
                name,
                Optional.empty(),
                Optional.empty(),
                3000,
                new SensorSettings.PositionNoise(10, 20),
                DetectionProfile.constant(0.8),
                1,
                1,
                0,
                0,
                0,
                10);
    }

    static SensorSettings withSweep(SensorSettings s, double seconds) {
        return new SensorSettings(s.name(), s.position(), s.roams(), s.reachMetres(), s.noise(),
                s.detectionProbability(),
                s.clutterPerScan(), s.intervalSeconds(), seconds, s.leastIntervalSeconds(), s.disorderSeconds(),
                s.silentSeconds());
    }

    static SensorSettings withLeastInterval(SensorSettings s, double seconds) {
        return new SensorSettings(s.name(), s.position(), s.roams(), s.reachMetres(), s.noise(),
                s.detectionProbability(),
                s.clutterPerScan(), s.intervalSeconds(), s.sweepSeconds(), seconds, s.disorderSeconds(),
                        s.silentSeconds());
    }

    static SensorSettings withDisorder(SensorSettings s, double seconds) {
        return new SensorSettings(s.name(), s.position(), s.roams(), s.reachMetres(), s.noise(),
                s.detectionProbability(),
                s.clutterPerScan(), s.intervalSeconds(), s.sweepSeconds(), s.leastIntervalSeconds(), seconds,
                s.silentSeconds());
    }

    static SensorSettings withReach(SensorSettings s, double metres) {
        return new SensorSettings(s.name(), s.position(), s.roams(), metres, s.noise(), s.detectionProbability(),
                s.clutterPerScan(), s.intervalSeconds(), s.sweepSeconds(), s.leastIntervalSeconds(),
                        s.disorderSeconds(),
                s.silentSeconds());
    }

    static SensorSettings roaming(SensorSettings s, GeoPolygon roams) {
        return new SensorSettings(s.name(), s.position(), Optional.of(roams), s.reachMetres(), s.noise(),
                s.detectionProbability(), s.clutterPerScan(), s.intervalSeconds(), s.sweepSeconds(),
                s.leastIntervalSeconds(), s.disorderSeconds(), s.silentSeconds());
    }

    /** One region and these sensors. */
    static Site site(int revision, SensorSettings... sensors) {
        return site(revision, List.of(region(REGION, rectangle(-2000, -2000, 2000, 2000))), List.of(sensors));
    }

    static Site site(int revision, List<RegionSettings> regions, List<SensorSettings> sensors) {
        return new Site(
                "estuary",
                revision,
                OptionalLong.empty(),
                sensors,
                regions,
                MotionSettings.oneWay(0.1, 6, 25, 600),
                600,
                new UnseenSettings(5, 1, 1),
                new ThresholdSettings(0.7, 0.3),
                new BoundSettings(5, 20_000, 50_000, 200_000, 1000, 20_000, 64L << 20, 60, 200, 30, 1e-5, 2_000_000),
                false);
    }

    /** The same regions with another apron and other cells. */
    static Site withApron(Site s, double apronMetres, double cellMetres) {
        List<RegionSettings> regions = s.regions().stream()
                .map(region -> new RegionSettings(region.name(), region.core(), apronMetres, cellMetres))
                .toList();
        return new Site(s.name(), s.revision(), s.fromMicros(), s.sensors(), regions, s.motion(), s.lifetimeSeconds(),
                s.unseen(), s.thresholds(), s.bounds(), s.rejectOutside());
    }

    static Site withThresholds(Site s, double confirming, double ending) {
        return new Site(s.name(), s.revision(), s.fromMicros(), s.sensors(), s.regions(), s.motion(),
                s.lifetimeSeconds(),
                s.unseen(), new ThresholdSettings(confirming, ending), s.bounds(), s.rejectOutside());
    }

    static Site withBounds(Site s, UnaryOperator<BoundSettings> change) {
        return new Site(s.name(), s.revision(), s.fromMicros(), s.sensors(), s.regions(), s.motion(),
                s.lifetimeSeconds(),
                s.unseen(), s.thresholds(), change.apply(s.bounds()), s.rejectOutside());
    }

    static Site rejectingOutside(Site s) {
        return new Site(s.name(), s.revision(), s.fromMicros(), s.sensors(), s.regions(), s.motion(),
                s.lifetimeSeconds(),
                s.unseen(), s.thresholds(), s.bounds(), true);
    }

    static Site withoutSensor(Site s, int revision, String name) {
        List<SensorSettings> kept = new ArrayList<>(s.sensors());
        kept.removeIf(sensor -> sensor.name().equals(name));
        return site(revision, s.regions(), kept);
    }
}
