package org.sweeptally.filter;

import java.util.Arrays;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.sweeptally.model.Gaussian;

/**
 * Sums up Gaussian terms and gives the one Gaussian with their mean and covariance. Moments are taken about a reference
 * near the terms, so that nothing cancels far from the plane's origin.
 */
final class Mixture {

    private static final double[] NO_STEP = new double[4];

    private final double[] scratch = new double[4];
    private final double[] reference = new double[4];
    private double weight;
    private final double[] first = new double[4];

    /** Upper triangle, row by row: 11 12 13 14 22 23 24 33 34 44. */
    private final double[] second = new double[10];

    /** Begins anew, about a reference state. */
    void reset(double east, double north, double eastVelocity, double northVelocity) {
        reference[0] = east;
        reference[1] = north;
        reference[2] = eastVelocity;
        reference[3] = northVelocity;
        weight = 0;
        Arrays.fill(first, 0);
        Arrays.fill(second, 0);
    }

    double weight() {
        return weight;
    }

    /** Adds a term whose mean is the reference plus a step (four numbers from an index on). */
    void add(double termWeight, double[] step, int at, DMatrix4x4 covariance) {
        double s1 = step[at];
        double s2 = step[at + 1];
        double s3 = step[at + 2];
        double s4 = step[at + 3];
        DMatrix4x4 p = covariance;
        double w = termWeight;
        weight += w;
        first[0] += w * s1;
        first[1] += w * s2;
        first[2] += w * s3;
        first[3] += w * s4;
        second[0] += w * (p.a11 + s1 * s1);
        second[1] += w * (p.a12 + s1 * s2);
        second[2] += w * (p.a13 + s1 * s3);
        second[3] += w * (p.a14 + s1 * s4);
        second[4] += w * (p.a22 + s2 * s2);
        second[5] += w * (p.a23 + s2 * s3);
        second[6] += w * (p.a24 + s2 * s4);
        second[7] += w * (p.a33 + s3 * s3);
        second[8] += w * (p.a34 + s3 * s4);
        second[9] += w * (p.a44 + s4 * s4);
    }

    /** Adds a density. */
    void add(double termWeight, Gaussian density) {
        add(termWeight, density.mean, NO_STEP, density.covariance);
    }

    /** Adds a term whose mean is a prior mean plus a step. */
    void add(double termWeight, DMatrix4 prior, double[] step, DMatrix4x4 covariance) {
        scratch[0] = step[0] + (prior.a1 - reference[0]);
        scratch[1] = step[1] + (prior.a2 - reference[1]);
        scratch[2] = step[2] + (prior.a3 - reference[2]);
        scratch[3] = step[3] + (prior.a4 - reference[3]);
        add(termWeight, scratch, 0, covariance);
    }

    /** The Gaussian with the mean and the covariance of the terms; their weight must be more than 0. */
    Gaussian matched() {
        double m1 = first[0] / weight;
        double m2 = first[1] / weight;
        double m3 = first[2] / weight;
        double m4 = first[3] / weight;
        double p12 = second[1] / weight - m1 * m2;
        double p13 = second[2] / weight - m1 * m3;
        double p14 = second[3] / weight - m1 * m4;
        double p23 = second[5] / weight - m2 * m3;
        double p24 = second[6] / weight - m2 * m4;
        double p34 = second[8] / weight - m3 * m4;
        return new Gaussian(
                new DMatrix4(reference[0] + m1, reference[1] + m2, reference[2] + m3, reference[3] + m4),
                new DMatrix4x4(
                        second[0] / weight - m1 * m1, p12, p13, p14,
                        p12, second[4] / weight - m2 * m2, p23, p24,
                        p13, p23, second[7] / weight - m3 * m3, p34,
                        p14, p24, p34, second[9] / weight - m4 * m4));
    }
}
