package org.sweeptally.site;

import java.time.DateTimeException;
import java.time.Instant;
import java.time.temporal.ChronoUnit;
import java.util.List;
import java.util.Optional;
import java.util.OptionalDouble;
import java.util.OptionalLong;
import org.sweeptally.filter.FilterSettings;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlaneArea;

/** Puts a site together from what its file says, and fills in what it leaves open. */
final class SiteAssembly {

    static final double DEFAULT_CONFIRMING = 0.7;
    static final double DEFAULT_ENDING = 0.3;

    /** The default apron lets neighbours run this far apart, at the largest speed, twice over. */
    private static final double APRON_SECONDS = 10;

    /**
     * The default grid of unseen objects has so many cells along the longer side of a region, but none below a side of
     * 25 m.
     */
    private static final double CELLS_ALONG = 48;

    private static final double LEAST_DEFAULT_CELL_METRES = 25;
    private static final double SECONDS_PER_HOUR = 3600;
    private static final Allowed DENSITY = Allowed.from(0, 1_000_000);

    private final SiteFiles files;
    private final Faults faults;

    SiteAssembly(SiteFiles files, Faults faults) {
        this.files = files;
        this.faults = faults;
    }

    /** The site; not to be used if there are faults. */
    Site assemble(Node node) {
        Fields fields = Fields.of(node, "settings", faults);
        String name = Names.required(fields, "site", faults);
        int revision = (int) fields.whole("revision", 1, Integer.MAX_VALUE);
        OptionalLong from = from(fields);
        boolean rejectOutside = fields.flag("rejectOutside", false);
        Optional<Node> sensorsNode = fields.required("sensors", "a mapping of sensors' names to their settings");
        List<SensorSettings> read =
                sensorsNode.map(sensorNode -> SensorReader.read(sensorNode, files, faults)).orElse(List.of());
        double lifetime = fields.number("lifetimeSeconds", MotionReader.LIFETIME);
        MotionSettings motion = MotionReader.read(
                fields.section("motion", "accelerationNoise and speedSigmaMetresPerSecond, or profiles"), lifetime, faults);
        List<SensorSettings> sensors = withRangeRates(read, motion.largestSpeedMetresPerSecond());
        Fields unseenFields = fields.section("unseen", "birthsPerSquareKilometrePerHour and others");
        UnseenSettings unseen = unseen(unseenFields, motion.meanLifetimeSeconds());
        OptionalDouble cell = unseenFields.optionalNumber("cellMetres", RegionsReader.CELL);
        unseenFields.end();
        ThresholdSettings thresholds = thresholds(fields.optionalSection("thresholds", "confirming and ending"));
        BoundSettings bounds = BoundsReader.read(fields.optionalSection("bounds", "bounds"));
        double apron = fields.number("apronMetres", RegionsReader.APRON, defaultApron(sensors, motion, bounds));
        List<RegionSettings> regions = regions(fields, sensors, sensorsNode, bounds, apron, cell);
        fields.end();
        return new Site(
                name, revision, from, sensors, regions, motion, lifetime, unseen, thresholds, bounds, rejectOutside);
    }

    /** Range rates are at most as large as speeds, where nothing else is said. */
    private static List<SensorSettings> withRangeRates(List<SensorSettings> sensors, double largestSpeed) {
        return sensors.stream()
                .map(sensor -> sensor.polar()
                        .map(polar -> sensor.measuring(polar.orLargestRangeRate(largestSpeed)))
                        .orElse(sensor))
                .toList();
    }

    private List<RegionSettings> regions(
            Fields fields,
            List<SensorSettings> sensors,
            Optional<Node> sensorsNode,
            BoundSettings bounds,
            double apron,
            OptionalDouble cell) {
        int faultsBefore = faults.size();
        List<RegionDraft> drafts = fields.required(
                        "regions", "a GeoJSON file or a mapping of regions' names to polygons")
                .map(node -> RegionsReader.read(node, files, faults))
                .orElse(List.of());
        RegionChecks checks = new RegionChecks(faults);
        List<RegionDraft> sound = checks.shapes(drafts, sensors, bounds.gateSigmas());
        List<RegionSettings> regions = sound.stream().map(draft -> region(draft, apron, cell)).toList();
        checks.grids(sound, regions);
        // A sensor may reach just the region that is faulty, or an apron whose depth is not known.
        if (faults.size() == faultsBefore && !Double.isNaN(apron)) {
            sensorsNode.ifPresent(node -> {
                checks.reaches(sensors, node, regions);
                checks.clutterGrids(sensors, node, regions);
            });
        }
        return regions;
    }

    private OptionalLong from(Fields fields) {
        Optional<Node> node = fields.optional("from");
        if (node.isEmpty()) {
            return OptionalLong.empty();
        }
        try {
            if (node.get() instanceof Node.Scalar scalar && scalar.text() != null) {
                Instant instant = Instant.parse(scalar.text());
                if (instant.equals(instant.truncatedTo(ChronoUnit.MICROS))) {
                    return OptionalLong.of(ChronoUnit.MICROS.between(Instant.EPOCH, instant));
                }
            }
        } catch (DateTimeException | ArithmeticException e) {
            // Told below, like everything else that is no time.
        }
        faults.add(
                node.get().at(),
                node.get().shown(),
                "must be a time such as 2031-05-01T05:00:00Z, at most six decimals");
        return OptionalLong.empty();
    }

    private UnseenSettings unseen(Fields fields, double lifetimeSeconds) {
        double births = fields.number("birthsPerSquareKilometrePerHour", DENSITY);
        double steady = births * lifetimeSeconds / SECONDS_PER_HOUR;
        double outside = fields.number("outsidePerSquareKilometre", DENSITY, steady);
        double initial = fields.number("initialPerSquareKilometre", DENSITY, outside);
        if (births == 0 && outside == 0 && initial == 0) {
            faults.add(
                    fields.at("birthsPerSquareKilometrePerHour"),
                    "0",
                    "must be more than 0 where none are outside and none at the beginning: nothing could be found");
        }
        return new UnseenSettings(births, outside, initial);
    }

    private ThresholdSettings thresholds(Fields fields) {
        double least = FilterSettings.RECYCLING_BELOW;
        Allowed allowed = new Allowed(Numbers.shortest(least) + " or more and less than 1", x -> x >= least && x < 1);
        double ending = fields.number("ending", allowed, DEFAULT_ENDING);
        double confirming = fields.number("confirming", Allowed.PROBABILITY, DEFAULT_CONFIRMING);
        if (confirming <= ending) {
            faults.add(
                    fields.at("confirming"),
                    Numbers.shortest(confirming),
                    "must be more than ending, " + Numbers.shortest(ending));
        }
        fields.end();
        return new ThresholdSettings(confirming, ending);
    }

    private static double defaultApron(List<SensorSettings> sensors, MotionSettings motion, BoundSettings bounds) {
        double largestSigma = 0;
        for (SensorSettings sensor : sensors) {
            largestSigma = Math.max(
                    largestSigma, Math.max(sensor.noise().alongSigmaMetres(), sensor.noise().acrossSigmaMetres()));
        }
        return bounds.gateSigmas() * largestSigma + 2 * motion.largestSpeedMetresPerSecond() * APRON_SECONDS;
    }

    private static RegionSettings region(RegionDraft draft, double apron, OptionalDouble cell) {
        double cellMetres = draft.unseenCellMetres().orElseGet(() -> cell.orElseGet(() -> defaultCell(draft)));
        return new RegionSettings(draft.name(), draft.core(), draft.apronMetres().orElse(apron), cellMetres);
    }

    private static double defaultCell(RegionDraft draft) {
        PlaneArea area = PlaneArea.of(draft.core(), new LocalPlane(draft.core().middle()));
        double longer = Math.max(area.maxEast() - area.minEast(), area.maxNorth() - area.minNorth());
        return Math.max(LEAST_DEFAULT_CELL_METRES, longer / CELLS_ALONG);
    }
}
