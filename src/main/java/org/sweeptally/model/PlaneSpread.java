package org.sweeptally.model;

import org.ejml.data.DMatrix4x4;

/**
 * 48 points of equal weight that stand for a Gaussian over positions: on four rings of equal probability, each at the
 * median distance of its quarter (Rayleigh distribution), turned against each other. The share of them beyond a
 * straight edge is that of the Gaussian within 0.06, wherever the edge lies and however it runs.
 */
public final class PlaneSpread {

    private static final int RINGS = 4;
    private static final int SPOKES = 12;

    /** How many points there are. */
    public static final int POINTS = RINGS * SPOKES;

    private static final double[] UNIT = unitPoints();

    private final double l11;
    private final double l21;
    private final double l22;

    /** About a mean of 0, with a covariance in square metres. */
    public PlaneSpread(double varEast, double covEastNorth, double varNorth) {
        l11 = Math.sqrt(varEast);
        l21 = l11 > 0 ? covEastNorth / l11 : 0;
        l22 = Math.sqrt(Math.max(0, varNorth - l21 * l21));
    }

    /** That of a density's position. */
    public static PlaneSpread of(Gaussian density) {
        DMatrix4x4 p = density.covariance;
        return new PlaneSpread(p.a11, p.a12, p.a22);
    }

    /** Offset of a point to the east, metres. */
    public double east(int point) {
        return l11 * UNIT[2 * point];
    }

    /** Offset of a point to the north, metres. */
    public double north(int point) {
        return l21 * UNIT[2 * point] + l22 * UNIT[2 * point + 1];
    }

    private static double[] unitPoints() {
        double[] points = new double[2 * POINTS];
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
