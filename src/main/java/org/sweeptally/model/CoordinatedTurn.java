package org.sweeptally.model;

import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;

/**
 * A turn of known rate w with continuous white noise acceleration of spectral density q, exact for any time step:
 *
 * <pre>
 *   F = [I  M]   R = [cos wt  -sin wt]   M = 1/w [   sin wt    -(1 - cos wt)]
 *       [0  R]       [sin wt   cos wt]           [1 - cos wt       sin wt   ]
 *
 *   Q = q [2 (wt - sin wt)/w^3 I   N  ]  N = 1/w^2 [ 1 - cos wt    wt - sin wt]
 *         [        N'              t I]            [-(wt - sin wt)  1 - cos wt]
 * </pre>
 *
 * Q is the integral of F(u) G q G' F(u)' over the step, G = [0; I]. As w goes to 0 it becomes
 * {@link NearlyConstantVelocity}, and like it is a semigroup. Bar-Shalom, Li and Kirubarajan 2001, "Estimation with
 * Applications to Tracking and Navigation", section 11.7 (for F; section number from memory); Q integrated here.
 *
 * @param degreesPerSecond  rate of turn w, in degrees as sites write it; positive to the left, from east over north
 * @param accelerationNoise spectral density q along each axis, square metres a second cubed
 */
public record CoordinatedTurn(double degreesPerSecond, double accelerationNoise) implements MotionModel {

    private static final double RADIANS_IN_A_DEGREE = StrictMath.PI / 180;

    /** Below this angle the series is as exact as doubles are, and the difference of sine and angle is not. */
    private static final double SMALL_ANGLE = 0.25;

    @Override
    public boolean moves() {
        return true;
    }

    @Override
    public void predict(Gaussian density, double seconds) {
        double angle = RADIANS_IN_A_DEGREE * degreesPerSecond * seconds;
        double sine = StrictMath.sin(angle);
        double cosine = StrictMath.cos(angle);
        double along = seconds * sineOverAngle(angle);
        double oneLessCosine = oneLessCosineOverSquare(angle);
        double across = seconds * angle * oneLessCosine;

        DMatrix4 x = density.mean;
        x.a1 += along * x.a3 - across * x.a4;
        x.a2 += across * x.a3 + along * x.a4;
        double eastVelocity = cosine * x.a3 - sine * x.a4;
        x.a4 = sine * x.a3 + cosine * x.a4;
        x.a3 = eastVelocity;

        propagate(density.covariance, along, across, sine, cosine);

        double cubic = angleLessSineOverCube(angle);
        addNoise(
                density.covariance,
                2 * seconds * seconds * seconds * cubic,
                seconds * seconds * oneLessCosine,
                seconds * seconds * angle * cubic,
                seconds);
    }

    /** With P = [A B; B' C] in 2 x 2 blocks: A + B M' + M B' + M C M', (B + M C) R', R C R'. */
    private static void propagate(DMatrix4x4 p, double along, double across, double sine, double cosine) {
        // D = B + M C, and A + B M' + M B' + M C M' = A + D M' + M B'.
        double d11 = p.a13 + along * p.a33 - across * p.a34;
        double d12 = p.a14 + along * p.a34 - across * p.a44;
        double d21 = p.a23 + across * p.a33 + along * p.a34;
        double d22 = p.a24 + across * p.a34 + along * p.a44;
        p.a11 += d11 * along - d12 * across + along * p.a13 - across * p.a14;
        p.a22 += d21 * across + d22 * along + across * p.a23 + along * p.a24;
        p.a12 += d11 * across + d12 * along + along * p.a23 - across * p.a24;
        p.a13 = d11 * cosine - d12 * sine;
        p.a14 = d11 * sine + d12 * cosine;
        p.a23 = d21 * cosine - d22 * sine;
        p.a24 = d21 * sine + d22 * cosine;
        double c33 = p.a33;
        double c34 = p.a34;
        double c44 = p.a44;
        p.a33 = cosine * cosine * c33 - 2 * cosine * sine * c34 + sine * sine * c44;
        p.a44 = sine * sine * c33 + 2 * cosine * sine * c34 + cosine * cosine * c44;
        p.a34 = cosine * sine * (c33 - c44) + (cosine * cosine - sine * sine) * c34;
    }

    private void addNoise(DMatrix4x4 p, double position, double cross, double skew, double velocity) {
        p.a11 += accelerationNoise * position;
        p.a22 += accelerationNoise * position;
        p.a13 += accelerationNoise * cross;
        p.a24 += accelerationNoise * cross;
        p.a14 += accelerationNoise * skew;
        p.a23 -= accelerationNoise * skew;
        p.a33 += accelerationNoise * velocity;
        p.a44 += accelerationNoise * velocity;
        Gaussian.mirror(p);
    }

    private static double sineOverAngle(double angle) {
        return angle == 0 ? 1 : StrictMath.sin(angle) / angle;
    }

    private static double oneLessCosineOverSquare(double angle) {
        double half = sineOverAngle(angle / 2);
        return half * half / 2;
    }

    private static double angleLessSineOverCube(double angle) {
        double square = angle * angle;
        if (Math.abs(angle) < SMALL_ANGLE) {
            return 1.0 / 6 - square * (1.0 / 120 - square * (1.0 / 5040 - square * (1.0 / 362_880 - square / 39_916_800)));
        }
        return (angle - StrictMath.sin(angle)) / (square * angle);
    }
}
