package org.sweeptally.model;

import org.hipparchus.linear.LUDecomposition;
import org.hipparchus.linear.MatrixUtils;
import org.hipparchus.linear.RealMatrix;
import org.hipparchus.linear.RealVector;

/**
 * The iterated extended Kalman filter as a textbook has it (Bell and Cathey 1993; Bar-Shalom, Li and Kirubarajan 2001,
 * section 10.5, from memory), with another library's dense matrices, all numbers measured at once, and slopes by
 * central differences.
 */
final class DensePolarUpdate {

    private static final double STEP = 1e-2;

    private final PolarMeasurement z;
    private final RealVector mean;
    private final RealMatrix covariance;

    /** Second-order variances of range and range rate, where it was linearised last. */
    double[] added;

    RealVector innovation;
    RealMatrix innovationCovariance;
    RealVector updatedMean;
    RealMatrix updatedCovariance;

    /** @param iterations 0 for the plain extended filter */
    DensePolarUpdate(Gaussian prior, PolarMeasurement z, int iterations) {
        this.z = z;
        mean = MatrixUtils.createRealVector(
                new double[] {prior.mean.a1, prior.mean.a2, prior.mean.a3, prior.mean.a4});
        covariance = MatrixUtils.createRealMatrix(4, 4);
        for (int i = 0; i < 4; i++) {
            for (int j = 0; j < 4; j++) {
                covariance.setEntry(i, j, prior.covariance.get(i, j));
            }
        }
        RealVector at = mean;
        for (int i = 0; i <= iterations; i++) {
            linear(at);
            at = updatedMean;
        }
    }

    private void linear(RealVector at) {
        int n = z.hasRangeRate() ? 3 : 2;
        RealMatrix h = slopes(at).getSubMatrix(0, n - 1, 0, 3);
        PolarMeasurement.Noise noise = z.noise();
        added = secondOrder(at);
        RealMatrix r = MatrixUtils.createRealMatrix(new double[][] {
            {noise.varRange() + added[0], noise.covRangeAzimuth(), 0},
            {noise.covRangeAzimuth(), noise.varAzimuth(), 0},
            {0, 0, noise.varRangeRate() + added[1]}
        });
        RealVector measured = MatrixUtils.createRealVector(
                new double[] {z.range(), z.azimuth(), z.hasRangeRate() ? z.rangeRate() : 0});
        RealVector difference = wrapped(measured.subtract(measure(at)));
        innovation = difference.getSubVector(0, n).subtract(h.operate(mean.subtract(at)));
        innovationCovariance =
                h.multiply(covariance).multiply(h.transpose()).add(r.getSubMatrix(0, n - 1, 0, n - 1));
        RealMatrix gain = covariance.multiply(h.transpose()).multiply(inverse());
        updatedMean = mean.add(gain.operate(innovation));
        updatedCovariance = covariance.subtract(gain.multiply(innovationCovariance).multiply(gain.transpose()));
    }

    /**
     * Variances of 1/2 x'Hx, 1/2 tr(H P H P), with what matters of the Hessians: of the range a a' / s in place, of the
     * range rate a a' / s between place and velocity, a the direction across.
     */
    private double[] secondOrder(RealVector x) {
        double lag = z.lagSeconds();
        double e = x.getEntry(0) - lag * x.getEntry(2) - z.station().east();
        double n = x.getEntry(1) - lag * x.getEntry(3) - z.station().north();
        double g = Math.hypot(e, n);
        RealVector place = MatrixUtils.createRealVector(new double[] {n / g, -e / g, -lag * n / g, lag * e / g});
        RealVector speed = MatrixUtils.createRealVector(new double[] {0, 0, n / g, -e / g});
        double s = measure(x).getEntry(0);
        RealMatrix ofRange = place.outerProduct(place).scalarMultiply(1 / s);
        RealMatrix ofRate = place.outerProduct(speed).add(speed.outerProduct(place)).scalarMultiply(1 / s);
        return new double[] {halfTrace(ofRange), halfTrace(ofRate)};
    }

    private double halfTrace(RealMatrix hessian) {
        RealMatrix product = hessian.multiply(covariance);
        return 0.5 * product.multiply(product).getTrace();
    }

    private RealMatrix inverse() {
        return new LUDecomposition(innovationCovariance).getSolver().getInverse();
    }

    double distanceSquared() {
        return innovation.dotProduct(inverse().operate(innovation));
    }

    double determinant() {
        return new LUDecomposition(innovationCovariance).getDeterminant();
    }

    /** Range, azimuth and range rate of a state, by their definitions. */
    private RealVector measure(RealVector x) {
        PolarMeasurement.Station s = z.station();
        double e = x.getEntry(0) - z.lagSeconds() * x.getEntry(2) - s.east();
        double n = x.getEntry(1) - z.lagSeconds() * x.getEntry(3) - s.north();
        double slant = Math.sqrt(e * e + n * n + s.heightDifference() * s.heightDifference());
        double rate = (e * (x.getEntry(2) - s.eastVelocity()) + n * (x.getEntry(3) - s.northVelocity())) / slant;
        return MatrixUtils.createRealVector(new double[] {slant, Math.atan2(e, n), rate});
    }

    private RealMatrix slopes(RealVector at) {
        RealMatrix h = MatrixUtils.createRealMatrix(3, 4);
        for (int j = 0; j < 4; j++) {
            RealVector more = at.copy();
            RealVector less = at.copy();
            more.setEntry(j, at.getEntry(j) + STEP);
            less.setEntry(j, at.getEntry(j) - STEP);
            h.setColumnVector(j, wrapped(measure(more).subtract(measure(less))).mapDivide(2 * STEP));
        }
        return h;
    }

    private static RealVector wrapped(RealVector difference) {
        difference.setEntry(1, Math.IEEEremainder(difference.getEntry(1), 2 * Math.PI));
        return difference;
    }
}
