package org.sweeptally.site;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.TreeMap;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;
import org.sweeptally.model.ClutterLearning;
import org.sweeptally.model.DetectionProfile;
import org.sweeptally.model.MissRuns;
import org.sweeptally.site.SensorSettings.PositionNoise;

/** Reads sensors. One with faults still comes out, its wrong numbers NaN. */
final class SensorReader {

    static final double DEFAULT_SILENT_SECONDS = 10;

    private static final Allowed METRES = Allowed.moreThanZero(1_000_000);
    private static final Allowed SIGMA = Allowed.from(0.001, 100_000);
    private static final Allowed SECONDS = Allowed.moreThanZero(31_536_000);
    private static final Allowed SECONDS_OR_NONE = Allowed.from(0, 31_536_000);
    private static final Allowed OFFSET = Allowed.from(-86_400, 86_400);
    private static final Allowed COUNT = Allowed.moreThanZero(1_000_000);
    private static final Allowed RANGE = Allowed.from(0, 1_000_000);

    private static final Allowed HIDDEN = Allowed.from(0, 86_400);
    private static final Allowed DETECTABLE = Allowed.moreThanZero(1);

    /** Learned faster than this, an object that is there for a while would be taken for clutter. */
    private static final Allowed LEARNING = Allowed.from(600, 31_536_000);

    private static final double LEAST_CLUTTER_CELL_METRES = 25;
    private static final double CLUTTER_CELLS_PER_REACH = 20;
    private static final Allowed CLUTTER_CELL = Allowed.from(LEAST_CLUTTER_CELL_METRES, 100_000);

    private final SiteFiles files;
    private final Faults faults;

    private SensorReader(SiteFiles files, Faults faults) {
        this.files = files;
        this.faults = faults;
    }

    /** By name. */
    static List<SensorSettings> read(Node node, SiteFiles files, Faults faults) {
        SensorReader reader = new SensorReader(files, faults);
        Map<String, SensorSettings> sensors = new TreeMap<>();
        if (node instanceof Node.Mapping mapping && !mapping.entries().isEmpty()) {
            mapping.entries().forEach((name, settings) -> {
                Names.check(name, settings.at(), faults);
                sensors.put(name, reader.sensor(name, Fields.of(settings, "a sensor's settings", faults)));
            });
        } else {
            faults.add(node.at(), node.shown(), "must be a mapping of sensors' names to their settings");
        }
        return List.copyOf(sensors.values());
    }

    private SensorSettings sensor(String name, Fields fields) {
        Optional<LatLon> position = fields.optional("position").map(this::position);
        Optional<GeoPolygon> roams =
                fields.optional("roams").flatMap(node -> RegionsReader.onePolygon(node, files, faults));
        if (fields.has("position") && fields.has("roams")) {
            faults.add(fields.at("roams"), "", "must be absent for a sensor with a position, which does not move");
        }
        double reach = fields.number("reachMetres", METRES);
        Optional<PolarSettings> polar = PolarReader.read(fields, faults);
        PositionNoise noise = polar.isPresent() ? new PositionNoise(Double.NaN, Double.NaN) : noise(fields);
        DetectionProfile profile = fields.required("detectionProbability", "a number " + Allowed.PROBABILITY.words()
                        + ", or a list of {rangeMetres, probability}")
                .map(this::profile)
                .orElseGet(() -> DetectionProfile.constant(Double.NaN));
        double clutter = fields.number("clutterPerScan", COUNT);
        double interval = fields.number("intervalSeconds", SECONDS);
        double sweep = fields.number("sweepSeconds", SECONDS_OR_NONE, 0);
        double leastInterval = fields.number("leastIntervalSeconds", SECONDS_OR_NONE, 0);
        double disorder = fields.number("disorderSeconds", SECONDS_OR_NONE, 0);
        double silent = fields.number("silentSeconds", SECONDS, DEFAULT_SILENT_SECONDS);
        double offset = fields.number("timeOffsetSeconds", OFFSET, 0);
        if (leastInterval > interval) {
            faults.add(
                    fields.at("leastIntervalSeconds"),
                    Numbers.shortest(leastInterval),
                    "must be at most intervalSeconds, " + Numbers.shortest(interval));
        }
        SightSettings sight = new SightReader(files, faults).read(fields, reach);
        MissRuns misses = fields.optional("misses").map(this::misses).orElse(MissRuns.NONE);
        ClutterLearning learning =
                fields.optional("clutterLearning").map(node -> learning(node, reach)).orElse(ClutterLearning.OFF);
        fields.end();
        SensorSettings sensor = new SensorSettings(
                name,
                position,
                roams,
                reach,
                noise,
                profile,
                clutter,
                interval,
                sweep,
                leastInterval,
                disorder,
                silent,
                sight,
                misses,
                learning,
                Optional.empty(),
                offset);
        return polar.map(sensor::measuring).orElse(sensor);
    }

    private LatLon position(Node node) {
        Fields fields = Fields.of(node, "latitude and longitude", faults);
        LatLon position = new LatLon(
                fields.number("latitude", Allowed.LATITUDE), fields.number("longitude", Allowed.LONGITUDE));
        fields.end();
        return position;
    }

    private PositionNoise noise(Fields fields) {
        boolean directed = fields.has("alongSigmaMetres") || fields.has("acrossSigmaMetres");
        if (directed && fields.has("sigmaMetres")) {
            faults.add(
                    fields.at("sigmaMetres"),
                    "",
                    "must be absent where alongSigmaMetres and acrossSigmaMetres are given");
        }
        if (!directed) {
            fields.optional("alongSigmaMetres");
            fields.optional("acrossSigmaMetres");
            double sigma = fields.number("sigmaMetres", SIGMA);
            return new PositionNoise(sigma, sigma);
        }
        fields.optional("sigmaMetres");
        return new PositionNoise(fields.number("alongSigmaMetres", SIGMA), fields.number("acrossSigmaMetres", SIGMA));
    }

    private MissRuns misses(Node node) {
        Fields fields = Fields.of(node, "hiddenSeconds and detectableProbability", faults);
        MissRuns misses = new MissRuns(
                fields.number("hiddenSeconds", HIDDEN), fields.number("detectableProbability", DETECTABLE));
        fields.end();
        return misses;
    }

    /** Cells so large that a usual scan's clutter tells something of them within the time, where none are given. */
    private ClutterLearning learning(Node node, double reachMetres) {
        Fields fields = Fields.of(node, "seconds, and cellMetres", faults);
        double usual = Math.min(100_000, Math.max(LEAST_CLUTTER_CELL_METRES, reachMetres / CLUTTER_CELLS_PER_REACH));
        ClutterLearning learning = new ClutterLearning(
                fields.number("seconds", LEARNING), fields.number("cellMetres", CLUTTER_CELL, usual));
        fields.end();
        return learning;
    }

    private DetectionProfile profile(Node node) {
        if (!(node instanceof Node.Sequence list)) {
            return DetectionProfile.constant(Fields.number(node, Allowed.PROBABILITY, faults));
        }
        List<DetectionProfile.Point> points = new ArrayList<>();
        double last = Double.NEGATIVE_INFINITY;
        for (Node item : list.items()) {
            Fields fields = Fields.of(item, "rangeMetres and probability", faults);
            double range = fields.number("rangeMetres", RANGE);
            double probability = fields.number("probability", Allowed.PROBABILITY);
            fields.end();
            if (range <= last) {
                faults.add(
                        fields.at("rangeMetres"),
                        Numbers.shortest(range),
                        "must be more than the range before it, " + Numbers.shortest(last));
            }
            last = Double.isNaN(range) ? last : range;
            points.add(new DetectionProfile.Point(range, probability));
        }
        if (points.isEmpty()) {
            faults.add(node.at(), "an empty list", "must have at least one {rangeMetres, probability}");
            return DetectionProfile.constant(Double.NaN);
        }
        return new DetectionProfile(points);
    }
}
