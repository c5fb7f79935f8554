package org.sweeptally.bench;

import java.util.SplittableRandom;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.ejml.dense.fixed.CommonOps_DDF4;

/**
 * Kalman updates and nothing else, as a careful user of EJML's fixed-size operations writes them: matrices of 4 x 4, H and R
 * padded, no garbage. S = H P H' + R, K = P H' S^-1, x + K (z - H x), (I - K H) P.
 */
final class BareKalman {

    private final DMatrix4x4 h = new DMatrix4x4(1, 0, 0, 0, 0, 1, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0);
    /** Padded so that S can be inverted; the padding never meets H. */
    private final DMatrix4x4 r = new DMatrix4x4(225, 0, 0, 0, 0, 225, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1);
    private final DMatrix4x4[] covariances;
    private final DMatrix4[] means;
    private final DMatrix4[] measurements;
    private final DMatrix4x4 pht = new DMatrix4x4();
    private final DMatrix4x4 s = new DMatrix4x4();
    private final DMatrix4x4 inverse = new DMatrix4x4();
    private final DMatrix4x4 k = new DMatrix4x4();
    private final DMatrix4x4 kh = new DMatrix4x4();
    private final DMatrix4x4 left = new DMatrix4x4();
    private final DMatrix4x4 updated = new DMatrix4x4();
    private final DMatrix4 innovation = new DMatrix4();
    private final DMatrix4 mean = new DMatrix4();

    /** So many pairs of a density and a measurement in its gate. */
    BareKalman(int pairs) {
        SplittableRandom random = new SplittableRandom(2);
        covariances = new DMatrix4x4[pairs];
        means = new DMatrix4[pairs];
        measurements = new DMatrix4[pairs];
        for (int i = 0; i < pairs; i++) {
            double p = 100 + 300 * random.nextDouble();
            double c = 10 * random.nextDouble();
            covariances[i] = new DMatrix4x4(p, 0, c, 0, 0, p, 0, c, c, 0, 3, 0, 0, c, 0, 3);
            means[i] = new DMatrix4(1000 * random.nextDouble(), 1000 * random.nextDouble(), 3, -2);
            measurements[i] = new DMatrix4(
                    means[i].a1 + 20 * random.nextDouble(), means[i].a2 + 20 * random.nextDouble(), 0, 0);
        }
    }

    /** Updates every pair; returns a sum over the results. */
    double updateAll() {
        double sum = 0;
        for (int i = 0; i < means.length; i++) {
            sum += update(means[i], covariances[i], measurements[i]);
        }
        return sum;
    }

    private double update(DMatrix4 x, DMatrix4x4 p, DMatrix4 z) {
        CommonOps_DDF4.multTransB(p, h, pht);
        CommonOps_DDF4.mult(h, pht, s);
        CommonOps_DDF4.addEquals(s, r);
        CommonOps_DDF4.invert(s, inverse);
        CommonOps_DDF4.mult(pht, inverse, k);
        CommonOps_DDF4.mult(h, x, innovation);
        CommonOps_DDF4.subtract(z, innovation, innovation);
        CommonOps_DDF4.mult(k, innovation, mean);
        CommonOps_DDF4.addEquals(mean, x);
        CommonOps_DDF4.mult(k, h, kh);
        CommonOps_DDF4.setIdentity(left);
        CommonOps_DDF4.subtractEquals(left, kh);
        CommonOps_DDF4.mult(left, p, updated);
        return mean.a1 + updated.a11;
    }
}
