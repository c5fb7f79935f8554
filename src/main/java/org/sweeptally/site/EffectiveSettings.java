package org.sweeptally.site;

import java.time.Instant;
import java.time.temporal.ChronoUnit;
import java.util.List;
import java.util.stream.Collectors;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;
import org.sweeptally.model.CoordinatedTurn;
import org.sweeptally.model.DetectionProfile;
import org.sweeptally.model.MotionMode;
import org.sweeptally.model.MotionProfile;
import org.sweeptally.model.NearlyConstantVelocity;
import org.sweeptally.model.StandingStill;

/**
 * Writes a site's settings as one text with every default in it: the same site gives the same text, byte for byte, and
 * {@link SiteReader#readText} gives an equal site back. Keys come in a fixed order, sensors and regions by name,
 * numbers in their shortest form.
 */
public final class EffectiveSettings {

    private final StringBuilder out = new StringBuilder();

    private EffectiveSettings() {}

    /** The settings as YAML. */
    public static String text(Site site) {
        EffectiveSettings settings = new EffectiveSettings();
        settings.write(site);
        return settings.out.toString();
    }

    private void write(Site site) {
        // In quotes, or a site called "null" would be none.
        line(0, "site", "\"" + site.name() + "\"");
        line(0, "revision", Integer.toString(site.revision()));
        site.fromMicros()
                .ifPresent(micros -> line(0, "from", Instant.EPOCH.plus(micros, ChronoUnit.MICROS).toString()));
        line(0, "rejectOutside", Boolean.toString(site.rejectOutside()));
        open(0, "sensors");
        site.sensors().forEach(this::sensor);
        motion(site);
        line(0, "lifetimeSeconds", site.lifetimeSeconds());
        open(0, "unseen");
        line(1, "birthsPerSquareKilometrePerHour", site.unseen().birthsPerSquareKilometrePerHour());
        line(1, "outsidePerSquareKilometre", site.unseen().outsidePerSquareKilometre());
        line(1, "initialPerSquareKilometre", site.unseen().initialPerSquareKilometre());
        open(0, "thresholds");
        line(1, "confirming", site.thresholds().confirming());
        line(1, "ending", site.thresholds().ending());
        bounds(site.bounds());
        open(0, "regions");
        site.regions().forEach(this::region);
    }

    private void sensor(SensorSettings sensor) {
        open(1, sensor.name());
        sensor.position().ifPresent(position -> line(
                2,
                "position",
                "{latitude: " + Numbers.shortest(position.latitude()) + ", longitude: "
                        + Numbers.shortest(position.longitude()) + "}"));
        sensor.roams().ifPresent(polygon -> polygon(2, "roams", polygon));
        line(2, "reachMetres", sensor.reachMetres());
        if (sensor.polar().isPresent()) {
            polar(sensor.polar().get());
        } else if (sensor.noise().alongSigmaMetres() == sensor.noise().acrossSigmaMetres()) {
            line(2, "measures", "position");
            line(2, "sigmaMetres", sensor.noise().alongSigmaMetres());
        } else {
            line(2, "measures", "position");
            line(2, "alongSigmaMetres", sensor.noise().alongSigmaMetres());
            line(2, "acrossSigmaMetres", sensor.noise().acrossSigmaMetres());
        }
        line(2, "detectionProbability", profile(sensor.detectionProbability()));
        line(2, "clutterPerScan", sensor.clutterPerScan());
        line(2, "intervalSeconds", sensor.intervalSeconds());
        line(2, "sweepSeconds", sensor.sweepSeconds());
        line(2, "leastIntervalSeconds", sensor.leastIntervalSeconds());
        line(2, "disorderSeconds", sensor.disorderSeconds());
        line(2, "silentSeconds", sensor.silentSeconds());
        sight(sensor.sight());
        line(2, "misses", "{hiddenSeconds: " + Numbers.shortest(sensor.misses().hiddenSeconds())
                + ", detectableProbability: " + Numbers.shortest(sensor.misses().detectableProbability()) + "}");
        if (sensor.clutterLearning().isOn()) {
            line(2, "clutterLearning", "{seconds: " + Numbers.shortest(sensor.clutterLearning().seconds())
                    + ", cellMetres: " + Numbers.shortest(sensor.clutterLearning().cellMetres()) + "}");
        }
        line(2, "timeOffsetSeconds", sensor.timeOffsetSeconds());
    }

    private void sight(SightSettings sight) {
        line(2, "leastRangeMetres", sight.leastRangeMetres());
        if (!sight.sectors().isEmpty()) {
            open(2, "sectors");
            sight.sectors().forEach(sector -> item(3, "{fromAzimuthDegrees: "
                    + Numbers.shortest(sector.fromAzimuthDegrees()) + ", toAzimuthDegrees: "
                    + Numbers.shortest(sector.toAzimuthDegrees()) + "}"));
            line(2, "sectorsFromHeading", Boolean.toString(sight.sectorsFromHeading()));
        }
        polygons("shadows", sight.shadows());
        polygons("obstacles", sight.obstacles());
        if (!sight.areas().isEmpty()) {
            open(2, "areas");
        }
        for (SightSettings.AreaSettings area : sight.areas()) {
            item(3, (area.isFactor() ? "factor: " : "probability: ") + Numbers.shortest(area.value()));
            polygon(4, "polygon", area.polygon());
        }
    }

    private void polygons(String key, List<GeoPolygon> polygons) {
        if (!polygons.isEmpty()) {
            open(2, key);
        }
        for (GeoPolygon polygon : polygons) {
            item(3, "");
            ring(4, polygon.outer());
            polygon.holes().forEach(hole -> ring(4, hole));
        }
    }

    private void item(int depth, String value) {
        indent(depth);
        out.append(value.isEmpty() ? "-" : "- ").append(value).append('\n');
    }

    private void polar(PolarSettings polar) {
        line(2, "measures", "polar");
        line(2, "rangeSigmaMetres", polar.rangeSigmaMetres());
        line(2, "azimuthSigmaDegrees", polar.azimuthSigmaDegrees());
        polar.rangeRateSigmaMetresPerSecond().ifPresent(sigma -> {
            line(2, "rangeRateSigmaMetresPerSecond", sigma);
            line(2, "largestRangeRateMetresPerSecond", polar.largestRangeRateMetresPerSecond());
        });
        polar.heightMetres().ifPresent(height -> line(2, "heightMetres", height));
        line(2, "objectHeightMetres", polar.objectHeightMetres());
    }

    private static String profile(DetectionProfile profile) {
        DetectionProfile.Point first = profile.points().get(0);
        if (profile.points().size() == 1 && first.rangeMetres() == 0) {
            return Numbers.shortest(first.probability());
        }
        return profile.points().stream()
                .map(point -> "{rangeMetres: " + Numbers.shortest(point.rangeMetres()) + ", probability: "
                        + Numbers.shortest(point.probability()) + "}")
                .collect(Collectors.joining(", ", "[", "]"));
    }

    /** A site whose objects are all of one kind, and move in one way, keeps the short form. */
    private void motion(Site site) {
        open(0, "motion");
        MotionProfile first = site.profiles().get(0);
        if (site.motion().equals(MotionSettings.oneWay(first, site.lifetimeSeconds()))) {
            line(1, "accelerationNoise", noise(first.modes().get(0)));
            speeds(1, first);
        } else {
            open(1, "profiles");
            site.profiles().forEach(this::profile);
        }
    }

    private void profile(MotionProfile profile) {
        open(2, profile.name());
        line(3, "share", profile.share());
        line(3, "lifetimeSeconds", profile.lifetimeSeconds());
        speeds(3, profile);
        open(3, "modes");
        for (MotionMode mode : profile.modes()) {
            mode(mode);
        }
    }

    private void speeds(int depth, MotionProfile profile) {
        line(depth, "speedSigmaMetresPerSecond", profile.speedSigma());
        line(depth, "largestSpeedMetresPerSecond", profile.largestSpeed());
    }

    /** Turns to the left and to the right are one key, with the shares of both. */
    private void mode(MotionMode mode) {
        if (mode.name().equals(ModeReader.RIGHT)) {
            return;
        }
        boolean turns = mode.motion() instanceof CoordinatedTurn;
        open(4, turns ? ModeReader.TURNING : mode.name());
        line(5, "share", turns ? 2 * mode.share() : mode.share());
        if (!Double.isInfinite(mode.dwellSeconds())) {
            line(5, "dwellSeconds", mode.dwellSeconds());
        }
        line(5, mode.motion() instanceof StandingStill ? "positionNoise" : "accelerationNoise", noise(mode));
        if (mode.motion() instanceof CoordinatedTurn turn) {
            line(5, "degreesPerSecond", turn.degreesPerSecond());
        }
    }

    private static double noise(MotionMode mode) {
        if (mode.motion() instanceof StandingStill still) {
            return still.positionNoise();
        }
        if (mode.motion() instanceof CoordinatedTurn turn) {
            return turn.accelerationNoise();
        }
        return ((NearlyConstantVelocity) mode.motion()).accelerationNoise();
    }

    private void bounds(BoundSettings bounds) {
        open(0, "bounds");
        line(1, "gateSigmas", bounds.gateSigmas());
        line(1, "components", Integer.toString(bounds.components()));
        line(1, "unseenTerms", Integer.toString(bounds.unseenTerms()));
        line(1, "exactAssociationSteps", Long.toString(bounds.exactAssociationSteps()));
        line(1, "propagationSweeps", Integer.toString(bounds.propagationSweeps()));
        line(1, "detectionsPerPart", Integer.toString(bounds.detectionsPerPart()));
        line(1, "waitingBytes", Long.toString(bounds.waitingBytes()));
        line(1, "clockAheadSeconds", bounds.clockAheadSeconds());
        line(1, "snapshotScans", Integer.toString(bounds.snapshotScans()));
        line(1, "snapshotSeconds", bounds.snapshotSeconds());
        line(1, "leastTermWeight", bounds.leastTermWeight());
        line(1, "gatedPairs", Integer.toString(bounds.gatedPairs()));
    }

    private void region(RegionSettings region) {
        open(1, region.name());
        line(2, "apronMetres", region.apronMetres());
        line(2, "cellMetres", region.unseenCellMetres());
        polygon(2, "polygon", region.core());
    }

    private void polygon(int depth, String key, GeoPolygon polygon) {
        open(depth, key);
        ring(depth + 1, polygon.outer());
        polygon.holes().forEach(hole -> ring(depth + 1, hole));
    }

    /** A ring ends where it starts (RFC 7946). */
    private void ring(int depth, List<LatLon> corners) {
        indent(depth);
        out.append("- [");
        for (LatLon corner : corners) {
            position(corner);
            out.append(", ");
        }
        position(corners.get(0));
        out.append("]\n");
    }

    private void position(LatLon place) {
        out.append('[').append(Numbers.shortest(place.longitude()));
        out.append(", ").append(Numbers.shortest(place.latitude())).append(']');
    }

    private void open(int depth, String key) {
        indent(depth);
        out.append(key).append(":\n");
    }

    private void line(int depth, String key, double value) {
        line(depth, key, Numbers.shortest(value));
    }

    private void line(int depth, String key, String value) {
        indent(depth);
        out.append(key).append(": ").append(value).append('\n');
    }

    private void indent(int depth) {
        out.append("  ".repeat(depth));
    }
}
