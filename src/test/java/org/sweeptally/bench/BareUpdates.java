package org.sweeptally.bench;

import java.util.List;
import org.ejml.data.DMatrix2x2;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.ejml.dense.fixed.CommonOps_DDF2;
import org.ejml.dense.fixed.CommonOps_DDF4;
import org.sweeptally.filter.Component;
import org.sweeptally.filter.Observation;
import org.sweeptally.model.Gaussian;
import org.sweeptally.model.Measurement;
import org.sweeptally.model.PositionMeasurement;

/**
 * Kalman updates (Kalman 1960) and nothing else, as one would write them with EJML's matrices of fixed size: no memory
 * is taken, H is padded to 4 x 4, only the 2 x 2 that is not padding is inverted. What a scan costs is told in
 * multiples of this.
 */
final class BareUpdates {

    private final Gaussian[] priors;
    private final PositionMeasurement[] measurements;

    private final DMatrix4x4 h = new DMatrix4x4();
    private final DMatrix4x4 hp = new DMatrix4x4();
    private final DMatrix4x4 s = new DMatrix4x4();
    private final DMatrix2x2 small = new DMatrix2x2();
    private final DMatrix2x2 inverse = new DMatrix2x2();
    private final DMatrix4x4 padded = new DMatrix4x4();
    private final DMatrix4x4 pht = new DMatrix4x4();
    private final DMatrix4x4 gain = new DMatrix4x4();
    private final DMatrix4x4 kept = new DMatrix4x4();
    private final DMatrix4x4 covariance = new DMatrix4x4();
    private final DMatrix4 innovation = new DMatrix4();
    private final DMatrix4 mean = new DMatrix4();

    private BareUpdates(Gaussian[] priors, PositionMeasurement[] measurements) {
        this.priors = priors;
        this.measurements = measurements;
        h.a11 = 1;
        h.a22 = 1;
    }

    /** So many updates, of components in turn, each by a measurement as far off as the scan's are exact. */
    static BareUpdates of(List<Component> components, List<Observation> observations, int updates) {
        Gaussian[] priors = new Gaussian[updates];
        PositionMeasurement[] measurements = new PositionMeasurement[updates];
        for (int i = 0; i < updates; i++) {
            Gaussian density = components.get(i % components.size()).density();
            Measurement z = observations.get(i % observations.size()).measurement();
            double off = Math.sqrt(z.varEast());
            priors[i] = density.copy();
            measurements[i] = new PositionMeasurement(
                    density.east() + off, density.north() - off, z.varEast(), z.covEastNorth(), z.varNorth(), 0);
        }
        return new BareUpdates(priors, measurements);
    }

    int size() {
        return priors.length;
    }

    /** All updates once; gives a sum over what came out, so that none can be left out. */
    double run() {
        double sum = 0;
        for (int i = 0; i < priors.length; i++) {
            update(priors[i], measurements[i]);
            sum += mean.a1 + covariance.a11;
        }
        return sum;
    }

    /** Mean and covariance of the last update. */
    Gaussian last() {
        return new Gaussian(new DMatrix4(mean), new DMatrix4x4(covariance));
    }

    private void update(Gaussian prior, PositionMeasurement z) {
        CommonOps_DDF4.mult(h, prior.covariance, hp);
        CommonOps_DDF4.multTransB(hp, h, s);
        small.setTo(s.a11 + z.varEast(), s.a12 + z.covEastNorth(), s.a21 + z.covEastNorth(), s.a22 + z.varNorth());
        CommonOps_DDF2.invert(small, inverse);
        padded.a11 = inverse.a11;
        padded.a12 = inverse.a12;
        padded.a21 = inverse.a21;
        padded.a22 = inverse.a22;
        CommonOps_DDF4.multTransB(prior.covariance, h, pht);
        CommonOps_DDF4.mult(pht, padded, gain);

        innovation.setTo(z.east() - prior.mean.a1, z.north() - prior.mean.a2, 0, 0);
        CommonOps_DDF4.mult(gain, innovation, mean);
        CommonOps_DDF4.addEquals(mean, prior.mean);

        // (I - K H) P = P - K (H P).
        CommonOps_DDF4.mult(gain, hp, kept);
        CommonOps_DDF4.subtract(prior.covariance, kept, covariance);
    }
}
