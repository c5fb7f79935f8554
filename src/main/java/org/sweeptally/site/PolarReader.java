package org.sweeptally.site;

import java.util.List;
import java.util.Optional;
import java.util.OptionalDouble;

/** Reads what a sensor measures, and what a polar one is like. */
final class PolarReader {

    private static final List<String> MEASURES = List.of("position", "polar");

    private static final List<String> POSITION_ONLY = List.of("sigmaMetres", "alongSigmaMetres", "acrossSigmaMetres");

    private static final List<String> POLAR_ONLY = List.of(
            "rangeSigmaMetres",
            "azimuthSigmaDegrees",
            "rangeRateSigmaMetresPerSecond",
            "heightMetres",
            "objectHeightMetres",
            "largestRangeRateMetresPerSecond");

    /** Wider than that, a place says nothing that a wider reach with fewer detections would not say better. */
    private static final Allowed AZIMUTH_SIGMA = Allowed.from(0.001, 45);

    private static final Allowed RANGE_SIGMA = Allowed.from(0.001, 100_000);
    private static final Allowed RATE_SIGMA = Allowed.from(0.001, 1000);
    private static final Allowed RATE = Allowed.moreThanZero(10_000);
    private static final Allowed HEIGHT = Allowed.from(-1000, 100_000);

    private final Fields fields;
    private final Faults faults;

    private PolarReader(Fields fields, Faults faults) {
        this.fields = fields;
        this.faults = faults;
    }

    /** Empty for a sensor that measures positions. A largest range rate that is not given comes out NaN. */
    static Optional<PolarSettings> read(Fields fields, Faults faults) {
        PolarReader reader = new PolarReader(fields, faults);
        return reader.isPolar() ? Optional.of(reader.polar()) : Optional.empty();
    }

    private boolean isPolar() {
        Optional<Node> node = fields.optional("measures");
        boolean known = node.isPresent()
                && node.get() instanceof Node.Scalar scalar
                && scalar.text() != null
                && MEASURES.contains(scalar.text());
        if (node.isPresent() && !known) {
            faults.add(node.get().at(), node.get().shown(), "must be " + String.join(" or ", MEASURES));
        }
        boolean polar = known && "polar".equals(((Node.Scalar) node.get()).text());
        for (String key : polar ? POSITION_ONLY : POLAR_ONLY) {
            if (fields.has(key) && (known || node.isEmpty())) {
                faults.add(fields.at(key), "", "must be absent for a sensor that measures "
                        + (polar ? "range and azimuth (measures: polar)" : "positions; measures: polar allows it"));
            }
            fields.optional(key);
        }
        return polar;
    }

    private PolarSettings polar() {
        OptionalDouble rateSigma = fields.optionalNumber("rangeRateSigmaMetresPerSecond", RATE_SIGMA);
        if (rateSigma.isEmpty() && fields.has("largestRangeRateMetresPerSecond")) {
            faults.add(
                    fields.at("largestRangeRateMetresPerSecond"),
                    "",
                    "must be absent without rangeRateSigmaMetresPerSecond: range rates are not used then");
        }
        return new PolarSettings(
                fields.number("rangeSigmaMetres", RANGE_SIGMA),
                fields.number("azimuthSigmaDegrees", AZIMUTH_SIGMA),
                rateSigma,
                fields.optionalNumber("heightMetres", HEIGHT),
                fields.number("objectHeightMetres", HEIGHT, 0),
                fields.number("largestRangeRateMetresPerSecond", RATE, Double.NaN));
    }
}
