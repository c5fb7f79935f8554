package org.sweeptally.site;

import java.util.OptionalDouble;

/**
 * What a sensor that measures range and azimuth is like.
 *
 * @param rangeSigmaMetres               standard deviation of a range
 * @param azimuthSigmaDegrees            standard deviation of an azimuth
 * @param rangeRateSigmaMetresPerSecond  standard deviation of a range rate; empty: range rates are not used
 * @param heightMetres                   the sensor's height above the ellipsoid; empty: ranges are taken as ranges
 *                                       along the ground. The height that a moving sensor sends stands before it
 * @param objectHeightMetres             height of objects above the ellipsoid; that of a detection stands before it
 * @param largestRangeRateMetresPerSecond range rates of false detections lie between minus this and this
 */
public record PolarSettings(
        double rangeSigmaMetres,
        double azimuthSigmaDegrees,
        OptionalDouble rangeRateSigmaMetresPerSecond,
        OptionalDouble heightMetres,
        double objectHeightMetres,
        double largestRangeRateMetresPerSecond) {

    /** Right at the sensor an azimuth leaves no spread at all, which no filter could take. */
    private static final double NEAREST_METRES = 1;

    /** With a largest range rate where the file gave none. */
    PolarSettings orLargestRangeRate(double metresPerSecond) {
        return Double.isNaN(largestRangeRateMetresPerSecond)
                ? new PolarSettings(
                        rangeSigmaMetres,
                        azimuthSigmaDegrees,
                        rangeRateSigmaMetresPerSecond,
                        heightMetres,
                        objectHeightMetres,
                        metresPerSecond)
                : this;
    }

    /** Standard deviation across the line of sight at a range, metres. */
    double acrossSigmaMetres(double rangeMetres) {
        return Math.max(NEAREST_METRES, rangeMetres) * StrictMath.toRadians(azimuthSigmaDegrees);
    }
}
