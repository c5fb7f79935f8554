package org.sweeptally.model;

import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;

/**
 * A Gaussian over the state [east, north, east velocity, north velocity], metres and metres a second.
 * The covariance is kept symmetric to the bit: whatever writes it writes both triangles from one number.
 */
public final class Gaussian {

    public final DMatrix4 mean;
    public final DMatrix4x4 covariance;

    public Gaussian(DMatrix4 mean, DMatrix4x4 covariance) {
        this.mean = mean;
        this.covariance = covariance;
    }

    /**
     * At a place with a 2 x 2 position covariance, and with a velocity of mean 0 that has the same spread along each
     * axis.
     */
    public static Gaussian atRest(
            double east, double north, double varEast, double covEastNorth, double varNorth, double speedSigma) {
        double varSpeed = speedSigma * speedSigma;
        return new Gaussian(
                new DMatrix4(east, north, 0, 0),
                new DMatrix4x4(
                        varEast, covEastNorth, 0, 0,
                        covEastNorth, varNorth, 0, 0,
                        0, 0, varSpeed, 0,
                        0, 0, 0, varSpeed));
    }

    public Gaussian copy() {
        return new Gaussian(new DMatrix4(mean), new DMatrix4x4(covariance));
    }

    /** Copies the upper triangle of a covariance into the lower one. */
    static void mirror(DMatrix4x4 p) {
        p.a21 = p.a12;
        p.a31 = p.a13;
        p.a41 = p.a14;
        p.a32 = p.a23;
        p.a42 = p.a24;
        p.a43 = p.a34;
    }

    public double east() {
        return mean.a1;
    }

    public double north() {
        return mean.a2;
    }

    /** Greatest standard deviation of the position over all directions, metres. */
    public double largestPositionSigma() {
        double half = 0.5 * (covariance.a11 + covariance.a22);
        double difference = 0.5 * (covariance.a11 - covariance.a22);
        return Math.sqrt(half + Math.sqrt(difference * difference + covariance.a12 * covariance.a12));
    }

    /** Determinant of the position's 2 x 2 covariance, metres to the fourth. */
    public double positionDeterminant() {
        return covariance.a11 * covariance.a22 - covariance.a12 * covariance.a12;
    }
}
