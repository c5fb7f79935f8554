package org.sweeptally.region.text;

import java.util.List;
import java.util.Optional;
import org.sweeptally.event.Detection;
import org.sweeptally.event.GeodeticFix;
import org.sweeptally.event.Noise;
import org.sweeptally.event.OffsetFix;
import org.sweeptally.event.PolarFix;
import org.sweeptally.event.RejectReason;
import org.sweeptally.region.intake.Faults;
import org.sweeptally.region.intake.Shown;

/** Reads one detection of a line. */
final class DetectionLine {

    private static final List<String> KNOWN = List.of(
            "id", "time", "latitude", "longitude", "eastMetres", "northMetres", "rangeMetres", "azimuthDegrees",
            "rangeRateMetresPerSecond", "sigmaMetres", "noise", "heightMetres", "strength", "declaredIdentity");

    private static final List<String> NOISE = List.of("first", "cross", "second");

    private static final String WAYS =
            "a detection gives latitude and longitude, or eastMetres and northMetres, or rangeMetres and"
                    + " azimuthDegrees";

    private final LineFields fields;
    private final Faults faults;
    private final int index;

    private DetectionLine(JsonTree.Fields fields, int index, Faults faults) {
        this.fields = new LineFields(fields, "", KNOWN, faults.badFieldsOf(index));
        this.faults = faults;
        this.index = index;
    }

    /** Reads a detection; empty if it cannot be read, and the faults then say why. */
    static Optional<Detection> read(Object value, int index, Faults faults) {
        if (!(value instanceof JsonTree.Fields fields)) {
            faults.detection(index, RejectReason.BAD_FIELD, null,
                    () -> "it is " + LineFields.shown(value) + ": an object is expected");
            return Optional.empty();
        }
        Detection detection = new DetectionLine(fields, index, faults).detection();
        return faults.strike(index) ? Optional.empty() : Optional.of(detection);
    }

    private Detection detection() {
        Detection detection = new Detection();
        detection.setIndex(index);
        detection.setId(fields.text("id"));
        detection.setTimeMicros(fields.time("time"));
        detection.setMeasurement(measurement());
        detection.setNoise(noise(detection.getMeasurement()));
        detection.setHeightMetres(fields.number("heightMetres"));
        detection.setStrength(fields.number("strength"));
        detection.setDeclaredIdentity(fields.text("declaredIdentity"));
        return detection;
    }

    private Object measurement() {
        boolean geodetic = fields.has("latitude") || fields.has("longitude");
        boolean offset = fields.has("eastMetres") || fields.has("northMetres");
        boolean polar = fields.has("rangeMetres") || fields.has("azimuthDegrees")
                || fields.has("rangeRateMetresPerSecond");
        int ways = (geodetic ? 1 : 0) + (offset ? 1 : 0) + (polar ? 1 : 0);
        if (ways != 1) {
            faults.detection(index, RejectReason.BAD_FIELD, "measurement",
                    () -> "it gives " + (ways == 0 ? "no place: " : "its place in " + ways + " ways: ") + WAYS);
            return null;
        }
        Double first = needed(geodetic ? "latitude" : offset ? "eastMetres" : "rangeMetres");
        Double second = needed(geodetic ? "longitude" : offset ? "northMetres" : "azimuthDegrees");
        Double rate = polar ? fields.number("rangeRateMetresPerSecond") : null;
        if (first == null || second == null) {
            return null;
        }
        if (polar) {
            return new PolarFix(first, second, rate);
        }
        return geodetic ? new GeodeticFix(first, second) : new OffsetFix(first, second);
    }

    private Double needed(String name) {
        if (!fields.has(name)) {
            fields.missing(name, WAYS);
        }
        return fields.number(name);
    }

    private Noise noise(Object measurement) {
        Double sigma = fields.number("sigmaMetres");
        JsonTree.Fields own = fields.object("noise", "first, cross and second");
        if (sigma != null && own != null) {
            faults.detection(index, RejectReason.BAD_FIELD, "noise",
                    () -> "it gives both sigmaMetres and noise: one of them is allowed");
        }
        if (sigma != null) {
            return isotropic(sigma, measurement);
        }
        return own == null ? null : covariance(own);
    }

    private Noise isotropic(double sigmaMetres, Object measurement) {
        if (measurement instanceof PolarFix) {
            faults.detection(index, RejectReason.BAD_FIELD, "sigmaMetres",
                    () -> "sigmaMetres is given with a range and an azimuth: noise with first, cross and second"
                            + " is expected");
        } else if (!(sigmaMetres >= 0.001 && sigmaMetres <= 1_000_000)) {
            faults.detection(index, RejectReason.BAD_FIELD, "sigmaMetres", () -> "sigmaMetres is "
                    + Shown.number(sigmaMetres)
                    + ": metres from 0.001 to 1000000 are allowed");
        }
        double variance = sigmaMetres * sigmaMetres;
        return new Noise(variance, 0.0, variance);
    }

    private Noise covariance(JsonTree.Fields own) {
        LineFields noise = new LineFields(own, "noise.", NOISE, faults.badFieldsOf(index));
        for (String name : List.of("first", "second")) {
            if (!noise.has(name)) {
                noise.missing(name, "a noise gives the variances first and second, and may give the covariance cross");
            }
        }
        Double first = noise.number("first");
        Double cross = noise.number("cross");
        Double second = noise.number("second");
        return first == null || second == null ? null : new Noise(first, cross == null ? 0.0 : cross, second);
    }
}
