package org.sweeptally.filter;

import org.ejml.data.DMatrix4x4;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.model.Gaussian;

/**
 * Probability that an object is inside an area. Near the border: the share of 48 points of equal weight that lie inside,
 * laid out on four rings of equal probability. The shares of areas that do not overlap and leave no gap sum to 1.
 */
final class InsideShare {

    /** Farther from the border than this many standard deviations, everything is on one side. */
    private static final double CLEAR_SIGMAS = 4;

    private static final int RINGS = 4;
    private static final int SPOKES = 12;
    private static final double[] UNIT = unitPoints();

    private InsideShare() {}

    static double of(Gaussian density, PlaneArea area) {
        double clear = CLEAR_SIGMAS * density.largestPositionSigma();
        if (area.isAtLeast(clear, density.east(), density.north())) {
            return 1;
        }
        if (!area.isAtLeast(-clear, density.east(), density.north())) {
            return 0;
        }
        DMatrix4x4 p = density.covariance;
        double l11 = Math.sqrt(p.a11);
        double l21 = l11 > 0 ? p.a12 / l11 : 0;
        double l22 = Math.sqrt(Math.max(0, p.a22 - l21 * l21));
        int hits = 0;
        for (int i = 0; i < UNIT.length; i += 2) {
            if (area.contains(
                    density.east() + l11 * UNIT[i], density.north() + l21 * UNIT[i] + l22 * UNIT[i + 1])) {
                hits++;
            }
        }
        return (double) hits / (RINGS * SPOKES);
    }

    /** Radius of a ring: the median of its quarter of the Rayleigh distribution; rings are turned against each other. */
    private static double[] unitPoints() {
        double[] points = new double[2 * RINGS * SPOKES];
        for (int ring = 0; ring < RINGS; ring++) {
            double radius = Math.sqrt(-2 * StrictMath.log(1 - (ring + 0.5) / RINGS));
            for (int spoke = 0; spoke < SPOKES; spoke++) {
                double angle = 2 * StrictMath.PI * (spoke + (double) ring / RINGS) / SPOKES;
                points[2 * (ring * SPOKES + spoke)] = radius * StrictMath.cos(angle);
                points[2 * (ring * SPOKES + spoke) + 1] = radius * StrictMath.sin(angle);
            }
        }
        return points;
    }
}
