package org.sweeptally.filter;

import org.sweeptally.geo.PlaneArea;
import org.sweeptally.model.Gaussian;
import org.sweeptally.model.PlaneSpread;

/**
 * Probability that an object is inside an area. Near the border: the share of the points of its
 * {@linkplain PlaneSpread spread} that lie inside. The shares of areas that do not overlap and leave no gap sum to 1.
 */
final class InsideShare {

    /** Farther from the border than this many standard deviations, everything is on one side. */
    private static final double CLEAR_SIGMAS = 4;

    private InsideShare() {}

    static double of(Gaussian density, PlaneArea area) {
        double clear = CLEAR_SIGMAS * density.largestPositionSigma();
        if (area.isAtLeast(clear, density.east(), density.north())) {
            return 1;
        }
        if (!area.isAtLeast(-clear, density.east(), density.north())) {
            return 0;
        }
        PlaneSpread spread = PlaneSpread.of(density);
        int hits = 0;
        for (int i = 0; i < PlaneSpread.POINTS; i++) {
            hits += area.contains(density.east() + spread.east(i), density.north() + spread.north(i)) ? 1 : 0;
        }
        return (double) hits / PlaneSpread.POINTS;
    }
}
