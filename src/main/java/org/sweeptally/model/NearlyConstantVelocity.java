package org.sweeptally.model;

import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;

/**
 * Nearly constant velocity driven by continuous white noise acceleration, exact for any time step:
 *
 * <pre>
 *   F = [I  dt I]      Q = q [dt^3/3 I  dt^2/2 I]
 *       [0     I]            [dt^2/2 I      dt I]
 * </pre>
 *
 * Unlike a piecewise constant acceleration it is a semigroup: predicting over 3 s equals predicting over 1 s and
 * then over 2 s, which a stream of irregular scans needs. Bar-Shalom, Li and Kirubarajan 2001, "Estimation with
 * Applications to Tracking and Navigation", section 6.2.2 (section number from memory).
 *
 * @param accelerationNoise spectral density q, square metres a second cubed
 */
public record NearlyConstantVelocity(double accelerationNoise) implements MotionModel {

    @Override
    public boolean moves() {
        return true;
    }

    @Override
    public void predict(Gaussian density, double seconds) {
        DMatrix4 x = density.mean;
        x.a1 += seconds * x.a3;
        x.a2 += seconds * x.a4;

        // With P = [A B; B' C] in 2 x 2 blocks, F P F' = [A + dt (B + B') + dt^2 C, B + dt C; ., C].
        DMatrix4x4 p = density.covariance;
        double t = seconds;
        double velocity = accelerationNoise * t;
        double cross = 0.5 * velocity * t;
        double position = velocity * t * t / 3;
        p.a11 += t * (2 * p.a13 + t * p.a33) + position;
        p.a22 += t * (2 * p.a24 + t * p.a44) + position;
        p.a12 += t * (p.a14 + p.a23 + t * p.a34);
        p.a13 += t * p.a33 + cross;
        p.a14 += t * p.a34;
        p.a23 += t * p.a34;
        p.a24 += t * p.a44 + cross;
        p.a33 += velocity;
        p.a44 += velocity;
        Gaussian.mirror(p);
    }
}
