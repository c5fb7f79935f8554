package org.sweeptally.model;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.SplittableRandom;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.ejml.data.DMatrixRMaj;
import org.ejml.dense.row.CommonOps_DDRM;
import org.ejml.dense.row.factory.DecompositionFactory_DDRM;
import org.hipparchus.linear.MatrixUtils;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** Motion and update against numbers from outside the project. Each check names its source. */
class OutsideChecksTest {

    /**
     * Steady state of the Kalman filter for continuous white noise acceleration: Bar-Shalom, Li and Kirubarajan 2001,
     * "Estimation with Applications to Tracking and Navigation", sections 6.2.2 and 6.5 (from memory); the closed
     * relation beta = 3 (2 - alpha) - sqrt(3 (alpha^2 - 12 alpha + 12)), beta^2 / (1 - alpha) = q T^3 / R gives the
     * same.
     */
    @ParameterizedTest
    @CsvSource({
        "1, 1, 1, 0.7567381982740591, 0.4932157760310805, 1.034294390101529, 3.110797473771083",
        "0.1, 1, 1, 0.548527627097165, 0.212478792565949, 0.208156411975522, 1.21497495753792",
        "0.01, 1, 1, 0.360591664526729, 0.079963012416571, 0.040094807415235, 0.56394583010844",
        "0.01, 100, 1, 13.18765503323859, 0.9317314257164529, 0.1365392318993424, 15.19099044990417",
        "1, 100, 2, 52.86236014892552, 9.709545803082087, 4.444370027292677, 112.1446901370912",
        "5, 100, 4, 84.87239644150149, 17.39402400739892, 14.39699876388557, 561.0432353895286"
    })
    void theFilterSettlesWhereTheRiccatiEquationSays(
            double q, double r, double t, double p11, double p13, double p33, double predicted11) {
        NearlyConstantVelocity motion = new NearlyConstantVelocity(q);
        Gaussian density = wide(r);
        for (int k = 0; k < 1500; k++) {
            motion.predict(density, t);
            density = updated(density, 0, 0, r);
        }
        assertThat(density.covariance.a11).isCloseTo(p11, within(1e-9 * p11));
        assertThat(density.covariance.a13).isCloseTo(p13, within(1e-9 * p13));
        assertThat(density.covariance.a33).isCloseTo(p33, within(1e-9 * p33));
        // The other axis is an independent copy, and nothing couples the two.
        assertThat(density.covariance.a22).isCloseTo(p11, within(1e-9 * p11));
        assertThat(density.covariance.a12).isZero();
        assertThat(density.covariance.a14).isZero();
        motion.predict(density, t);
        assertThat(density.covariance.a11).isCloseTo(predicted11, within(1e-9 * predicted11));
        double alpha = p11 / r;
        double beta = 3 * (2 - alpha) - Math.sqrt(3 * (alpha * alpha - 12 * alpha + 12));
        assertThat(p13 * t / r).isCloseTo(beta, within(1e-9));
    }

    /** A finite sequence whose likelihoods multiply to the batch Gaussian marginal likelihood, computed by stacking. */
    @Test
    void aFiniteSequenceGivesTheBatchLikelihood() {
        NearlyConstantVelocity motion = new NearlyConstantVelocity(0.1);
        Gaussian density = new Gaussian(new DMatrix4(0, 0, 10, 0), diagonal(4, 4, 25, 25));
        double[][] expected = {
            {20.9630541872, 10.4636699507, 3.85221674877, -3.2658554196154},
            {39.497642893, 9.7293708963, 3.31131482044, -2.6715164218990},
            {61.1390078439, 10.259921934, 2.8684612645, -2.5710097986755}
        };
        double[] z = {21, 39, 62};
        for (int k = 0; k < 3; k++) {
            motion.predict(density, 2);
            MeasurementUpdate update = new MeasurementUpdate();
            update.prior(density);
            // The north axis sees exactly what it expects; its part of the density is 1 / sqrt(2 pi S), with the same S.
            update.measure(new PositionMeasurement(z[k], 0, 4, 0, 4, 0));
            double s = density.covariance.a11 + 4;
            double northLog = -0.5 * Math.log(2 * Math.PI * s);
            assertThat(update.logLikelihood() - northLog).isCloseTo(expected[k][3], within(1e-10));
            density = update.updated();
            assertThat(density.mean.a1).isCloseTo(expected[k][0], within(1e-9));
            assertThat(density.mean.a3).isCloseTo(expected[k][1], within(1e-9));
            assertThat(density.covariance.a11).isCloseTo(expected[k][2], within(1e-9));
        }
    }

    /** Without process noise the filter is least squares of a line: P11 = 2 (2n - 1) R / (n (n + 1)), and so on. */
    @ParameterizedTest
    @CsvSource({"2, 1, 1, 2", "3, 0.833333333333, 0.5, 0.5", "5, 0.6, 0.2, 0.1", "10, 0.345454545455, 0.0545454545455, 0.0121212121212"})
    void withoutProcessNoiseItIsALineFit(int scans, double p11, double p13, double p33) {
        // Bar-Shalom, Li and Kirubarajan 2001, section 3.5 (from memory).
        NearlyConstantVelocity motion = new NearlyConstantVelocity(0);
        Gaussian density = new Gaussian(new DMatrix4(), diagonal(1e8, 1e8, 1e8, 1e8));
        for (int k = 0; k < scans; k++) {
            motion.predict(density, k == 0 ? 0 : 1);
            density = updated(density, 0, 0, 1);
        }
        assertThat(density.covariance.a11).isCloseTo(p11, within(1e-6));
        assertThat(density.covariance.a13).isCloseTo(p13, within(1e-6));
        assertThat(density.covariance.a33).isCloseTo(p33, within(1e-6));
    }

    /**
     * Irregular times: the matrix exponential is a semigroup (Van Loan 1978, IEEE TAC 23:395, from memory). With T =
     * 0.7 + 1.6 and q = 1, Q(2.3) = [[4.05566666666667, 2.645], [2.645, 2.3]]. A piecewise constant acceleration fails
     * this.
     */
    @Test
    void twoStepsAreOne() {
        NearlyConstantVelocity motion = new NearlyConstantVelocity(1);
        Gaussian one = new Gaussian(new DMatrix4(1, 2, 3, 4), new DMatrix4x4());
        Gaussian two = one.copy();
        motion.predict(one, 2.3);
        motion.predict(two, 0.7);
        motion.predict(two, 1.6);
        assertThat(one.covariance.a11).isCloseTo(4.05566666666667, within(1e-13));
        assertThat(one.covariance.a13).isCloseTo(2.645, within(1e-13));
        assertThat(one.covariance.a33).isCloseTo(2.3, within(1e-13));
        assertThat(two.covariance.a11).isCloseTo(one.covariance.a11, within(1e-13));
        assertThat(two.covariance.a24).isCloseTo(one.covariance.a24, within(1e-13));
        assertThat(two.mean.a1).isCloseTo(one.mean.a1, within(1e-13));
    }

    /** Random correlated priors and lags, against Hipparchus's general matrices. */
    @Test
    void theUpdateIsThatOfAGeneralLibrary() {
        long seed = 42;
        SplittableRandom random = new SplittableRandom(seed);
        for (int round = 0; round < 200; round++) {
            Gaussian prior = randomDensity(random);
            double lag = 3 * random.nextDouble();
            PositionMeasurement z = new PositionMeasurement(
                    20 * random.nextDouble(), 20 * random.nextDouble(), 4 + random.nextDouble(), random.nextDouble(),
                    3 + random.nextDouble(), lag);
            MeasurementUpdate update = new MeasurementUpdate();
            update.prior(prior);
            assertThat(update.measure(z)).isTrue();
            Gaussian ours = update.updated();

            var h = MatrixUtils.createRealMatrix(new double[][] {{1, 0, -lag, 0}, {0, 1, 0, -lag}});
            var p = MatrixUtils.createRealMatrix(array(prior.covariance));
            var r = MatrixUtils.createRealMatrix(new double[][] {
                {z.varEast(), z.covEastNorth()}, {z.covEastNorth(), z.varNorth()}});
            var x = MatrixUtils.createRealVector(new double[] {prior.mean.a1, prior.mean.a2, prior.mean.a3, prior.mean.a4});
            var s = h.multiply(p).multiply(h.transpose()).add(r);
            var k = p.multiply(h.transpose()).multiply(MatrixUtils.inverse(s));
            var innovation = MatrixUtils.createRealVector(new double[] {z.east(), z.north()}).subtract(h.operate(x));
            var mean = x.add(k.operate(innovation));
            var covariance = p.subtract(k.multiply(s).multiply(k.transpose()));
            double squared = innovation.dotProduct(MatrixUtils.inverse(s).operate(innovation));

            assertThat(update.distanceSquared()).as("seed %s, round %s", seed, round).isCloseTo(squared, within(1e-9));
            for (int i = 0; i < 4; i++) {
                assertThat(ours.mean.get(i, 0)).isCloseTo(mean.getEntry(i), within(1e-9));
                for (int j = 0; j < 4; j++) {
                    assertThat(ours.covariance.get(i, j)).isCloseTo(covariance.getEntry(i, j), within(1e-8));
                }
            }
        }
    }

    /** A covariance stays symmetric and positive over 100,000 updates. */
    @Test
    void aCovarianceStaysOne() {
        long seed = 3;
        SplittableRandom random = new SplittableRandom(seed);
        NearlyConstantVelocity motion = new NearlyConstantVelocity(0.05);
        Gaussian density = wide(225);
        for (int k = 0; k < 100_000; k++) {
            motion.predict(density, 3 * random.nextDouble());
            density = updated(density, 10 * random.nextDouble(), 10 * random.nextDouble(), 1 + 300 * random.nextDouble());
        }
        DMatrixRMaj p = new DMatrixRMaj(array(density.covariance));
        assertThat(CommonOps_DDRM.elementMaxAbs(CommonOps_DDRM.subtract(p, CommonOps_DDRM.transpose(p, null), null)))
                .isZero();
        assertThat(DecompositionFactory_DDRM.chol(4, true).decompose(p)).as("positive definite, seed %s", seed).isTrue();
    }

    /**
     * Gates: P(chi-squared with 2 degrees of freedom up to g^2) = 1 - exp(-g^2 / 2); NIST/SEMATECH e-Handbook
     * 1.3.6.7.4 (from memory).
     */
    @ParameterizedTest
    @CsvSource({"1, 0.3934693403", "2, 0.8646647168", "3, 0.9888910035", "4, 0.9996645374", "5, 0.9999962733"})
    void aGateHoldsItsShare(double sigmas, double share) {
        long seed = 8;
        SplittableRandom random = new SplittableRandom(seed);
        Gaussian prior = new Gaussian(new DMatrix4(), diagonal(9, 16, 1, 1));
        int inside = 0;
        int draws = 200_000;
        MeasurementUpdate update = new MeasurementUpdate();
        update.prior(prior);
        for (int i = 0; i < draws; i++) {
            double radius = Math.sqrt(-2 * StrictMath.log(1 - random.nextDouble()));
            double angle = 2 * Math.PI * random.nextDouble();
            update.measure(new PositionMeasurement(
                    5 * radius * StrictMath.cos(angle), Math.sqrt(32) * radius * StrictMath.sin(angle), 16, 0, 16, 0));
            inside += update.distanceSquared() <= sigmas * sigmas ? 1 : 0;
        }
        double error = Math.sqrt(share * (1 - share) / draws);
        assertThat((double) inside / draws).as("seed %s", seed).isCloseTo(share, within(4 * error + 1e-6));
    }

    private static Gaussian wide(double r) {
        return new Gaussian(new DMatrix4(), diagonal(10 * r, 10 * r, 100, 100));
    }

    private static DMatrix4x4 diagonal(double a, double b, double c, double d) {
        return new DMatrix4x4(a, 0, 0, 0, 0, b, 0, 0, 0, 0, c, 0, 0, 0, 0, d);
    }

    private static Gaussian updated(Gaussian density, double east, double north, double variance) {
        MeasurementUpdate update = new MeasurementUpdate();
        update.prior(density);
        update.measure(new PositionMeasurement(east, north, variance, 0, variance, 0));
        return update.updated();
    }

    private static Gaussian randomDensity(SplittableRandom random) {
        DMatrixRMaj a = new DMatrixRMaj(4, 4);
        for (int i = 0; i < 16; i++) {
            a.set(i, 4 * random.nextDouble() - 2);
        }
        DMatrixRMaj p = new DMatrixRMaj(4, 4);
        CommonOps_DDRM.multTransB(a, a, p);
        DMatrix4x4 covariance = new DMatrix4x4();
        for (int i = 0; i < 4; i++) {
            for (int j = 0; j < 4; j++) {
                covariance.set(i, j, p.get(Math.min(i, j), Math.max(i, j)) + (i == j ? 0.1 : 0));
            }
        }
        return new Gaussian(
                new DMatrix4(random.nextDouble(), random.nextDouble(), random.nextDouble(), random.nextDouble()), covariance);
    }

    private static double[][] array(DMatrix4x4 m) {
        double[][] array = new double[4][4];
        for (int i = 0; i < 4; i++) {
            for (int j = 0; j < 4; j++) {
                array[i][j] = m.get(i, j);
            }
        }
        return array;
    }
}
