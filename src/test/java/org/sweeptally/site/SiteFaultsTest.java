package org.sweeptally.site;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.stream.Collectors;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class SiteFaultsTest {

    private static final Path RESOURCES = Path.of("src", "test", "resources", "site");

    /** A sound site on one page, for one change at a time. */
    private static final String SOUND = """
            site: basin
            revision: 2
            from: 2031-05-01T05:00:00.123456Z
            sensors:
              radar:
                position: {latitude: 44.05, longitude: -33.45}
                reachMetres: 9000
                sigmaMetres: 15
                detectionProbability: 0.9
                clutterPerScan: 20
                intervalSeconds: 2.5
            motion: {accelerationNoise: 0.05, speedSigmaMetresPerSecond: 5}
            lifetimeSeconds: 900
            unseen: {birthsPerSquareKilometrePerHour: 4}
            regions:
              east: {polygon: [[[-33.45, 44.0], [-33.4, 44.0], [-33.4, 44.1], [-33.45, 44.1], [-33.45, 44.0]]]}
              west: {polygon: [[[-33.5, 44.0], [-33.45, 44.0], [-33.45, 44.1], [-33.5, 44.1], [-33.5, 44.0]]]}
            """;

    @TempDir
    Path folder;

    @Test
    void theSoundSiteIsSound() {
        assertThat(SiteReader.readText(SOUND)).isInstanceOf(SiteResult.Valid.class);
    }

    @ParameterizedTest
    @ValueSource(strings = {"faulty", "sliver", "unreached"})
    void allFaultsOfAFileAreToldAtOnce(String name) throws IOException {
        String golden = Files.readString(RESOURCES.resolve(name + ".txt"));
        String told = lines(SiteReader.read(RESOURCES.resolve(name + ".yaml")));
        assertThat(told.replace('\\', '/')).isEqualTo(golden);
    }

    @ParameterizedTest
    @CsvSource(delimiter = '|', value = {
        "revision: 2 | revision: two | settings:2: revision: is two, must be a whole number",
        "revision: 2 | revision: 99999999999 | settings:2: revision: is 99999999999, must be a whole number",
        "site: basin | site: | settings:1: site: is empty, must be a name",
        "site: basin | site: null | settings:1: site: is empty, must be a name",
        "00.123456Z | 00.1234567Z | settings:3: from: is 2031-05-01T05:00:00.1234567Z, must be a time",
        "reachMetres: 9000 | reachMetres: -3 | settings:7: sensors.radar.reachMetres: is -3, must be more than 0",
        "reachMetres: 9000 | reachMetres: .inf | reachMetres: is .inf, must be a number more than 0",
        "reachMetres: 9000 | ReachMetre: 9000 | settings:7: sensors.radar.ReachMetre: is not known here, the nearest known key is reachMetres",
        "reachMetres: 9000 | reachMetres: 9000, | reachMetres: is 9000,, must be a number",
        "reachMetres: 9000 | reachMetres: {a: 1} | reachMetres: is a mapping, must be a number",
        "sigmaMetres: 15 | sigmaMetres: 0 | sigmaMetres: is 0, must be from 0.001",
        "sigmaMetres: 15 | alongSigmaMetres: 15 | settings:5: sensors.radar.acrossSigmaMetres: is missing",
        "detectionProbability: 0.9 | detectionProbability: 0 | detectionProbability: is 0, must be more than 0 and less than 1",
        "detectionProbability: 0.9 | detectionProbability: [0.9] | detectionProbability[0]: is 0.9, must be a mapping",
        "detectionProbability: 0.9 | detectionProbability: [{rangeMetres: 5, probability: .5}, {rangeMetres: 4, probability: .5}] | detectionProbability[1].rangeMetres: is 4, must be more than the range before it, 5",
        "intervalSeconds: 2.5 | leastIntervalSeconds: 9 | settings:5: sensors.radar.intervalSeconds: is missing",
        "clutterPerScan: 20 | leastIntervalSeconds: 9 | leastIntervalSeconds: is 9, must be at most intervalSeconds, 2.5",
        "clutterPerScan: 20 | leastRangeMetres: 9000 | leastRangeMetres: is 9000, must be less than reachMetres, 9000",
        "clutterPerScan: 20 | sectors: 3 | sensors.radar.sectors: is 3, must be a list of {fromAzimuthDegrees, toAzimuthDegrees}",
        "clutterPerScan: 20 | sectors: [{fromAzimuthDegrees: 400, toAzimuthDegrees: 4}] | sectors[0].fromAzimuthDegrees: is 400, must be from -360 to 360",
        "clutterPerScan: 20 | sectors: [{fromAzimuthDegrees: 0, toAzimuthDegrees: 360}] | sectors[0].toAzimuthDegrees: is 360, must point elsewhere than fromAzimuthDegrees",
        "clutterPerScan: 20 | sectors: [{fromAzimuthDegrees: 350, toAzimuthDegrees: 20}, {fromAzimuthDegrees: 10, toAzimuthDegrees: 30}] | sectors[1]: overlaps the sector [0], must not",
        "clutterPerScan: 20 | sectorsFromHeading: true | sectorsFromHeading: is true, must be absent or false for a sensor with a position",
        "clutterPerScan: 20 | shadows: [] | shadows: is a list, must be the name of a GeoJSON file, or a list of polygons",
        "clutterPerScan: 20 | shadows: lee.geojson | shadows: is lee.geojson, must be written out here",
        "clutterPerScan: 20 | obstacles: [[[[-33.4, 44], [-33.3, 44], [-33.4, 44.1]]]] | obstacles[0][0]: the ring is not closed",
        "clutterPerScan: 20 | obstacles: [[[[-33.4, 44], [-3.3, 44], [-33.4, 44.1], [-33.4, 44]]]] | obstacles: a polygon is 2387 km across, must be at most 1000 km",
        "clutterPerScan: 20 | areas: [{factor: 0.5}] | areas[0].polygon: is missing, must be a list of rings",
        "clutterPerScan: 20 | areas: [{polygon: [[[-33.4, 44], [-33.3, 44], [-33.4, 44.1], [-33.4, 44]]], factor: 1.5}] | areas[0].factor: is 1.5, must be more than 0, at most 1",
        "clutterPerScan: 20 | areas: [{polygon: [[[-33.4, 44], [-33.3, 44], [-33.4, 44.1], [-33.4, 44]]], factor: 0.5, probability: 0.5}] | areas[0].factor: must be absent where probability is given",
        "clutterPerScan: 20 | areas: [{polygon: [[[-33.4, 44], [-33.3, 44], [-33.4, 44.1], [-33.4, 44]]]}] | areas[0].probability: is missing, must be a number more than 0 and less than 1",
        "clutterPerScan: 20 | misses: {hiddenSeconds: -1, detectableProbability: 0.9} | misses.hiddenSeconds: is -1, must be from 0 to 86400",
        "clutterPerScan: 20 | misses: {hiddenSeconds: 6, detectableProbability: 1.2} | misses.detectableProbability: is 1.2, must be more than 0, at most 1",
        "clutterPerScan: 20 | clutterLearning: {seconds: 300} | clutterLearning.seconds: is 300, must be from 600 to 31536000",
        "clutterPerScan: 20 | clutterLearning: {seconds: 900, cellMetres: 5} | clutterLearning.cellMetres: is 5, must be from 25 to 100000",
        "sigmaMetres: 15 | measures: polar | settings:5: sensors.radar.rangeSigmaMetres: is missing",
        "sigmaMetres: 15 | measures: range | sensors.radar.measures: is range, must be position or polar",
        "intervalSeconds: 2.5 | azimuthSigmaDegrees: 1 | azimuthSigmaDegrees: must be absent for a sensor that measures positions; measures: polar allows it",
        "intervalSeconds: 2.5 | measures: polar | sigmaMetres: must be absent for a sensor that measures range and azimuth (measures: polar)",
        "intervalSeconds: 2.5 | timeOffsetSeconds: 90000 | timeOffsetSeconds: is 90000, must be from -86400 to 86400",
        "intervalSeconds: 2.5 | timeOfsetSeconds: 1 | timeOfsetSeconds: is not known here, the nearest known key is timeOffsetSeconds",
        "latitude: 44.05, | latitude: 91, | settings:6: sensors.radar.position.latitude: is 91, must be from -90 to 90",
        "latitude: 44.05, | latitude: -44.05, | reachMetres: is 9000, must reach the apron of at least one region",
        "position: {latitude: 44.05, longitude: -33.45} | roams: basin.geojson | roams: is basin.geojson, must be written out here",
        "position: {latitude: 44.05, longitude: -33.45} | roams: [[[0, 44], [0.1, 44], [0.1, 44.1], [0, 44]]] | must reach the apron",
        "{accelerationNoise: 0.05, speed | {speed | settings:12: motion.accelerationNoise: is missing",
        "lifetimeSeconds: 900 | lifetimeSeconds: 0 | lifetimeSeconds: is 0, must be more than 0",
        "lifetimeSeconds: 900 | thresholds: {ending: 0.05} | thresholds.ending: is 0.05, must be 0.1 or more and less than 1",
        "lifetimeSeconds: 900 | thresholds: {ending: 0.8} | thresholds.confirming: is 0.7, must be more than ending, 0.8",
        "lifetimeSeconds: 900 | thresholds: {confirming: 1} | thresholds.confirming: is 1, must be more than 0 and less than 1",
        "PerHour: 4} | PerHour: 0} | must be more than 0 where none are outside and none at the beginning",
        "PerHour: 4} | PerHour: 4, cellMetres: 2} | the region and its apron of 475 m are more than 1000000",
        "lifetimeSeconds: 900 | bounds: 3 | bounds: is 3, must be a mapping",
        "[[-33.45, 44.0], [-33.4, | [[-33.46, 44.0], [-33.4, | not closed",
        "west: {polygon | east: {polygon | settings:17: regions.east: is given twice, first on line 16",
        "west: {polygon | West: {polygon | regions.West: is 'West', must be a name",
        "west: {polygon | west: {poligon | the nearest known key is polygon",
        "[[[-33.5, 44.0], [-33.45, | [[[-33.5, 44.0], [-33.44, | settings:17: regions.west.polygon: the region west overlaps east by",
    })
    void aFaultSaysWhereWhatAndWhatIsAllowed(String sound, String changed, String told) {
        assertThat(SOUND).contains(sound);
        assertThat(lines(SiteReader.readText(SOUND.replace(sound, changed)))).contains(told);
    }

    private static final String POLAR = SOUND.replace("    sigmaMetres: 15\n", """
                measures: polar
                rangeSigmaMetres: 20
                azimuthSigmaDegrees: 0.5
                rangeRateSigmaMetresPerSecond: 0.3
                heightMetres: 35
            """);

    @ParameterizedTest
    @CsvSource(delimiter = '|', value = {
        "rangeSigmaMetres: 20 | rangeSigmaMetres: 0 | rangeSigmaMetres: is 0, must be from 0.001 to 100000",
        "azimuthSigmaDegrees: 0.5 | azimuthSigmaDegrees: 46 | azimuthSigmaDegrees: is 46, must be from 0.001 to 45",
        "azimuthSigmaDegrees: 0.5 | azimuthSigmaDegres: 0.5 | the nearest known key is azimuthSigmaDegrees",
        "PerSecond: 0.3 | PerSecond: 0 | rangeRateSigmaMetresPerSecond: is 0, must be from 0.001 to 1000",
        "rangeRateSigma | largestRangeRate | largestRangeRateMetresPerSecond: must be absent without rangeRateSigmaMetresPerSecond",
        "heightMetres: 35 | heightMetres: high | heightMetres: is high, must be a number from -1000 to 100000",
    })
    void aFaultOfAPolarSensorSaysWhatIsAllowed(String sound, String changed, String told) {
        assertThat(SiteReader.readText(POLAR)).isInstanceOf(SiteResult.Valid.class);
        assertThat(POLAR).contains(sound);
        assertThat(lines(SiteReader.readText(POLAR.replace(sound, changed)))).contains(told);
    }

    /** 5 gates of 0.5 degrees at 9000 m, and 20 s at four times 5 m/s. */
    @Test
    void theApronHoldsAPlaceAtTheEndOfAPolarSensorsReach() {
        Site site = ((SiteResult.Valid) SiteReader.readText(POLAR)).site();
        double across = 9000 * Math.toRadians(0.5);
        assertThat(site.regions().get(0).apronMetres()).isEqualTo(5 * across + 20 * 20);
        PolarSettings polar = site.sensors().get(0).polar().orElseThrow();
        assertThat(polar.largestRangeRateMetresPerSecond()).isEqualTo(20);
        assertThat(polar.objectHeightMetres()).isZero();
        assertThat(site.sensors().get(0).noiseAt(900).acrossSigmaMetres()).isEqualTo(900 * Math.toRadians(0.5));
        assertThat(site.sensors().get(0).noiseAt(0).acrossSigmaMetres()).isPositive();
    }

    @Test
    void oneFaultTellsNoOther() {
        String changed = SOUND.replace("reachMetres: 9000", "reachMetres: -3");
        assertThat(((SiteResult.Faulty) SiteReader.readText(changed)).faults()).hasSize(1);
    }

    @Test
    void cellsOfLearnedClutterMustNotBeTooMany() {
        String changed = SOUND.replace("clutterPerScan: 20", "clutterPerScan: 20\n    clutterLearning: {seconds: 900, cellMetres: 25}");
        assertThat(lines(SiteReader.readText(changed)))
                .contains("settings:11: sensors.radar.clutterLearning: cells of 25 m over a region and its apron are more than");
    }

    @Test
    void shadowsAndObstaclesMayBeInAFileInAnyFormThatChartsAreExportedIn() throws IOException {
        String polygon = "[[[-33.4, 44], [-33.3, 44], [-33.4, 44.1], [-33.4, 44]]]";
        String one = "{\"type\": \"Polygon\", \"coordinates\": " + polygon + "}";
        String many = "{\"type\": \"MultiPolygon\", \"coordinates\": [" + polygon + ", " + polygon + "]}";
        String feature = "{\"type\": \"Feature\", \"geometry\": " + many + "}";
        String collection = "{\"type\": \"FeatureCollection\", \"features\": [" + feature + ", {\"type\": \"Feature\","
                + " \"geometry\": " + one + "}]}";
        Path file = folder.resolve("site.yaml");
        Files.writeString(file, SOUND.replace("clutterPerScan: 20", "clutterPerScan: 20\n    shadows: lee.geojson"));
        for (var expected : java.util.Map.of(one, 1, many, 2, feature, 2, collection, 3).entrySet()) {
            Files.writeString(folder.resolve("lee.geojson"), expected.getKey());
            Site site = ((SiteResult.Valid) SiteReader.read(file)).site();
            assertThat(site.sensors().get(0).sight().shadows()).hasSize(expected.getValue());
        }
        Files.writeString(folder.resolve("lee.geojson"), "{\"type\": \"Point\", \"coordinates\": [1, 2]}");
        assertThat(lines(SiteReader.read(file))).contains("must be a GeoJSON Polygon or MultiPolygon");
    }

    /** The same corners along the edge they share: no overlap, whatever the numbers. */
    @Test
    void neighboursThatShareCornersDoNotOverlap() {
        String changed = SOUND.replace("-33.45, 44.1]", "-33.451234567890123, 44.123456789012345]");
        assertThat(SiteReader.readText(changed)).isInstanceOf(SiteResult.Valid.class);
    }

    @ParameterizedTest
    @CsvSource(delimiter = '|', value = {
        "site: [a, b | :1: is not YAML: while parsing a flow sequence, expected ',' or ']'",
        "a: b: c | :1: is not YAML: mapping values are not allowed here",
        "'' | : is empty",
        "[1, 2] | :1: is a list, must be a mapping of settings",
        "7 | :1: is 7, must be a mapping of settings",
        "'{a: &x 1, b: *x}' | :1: b: is an alias, must be written out",
    })
    void whatIsNoSettingsFileIsSaidInOneLine(String text, String told) {
        List<String> lines = lines(SiteReader.readText(text)).lines().toList();
        assertThat(lines).anySatisfy(line -> assertThat(line).startsWith("settings" + told));
        assertThat(lines).noneMatch(line -> line.contains("Exception") || line.contains("snakeyaml"));
    }

    @ParameterizedTest
    @CsvSource(delimiter = '|', value = {
        "{} | motion.profiles: is a mapping, must be a mapping of kinds of objects to how they move",
        "3 | motion.profiles: is 3, must be a mapping of kinds of objects to how they move",
        "{Craft: {modes: {still: {}}}} | motion.profiles.Craft: is 'Craft', must be a name",
        "{a: 1} | motion.profiles.a: is 1, must be a mapping of a kind of objects",
        "{a: {speedSigmaMetresPerSecond: 5}} | motion.profiles.a.modes: is missing, must be a mapping of still, straight or turning",
        "{a: {modes: {}, speedSigmaMetresPerSecond: 5}} | motion.profiles.a.modes: must have at least one of still, straight and turning",
        "{a: {modes: {stil: {}}}} | motion.profiles.a.modes.stil: is not known here, the nearest known key is still",
        "{a: {modes: {straight: {accelerationNoise: 1}}}} | motion.profiles.a.speedSigmaMetresPerSecond: is missing",
        "{a: {modes: {straight: {}}, speedSigmaMetresPerSecond: 5}} | motion.profiles.a.modes.straight.accelerationNoise: is missing",
        "{a: {modes: {straight: {accelerationNoise: 0}}, speedSigmaMetresPerSecond: 5}} | straight.accelerationNoise: is 0, must be from",
        "{a: {modes: {straight: {accelerationNoise: 1, degreesPerSecond: 1}}, speedSigmaMetresPerSecond: 5}} | straight.degreesPerSecond: is not known here",
        "{a: {modes: {turning: {accelerationNoise: 1, degreesPerSecond: 0}}, speedSigmaMetresPerSecond: 5}} | turning.degreesPerSecond: is 0, must be more than 0, at most 90",
        "{a: {modes: {still: {positionNoise: -1}}}} | still.positionNoise: is -1, must be from",
        "{a: {modes: {still: {dwellSeconds: 5}}}} | still.dwellSeconds: must be absent for the only way of moving",
        "{a: {modes: {still: {}}, speedSigmaMetresPerSecond: 5}} | motion.profiles.a.speedSigmaMetresPerSecond: is 5, must be 0 for what never moves",
        "{a: {modes: {still: {}}, lifetimeSeconds: 0}} | motion.profiles.a.lifetimeSeconds: is 0, must be more than 0",
        "{a: {modes: {still: {dwellSeconds: 0}, straight: {accelerationNoise: 1}}, speedSigmaMetresPerSecond: 5}} | still.dwellSeconds: is 0, must be more than 0",
        "{a: {modes: {still: {share: .5}}}} | motion.profiles.a.modes: has shares that sum to 0.5, they must sum to 1",
        "{a: {share: .5, modes: {still: {}}}, b: {share: .6, modes: {still: {}}}} | motion.profiles: has shares that sum to 1.1, they must sum to 1",
        "{a: {share: 1, modes: {still: {}}}, b: {modes: {still: {}}}} | motion.profiles: has shares that sum to 1, they must sum to 1 and leave something",
        "{a: {share: 2, modes: {still: {}}}} | motion.profiles.a.share: is 2, must be from 0 to 1",
    })
    void eachFaultOfAProfileNamesPlaceValueAndWhatIsAllowed(String profiles, String told) {
        String text = SOUND.replace("{accelerationNoise: 0.05, speedSigmaMetresPerSecond: 5}", "{profiles: " + profiles + "}");
        assertThat(lines(SiteReader.readText(text))).contains("settings:12: ").contains(told);
    }

    @Test
    void profilesAndTheShortFormExcludeEachOther() {
        String text = SOUND.replace("speedSigmaMetresPerSecond: 5}", "profiles: {a: {modes: {still: {}}}}}");
        assertThat(lines(SiteReader.readText(text)))
                .isEqualTo("settings:12: motion.accelerationNoise: must be absent where profiles are given, which say it of each kind\n");
    }

    @Test
    void aSecondDocumentIsAFault() {
        assertThat(lines(SiteReader.readText(SOUND + "---\nsite: other\n"))).contains("settings:19: goes on after its end");
    }

    @Test
    void deepNestingIsAFaultAndNoOverflow() {
        assertThat(lines(SiteReader.readText("[".repeat(100_000)))).contains("nesting depth");
    }

    @Test
    void filesThatAreMissingOrNoTextAreFaults() throws IOException {
        Path missing = folder.resolve("site.yaml");
        assertThat(lines(SiteReader.read(missing))).isEqualTo(missing + ": does not exist\n");
        Files.write(missing, new byte[] {(byte) 0xff, (byte) 0xfe, 0});
        assertThat(lines(SiteReader.read(missing))).isEqualTo(missing + ": must be text in UTF-8\n");
        assertThat(lines(SiteReader.read(folder))).startsWith(folder + ": cannot be read");
    }

    @Test
    void aRegionsFileThatIsNoGeoJsonIsAFaultOfItsOwn() throws IOException {
        String site = SOUND.substring(0, SOUND.indexOf("regions:")) + "regions: here.geojson\n";
        Path file = folder.resolve("site.yaml");
        Files.writeString(file, site);
        assertThat(lines(SiteReader.read(file)))
                .isEqualTo(file + ":15: regions: the file " + folder.resolve("here.geojson") + " does not exist\n");
        Path regions = folder.resolve("here.geojson");
        Files.writeString(regions, "{\"type\": \"FeatureCollection\",\n \"features\": [}", StandardCharsets.UTF_8);
        assertThat(lines(SiteReader.read(file))).startsWith(regions + ":2: is not JSON: ").hasLineCount(1);
        Files.writeString(regions, "{\"type\": \"Polygon\"}");
        assertThat(lines(SiteReader.read(file))).contains(":1: must be a GeoJSON FeatureCollection with a list of features");
        Files.writeString(regions, "{\"type\": \"FeatureCollection\", \"features\": []}");
        assertThat(lines(SiteReader.read(file))).contains("features: must have at least one feature");
    }

    private static String lines(SiteResult result) {
        assertThat(result).isInstanceOf(SiteResult.Faulty.class);
        return ((SiteResult.Faulty) result)
                .faults().stream().map(fault -> fault + "\n").collect(Collectors.joining());
    }
}
