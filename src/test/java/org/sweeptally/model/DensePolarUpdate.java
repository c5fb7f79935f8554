package org.sweeptally.model;

import org.hipparchus.linear.LUDecomposition;
import org.hipparchus.linear.MatrixUtils;
import org.hipparchus.linear.RealMatrix;
import org.hipparchus.linear.RealVector;

/**
 * The iterated extended Kalman filter as a textbook has it (Bell and Cathey 1993; Bar-Shalom, Li and Kirubarajan 2001,
 * section 10.5, from memory), with another library's dense matrices, all numbers measured at once, and slopes by central
 * differences.
 */
final class DensePolarUpdate {

    private static final double STEP = 1e-2;

    private final PolarMeasurement z;
    private final RealVector mean;
    private final RealMatrix covariance;

    RealVector innovation;
    RealMatrix innovationCovariance;
    RealVector updatedMean;
    RealMatrix updatedCovariance;

    /** @param iterations 0 for the plain extended filter */
    DensePolarUpdate(Gaussian prior, PolarMeasurement z, int iterations, double addedRateVariance) {
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
            linear(at, addedRateVariance);
            at = updatedMean;
        }
    }

    private void linear(RealVector at, double addedRateVariance) {
        int n = z.hasRangeRate() ? 3 : 2;
        RealMatrix h = slopes(at).getSubMatrix(0, n - 1, 0, 3);
        PolarMeasurement.Noise noise = z.noise();
        RealMatrix r = MatrixUtils.createRealMatrix(new double[][] {
            {noise.varRange(), noise.covRangeAzimuth(), 0},
            {noise.covRangeAzimuth(), noise.varAzimuth(), 0},
            {0, 0, noise.varRangeRate() + addedRateVariance}
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
