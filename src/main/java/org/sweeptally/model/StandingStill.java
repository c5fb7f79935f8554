package org.sweeptally.model;

import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;

/**
 * Standing still: moored, anchored or built there. The position is a random walk of small spectral density q, P + q t
 * I, so that a vessel may swing at its anchor and an old estimate go on learning; the velocity is 0. Its small
 * variance says how fast an object may be at the moment when it begins to move, and does not move this one. Exact for
 * any step: a prediction over 3 s equals one over 1 s and then one over 2 s.
 *
 * @param positionNoise spectral density q along each axis, square metres a second
 * @param speedSigma    standard deviation of the velocity along each axis, metres a second, more than 0
 */
public record StandingStill(double positionNoise, double speedSigma) implements MotionModel {

    @Override
    public boolean moves() {
        return false;
    }

    @Override
    public void predict(Gaussian density, double seconds) {
        DMatrix4 x = density.mean;
        x.a3 = 0;
        x.a4 = 0;
        DMatrix4x4 p = density.covariance;
        p.a11 += positionNoise * seconds;
        p.a22 += positionNoise * seconds;
        p.a13 = 0;
        p.a14 = 0;
        p.a23 = 0;
        p.a24 = 0;
        p.a31 = 0;
        p.a32 = 0;
        p.a41 = 0;
        p.a42 = 0;
        p.a33 = speedSigma * speedSigma;
        p.a44 = speedSigma * speedSigma;
        p.a34 = 0;
        p.a43 = 0;
    }
}
