package org.sweeptally.site;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.OptionalDouble;
import java.util.OptionalLong;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;
import org.sweeptally.model.ClutterLearning;
import org.sweeptally.model.CoordinatedTurn;
import org.sweeptally.model.DetectionProfile;
import org.sweeptally.model.MissRuns;
import org.sweeptally.model.MotionMode;
import org.sweeptally.model.MotionProfile;
import org.sweeptally.model.NearlyConstantVelocity;
import org.sweeptally.model.StandingStill;
import org.sweeptally.site.SensorSettings.PositionNoise;

class EffectiveSettingsTest {

    /** Of range rates too, of sensors that do not use any. */
    private static final double LARGEST_SPEED = 31.25;

    private static final Path ESTUARY = Path.of("src", "main", "resources", "estuary", "site.yaml");

    @TempDir
    Path folder;

    @Test
    void theEstuaryIsWrittenOutWithEveryDefault() throws IOException {
        String golden = Files.readString(Path.of("src", "test", "resources", "site", "estuary-effective.yaml"));
        assertThat(EffectiveSettings.text(valid(SiteReader.read(ESTUARY)))).isEqualTo(golden);
    }

    @Test
    void whatIsWrittenReadsBackEqualAndIsWrittenTheSame() {
        Site estuary = valid(SiteReader.read(ESTUARY));
        String text = EffectiveSettings.text(estuary);
        assertThat(valid(SiteReader.readText(text))).isEqualTo(estuary);
        assertThat(EffectiveSettings.text(valid(SiteReader.readText(text)))).isEqualTo(text);
    }

    @Test
    void anySiteReadsBackEqual() {
        for (long seed = 1; seed <= 200; seed++) {
            Site site = randomSite(new SplittableRandom(seed));
            String text = EffectiveSettings.text(site);
            SiteResult result = SiteReader.readText(text);
            assertThat(result).as("seed %d: %s", seed, text).isEqualTo(new SiteResult.Valid(site));
        }
    }

    /** 5 sigmas of 15 m and twice 10 s at four times 5 m/s; 4 births an hour that stay a quarter of it. */
    @Test
    void defaultsAreWhatTheyAreSaidToBe() {
        Site site = valid(SiteReader.read(ESTUARY));
        assertThat(site.region("skell-mouth")).hasValueSatisfying(region -> {
            assertThat(region.apronMetres()).isEqualTo(5 * 15 + 2 * 20 * 10);
            assertThat(region.unseenCellMetres()).isCloseTo(4012 / 48.0, within(0.1));
        });
        assertThat(site.motion().largestSpeedMetresPerSecond()).isEqualTo(20);
        assertThat(site.unseen().outsidePerSquareKilometre()).isEqualTo(1);
        assertThat(site.unseen().initialPerSquareKilometre()).isEqualTo(1);
        assertThat(site.rejectOutside()).isFalse();
        assertThat(site.fromMicros()).isEmpty();
        assertThat(site.bounds())
                .isEqualTo(new BoundSettings(5, 20_000, 50_000, 1_000_000, 1000, 20_000, 64L << 20, 60, 200, 30, 1e-5, 2_000_000));
        assertThat(site.sensors())
                .extracting(SensorSettings::name)
                .containsExactly("north-shore", "pilot-house", "south-shore");
        assertThat(site.sensor("north-shore").orElseThrow().silentSeconds()).isEqualTo(10);
        assertThat(valid(SiteReader.readText(EffectiveSettings.text(site).replaceAll("(?m)^thresholds:\n.*\n.*\n", "")))
                        .thresholds())
                .isEqualTo(new ThresholdSettings(0.7, 0.3));
    }

    /**
     * Shares that are not given are what is left, in equal parts; a turn of known rate is one to the left and one to
     * the right.
     */
    @Test
    void profilesHaveTheDefaultsThatTheyAreSaidToHave() {
        Site site = valid(SiteReader.readText(withMotion("""
                motion:
                  profiles:
                    piles: {share: 0.1, lifetimeSeconds: 86400, modes: {still: {}}}
                    craft:
                      speedSigmaMetresPerSecond: 6
                      modes:
                        turning: {accelerationNoise: 1, degreesPerSecond: 9, share: 0.2}
                        straight: {accelerationNoise: 0.05}
                        still: {}
                """)));
        NearlyConstantVelocity straight = new NearlyConstantVelocity(0.05);
        StandingStill still = new StandingStill(0.01, 0.1);
        assertThat(site.profiles())
                .containsExactly(
                        new MotionProfile("craft", 0.9, 900, 6, 24, List.of(
                                new MotionMode("still", still, 0.4, 600),
                                new MotionMode("straight", straight, 0.4, 60),
                                new MotionMode("turning-left", new CoordinatedTurn(9, 1), 0.1, 10),
                                new MotionMode("turning-right", new CoordinatedTurn(-9, 1), 0.1, 10))),
                        new MotionProfile("piles", 0.1, 86_400, 0, 0, List.of(
                                new MotionMode("still", still, 1, Double.POSITIVE_INFINITY))));
        assertThat(site.region("skell-mouth").orElseThrow().apronMetres()).isEqualTo(5 * 15 + 2 * 24 * 10);
        assertThat(site.unseen().outsidePerSquareKilometre())
                .isCloseTo(4 * (0.9 * 900 + 0.1 * 86_400) / 3600, within(1e-12));
        assertThat(valid(SiteReader.readText(EffectiveSettings.text(site)))).isEqualTo(site);
    }

    /** The text of settings is in the log: what was one line of motion stays it, however it is written. */
    @Test
    void aSingleKindThatKeepsStraightIsWrittenInTheShortForm() {
        Site shortForm = valid(SiteReader.read(ESTUARY));
        Site longForm = valid(SiteReader.readText(withMotion("""
                motion:
                  profiles:
                    object:
                      speedSigmaMetresPerSecond: 5
                      modes: {straight: {accelerationNoise: 0.05}}
                """)));
        assertThat(longForm.motion()).isEqualTo(shortForm.motion());
        assertThat(EffectiveSettings.text(shortForm)).contains("motion:\n  accelerationNoise: 0.05\n");
    }

    /** The estuary with another section on motion, and with what follows from it left open. */
    private static String withMotion(String motion) {
        return EffectiveSettings.text(valid(SiteReader.read(ESTUARY)))
                .replaceFirst("motion:\n(  .*\n)+", motion)
                .replaceAll("    apronMetres.*\n|  (outside|initial)PerSquareKilometre.*\n", "");
    }

    @Test
    void aSmallRegionHasCellsOfNoLessThan25Metres() {
        String text = EffectiveSettings.text(valid(SiteReader.read(ESTUARY)))
                .replaceAll("(?m)^    cellMetres.*\n", "")
                .replace("-33.475", "-33.524")
                .replace("44.018", "43.983");
        assertThat(valid(SiteReader.readText(text)).regions().get(0).unseenCellMetres()).isEqualTo(25);
    }

    @Test
    void aMovingSensorsRoamsMayBeInAFile() throws IOException {
        Site estuary = valid(SiteReader.read(ESTUARY));
        String text = EffectiveSettings.text(estuary)
                .replaceFirst("position: .*", "roams: roams.geojson");
        Files.writeString(folder.resolve("site.yaml"), text);
        String polygon =
                "{\"type\": \"Polygon\", \"coordinates\": [[[-33.5, 44], [-33.4, 44], [-33.4, 44.1], [-33.5, 44]]]}";
        GeoPolygon expected = new GeoPolygon(
                List.of(new LatLon(44, -33.5), new LatLon(44, -33.4), new LatLon(44.1, -33.4)), List.of());
        String feature = "{\"type\": \"Feature\", \"properties\": null, \"geometry\": " + polygon + "}";
        String collection = "{\"type\": \"FeatureCollection\", \"features\": [" + feature + "]}";
        for (String json : List.of(polygon, feature, collection)) {
            Files.writeString(folder.resolve("roams.geojson"), json);
            Site site = valid(SiteReader.read(folder.resolve("site.yaml")));
            assertThat(site.sensors().get(0).position()).isEmpty();
            assertThat(site.sensors().get(0).roams()).hasValue(expected);
            assertThat(valid(SiteReader.readText(EffectiveSettings.text(site)))).isEqualTo(site);
        }
    }

    /** Up to three regions beside each other, sensors that all reach one of them. */
    private static Site randomSite(SplittableRandom random) {
        double south = random.nextDouble(-80, 80);
        double west = random.nextDouble(-180, 180);
        List<RegionSettings> regions = new ArrayList<>();
        for (int i = 0; i <= random.nextInt(3); i++) {
            regions.add(new RegionSettings(
                    "region-" + i,
                    cell(random, south, west + .05 * i, i == 0),
                    random.nextDouble(0, 2000),
                    random.nextDouble(30, 300)));
        }
        List<SensorSettings> sensors = new ArrayList<>();
        for (int i = 0; i <= random.nextInt(3); i++) {
            sensors.add(randomSensor(random, "sensor-" + i, south, west));
        }
        double ending = random.nextDouble(.1, .5);
        double lifetime = random.nextDouble(1, 1e6);
        return new Site(
                random.nextBoolean() ? "null" : "0777",
                random.nextInt(1, Integer.MAX_VALUE),
                random.nextBoolean() ? OptionalLong.empty() : OptionalLong.of(random.nextLong(-1L << 50, 1L << 52)),
                sensors,
                regions,
                randomMotion(random, lifetime),
                lifetime,
                new UnseenSettings(random.nextDouble(0, 9), random.nextDouble(0, 9), random.nextDouble(0, 9)),
                new ThresholdSettings(random.nextDouble(ending + .01, 1), ending),
                new BoundSettings(
                        random.nextDouble(1, 9),
                        random.nextInt(1, 99_999),
                        random.nextInt(1, 99_999),
                        random.nextLong(1, 1L << 39),
                        random.nextInt(1, 9999),
                        random.nextInt(1, 99_999),
                        random.nextLong(1 << 20, 1L << 39),
                        random.nextDouble(1, 99),
                        random.nextInt(1, 999),
                        random.nextDouble(1, 600),
                        random.nextDouble(1e-9, .01),
                        random.nextInt(1000, 99_999_999)),
                random.nextBoolean());
    }

    private static MotionSettings randomMotion(SplittableRandom random, double lifetime) {
        if (random.nextBoolean()) {
            return MotionSettings.oneWay(
                    random.nextDouble(1e-9, 1), random.nextDouble(.1, 20), LARGEST_SPEED, lifetime);
        }
        double share = random.nextDouble();
        MotionProfile craft = new MotionProfile(
                "craft", share, random.nextBoolean() ? lifetime : random.nextDouble(1, 1e6),
                random.nextDouble(.1, 20), LARGEST_SPEED, randomModes(random));
        MotionMode still = new MotionMode(
                "still", new StandingStill(random.nextDouble(1e-9, 1), .1), 1, Double.POSITIVE_INFINITY);
        return new MotionSettings(List.of(
                craft, new MotionProfile("piles", 1 - share, random.nextDouble(1, 1e6), 0, 0, List.of(still))));
    }

    private static List<MotionMode> randomModes(SplittableRandom random) {
        double turning = random.nextDouble();
        double rate = random.nextDouble(.1, 20);
        double noise = random.nextDouble(.1, 20);
        double dwell = random.nextDouble(.1, 99);
        boolean both = random.nextBoolean();
        List<MotionMode> modes = new ArrayList<>();
        if (both) {
            modes.add(new MotionMode(
                    "straight", new NearlyConstantVelocity(random.nextDouble(1e-9, 1)), 1 - turning, random.nextDouble(1, 999)));
        }
        double share = both ? turning : 1;
        if (random.nextBoolean()) {
            modes.add(new MotionMode("turning-left", new CoordinatedTurn(rate, noise), share / 2, dwell));
            modes.add(new MotionMode("turning-right", new CoordinatedTurn(-rate, noise), share / 2, dwell));
        } else {
            modes.add(new MotionMode(
                    "turning", new NearlyConstantVelocity(noise), share, both ? dwell : Double.POSITIVE_INFINITY));
        }
        return modes;
    }

    private static GeoPolygon cell(SplittableRandom random, double south, double west, boolean mayHaveHole) {
        List<LatLon> outer = rectangle(south, west, .05);
        boolean hole = mayHaveHole && random.nextBoolean();
        return new GeoPolygon(outer, hole ? List.of(rectangle(south + .01, west + .01, .01)) : List.of());
    }

    private static List<LatLon> rectangle(double south, double west, double side) {
        double left = Math.IEEEremainder(west, 360);
        double right = Math.IEEEremainder(west + side, 360);
        return List.of(
                new LatLon(south, left),
                new LatLon(south, right),
                new LatLon(south + side, right),
                new LatLon(south + side, left));
    }

    private static SensorSettings randomSensor(SplittableRandom random, String name, double south, double west) {
        Optional<LatLon> position = random.nextBoolean()
                ? Optional.of(new LatLon(south + random.nextDouble(.05), Math.IEEEremainder(west, 360)))
                : Optional.empty();
        Optional<GeoPolygon> roams = position.isEmpty() && random.nextBoolean()
                ? Optional.of(new GeoPolygon(rectangle(south, west, random.nextDouble(.01, 1)), List.of()))
                : Optional.empty();
        double along = random.nextDouble(1, 10);
        double interval = random.nextDouble(.1, 20);
        DetectionProfile profile = random.nextBoolean()
                ? DetectionProfile.constant(random.nextDouble(.01, .99))
                : new DetectionProfile(List.of(
                        new DetectionProfile.Point(random.nextDouble(1, 100), random.nextDouble(.01, .99)),
                        new DetectionProfile.Point(random.nextDouble(200, 999), random.nextDouble(.01, .99))));
        SensorSettings sensor = new SensorSettings(
                name,
                position,
                roams,
                random.nextDouble(100, 9999),
                new PositionNoise(along, random.nextBoolean() ? along : random.nextDouble(1, 10)),
                profile,
                random.nextDouble(.1, 99),
                interval,
                random.nextDouble(0, 3),
                random.nextDouble(0, interval),
                random.nextDouble(0, 3),
                random.nextDouble(1, 60),
                randomSight(random, south, west, position.isEmpty()),
                random.nextBoolean() ? MissRuns.NONE : new MissRuns(random.nextDouble(0, 60), random.nextDouble(.1, 1)),
                random.nextBoolean()
                        ? ClutterLearning.OFF
                        : new ClutterLearning(random.nextDouble(600, 5000), random.nextDouble(300, 900)),
                Optional.empty(),
                0);
        sensor = random.nextBoolean() ? sensor : sensor.withTimeOffset(random.nextDouble(-9, 9));
        return random.nextBoolean() ? sensor : sensor.measuring(randomPolar(random));
    }

    private static SightSettings randomSight(SplittableRandom random, double south, double west, boolean moves) {
        List<SightSettings.SectorSettings> sectors = random.nextBoolean()
                ? List.of()
                : List.of(
                        new SightSettings.SectorSettings(random.nextDouble(-180, -90), random.nextDouble(-80, -10)),
                        new SightSettings.SectorSettings(random.nextDouble(0, 90), random.nextDouble(95, 160)));
        List<SightSettings.AreaSettings> areas = new ArrayList<>();
        for (int i = random.nextInt(3); i > 0; i--) {
            areas.add(new SightSettings.AreaSettings(
                    cell(random, south, west, true), random.nextDouble(.1, 1), random.nextBoolean()));
        }
        return new SightSettings(
                random.nextBoolean() ? 0 : random.nextDouble(0, 99),
                sectors,
                moves && !sectors.isEmpty() && random.nextBoolean(),
                random.nextBoolean() ? List.of() : List.of(cell(random, south, west, true), cell(random, south, west, true)),
                random.nextBoolean() ? List.of() : List.of(cell(random, south, west, true)),
                areas);
    }

    private static PolarSettings randomPolar(SplittableRandom random) {
        boolean rate = random.nextBoolean();
        return new PolarSettings(
                random.nextDouble(1, 10),
                random.nextDouble(.1, 5),
                rate ? OptionalDouble.of(random.nextDouble(.1, 5)) : OptionalDouble.empty(),
                random.nextBoolean() ? OptionalDouble.of(random.nextDouble(-9, 99)) : OptionalDouble.empty(),
                random.nextDouble(-9, 99),
                rate ? random.nextDouble(1, 99) : LARGEST_SPEED);
    }

    private static Site valid(SiteResult result) {
        assertThat(result).isInstanceOf(SiteResult.Valid.class);
        return ((SiteResult.Valid) result).site();
    }
}
