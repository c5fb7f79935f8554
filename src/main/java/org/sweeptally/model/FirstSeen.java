package org.sweeptally.model;

import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;

/**
 * An object of the unseen part at its first detection: at the measured place, which nothing was known of before, with a
 * velocity of which only the spread is known, moved on by that velocity since it was seen, and corrected by the range
 * rate where that was measured.
 */
final class FirstSeen {

    /** A range rate of an object nearer than this many standard deviations of its place has no direction. */
    private static final double NEAREST_SIGMAS = 3;

    private final Measurement z;
    private final Gaussian density;

    /** 2 R N(innovation): the range rate's density, relative to that of false detections. */
    private double rateRatio = 1;

    FirstSeen(Measurement z, double speedSigma) {
        this.z = z;
        density = Gaussian.atRest(z.east(), z.north(), z.varEast(), z.covEastNorth(), z.varNorth(), speedSigma);
        DMatrix4x4 p = density.covariance;
        double cross = z.lagSeconds() * p.a33;
        p.a11 += z.lagSeconds() * cross;
        p.a22 += z.lagSeconds() * cross;
        p.a13 = p.a31 = p.a24 = p.a42 = cross;
        if (z instanceof PolarMeasurement polar && polar.hasRangeRate()) {
            rate(polar, speedSigma * speedSigma);
        }
    }

    Gaussian density() {
        return density;
    }

    double rateRatio() {
        return rateRatio;
    }

    /**
     * By the range rate, linear at the measured place and at the velocity 0 that is expected. An uncertain direction
     * turns velocity across it into range rate, which is added to its variance.
     */
    private void rate(PolarMeasurement polar, double varSpeed) {
        double east = z.east() - polar.station().east();
        double north = z.north() - polar.station().north();
        double squared = east * east + north * north;
        double varPlace = z.varEast() + z.varNorth();
        if (!(squared > NEAREST_SIGMAS * NEAREST_SIGMAS * varPlace)) {
            return;
        }
        double height = polar.station().heightDifference();
        double slant = Math.sqrt(squared + height * height);
        double eastSpeed = -polar.station().eastVelocity();
        double northSpeed = -polar.station().northVelocity();
        double along = (east * eastSpeed + north * northSpeed) / slant;
        double byEast = (eastSpeed - along * east / slant) / slant;
        double byNorth = (northSpeed - along * north / slant) / slant;
        double across = (north * north * z.varEast()
                        - 2 * east * north * z.covEastNorth()
                        + east * east * z.varNorth())
                / squared;
        double lag = z.lagSeconds();
        double[] h = {byEast, byNorth, east / slant - lag * byEast, north / slant - lag * byNorth};
        double varRate = polar.noise().varRangeRate() + across * varSpeed / (slant * slant);
        correct(h, polar.rangeRate() - along, varRate, polar.station().largestRangeRate());
    }

    /** A scalar Kalman update. */
    private void correct(double[] h, double innovation, double varRate, double largestRate) {
        DMatrix4x4 p = density.covariance;
        double c1 = p.a11 * h[0] + p.a12 * h[1] + p.a13 * h[2] + p.a14 * h[3];
        double c2 = p.a21 * h[0] + p.a22 * h[1] + p.a23 * h[2] + p.a24 * h[3];
        double c3 = p.a31 * h[0] + p.a32 * h[1] + p.a33 * h[2] + p.a34 * h[3];
        double c4 = p.a41 * h[0] + p.a42 * h[1] + p.a43 * h[2] + p.a44 * h[3];
        double variance = h[0] * c1 + h[1] * c2 + h[2] * c3 + h[3] * c4 + varRate;
        double gain = innovation / variance;
        DMatrix4 x = density.mean;
        x.a1 += c1 * gain;
        x.a2 += c2 * gain;
        x.a3 += c3 * gain;
        x.a4 += c4 * gain;
        p.a11 -= c1 * c1 / variance;
        p.a12 -= c1 * c2 / variance;
        p.a13 -= c1 * c3 / variance;
        p.a14 -= c1 * c4 / variance;
        p.a22 -= c2 * c2 / variance;
        p.a23 -= c2 * c3 / variance;
        p.a24 -= c2 * c4 / variance;
        p.a33 -= c3 * c3 / variance;
        p.a34 -= c3 * c4 / variance;
        p.a44 -= c4 * c4 / variance;
        Gaussian.mirror(p);
        rateRatio = 2 * largestRate * StrictMath.exp(-0.5 * innovation * gain)
                / Math.sqrt(2 * StrictMath.PI * variance);
    }
}
