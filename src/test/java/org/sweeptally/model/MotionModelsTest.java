package org.sweeptally.model;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.SplittableRandom;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.hipparchus.linear.MatrixUtils;
import org.hipparchus.linear.RealMatrix;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class MotionModelsTest {

    private static final MotionModel[] MODELS = {
        new NearlyConstantVelocity(.3), new CoordinatedTurn(9, .3), new CoordinatedTurn(-9, .3),
        new CoordinatedTurn(1e-7, .3), new CoordinatedTurn(0, .3), new CoordinatedTurn(120, 0), new StandingStill(.01, .1)
    };

    /**
     * Predicting over two steps is predicting over their sum, whatever the steps: the matrix exponential's
     * semigroup.
     */
    @Test
    void twoStepsAreOne() {
        long seed = 1;
        SplittableRandom random = new SplittableRandom(seed);
        for (int round = 0; round < 200; round++) {
            MotionModel model = MODELS[round % MODELS.length];
            Gaussian one = random(random);
            Gaussian two = one.copy();
            double first = 3 * random.nextDouble();
            double second = round % 10 == 0 ? 0 : 5 * random.nextDouble();
            model.predict(one, first + second);
            model.predict(two, first);
            model.predict(two, second);
            assertClose(two, one, 1e-11, "seed " + seed + ", round " + round + ", " + model);
            assertSymmetric(one);
        }
    }

    /**
     * F and Q of a turn against the series of the matrix exponential of [-A, G q G'; 0, A'] (Van Loan 1978, IEEE TAC
     * 23:395, from memory).
     */
    @ParameterizedTest
    @ValueSource(doubles = {0, 1e-9, .001, 1, 5.7, 5.75, 9, -9, 60, -170})
    void aTurnIsTheMatrixExponentialOfItsEquation(double degreesPerSecond) {
        double rate = Math.toRadians(degreesPerSecond);
        double q = .7;
        double seconds = 2.5;
        double[][] a = {{0, 0, 1, 0}, {0, 0, 0, 1}, {0, 0, 0, -rate}, {0, 0, rate, 0}};
        RealMatrix block = MatrixUtils.createRealMatrix(8, 8);
        for (int i = 0; i < 4; i++) {
            for (int j = 0; j < 4; j++) {
                block.setEntry(i, j, -a[i][j] * seconds);
                block.setEntry(4 + i, 4 + j, a[j][i] * seconds);
            }
        }
        block.setEntry(2, 6, q * seconds);
        block.setEntry(3, 7, q * seconds);
        RealMatrix exponential = exponential(block);
        RealMatrix transition = exponential.getSubMatrix(4, 7, 4, 7).transpose();
        RealMatrix noise = transition.multiply(exponential.getSubMatrix(0, 3, 4, 7));

        Gaussian density = random(new SplittableRandom(7));
        RealMatrix p = matrix(density.covariance);
        RealMatrix expected = transition.multiply(p).multiply(transition.transpose()).add(noise);
        double[] mean = transition.operate(new double[] {
            density.mean.a1, density.mean.a2, density.mean.a3, density.mean.a4});
        new CoordinatedTurn(degreesPerSecond, q).predict(density, seconds);
        for (int i = 0; i < 4; i++) {
            assertThat(density.mean.get(i, 0)).isCloseTo(mean[i], within(1e-11));
            for (int j = 0; j < 4; j++) {
                assertThat(density.covariance.get(i, j)).isCloseTo(expected.getEntry(i, j), within(1e-10));
            }
        }
    }

    @Test
    void aTurnOfNoRateIsStraight() {
        Gaussian turned = random(new SplittableRandom(3));
        Gaussian straight = turned.copy();
        new CoordinatedTurn(0, .3).predict(turned, 2.5);
        new NearlyConstantVelocity(.3).predict(straight, 2.5);
        assertClose(turned, straight, 1e-13, "rate 0");
    }

    /**
     * A quarter turn to the left at 8 m/s in 10 s, from the north: on a circle of radius 8 m/s / w it ends to the
     * west.
     */
    @Test
    void aQuarterTurnToTheLeftEndsWhereTheCircleDoes() {
        double rate = Math.toRadians(9);
        Gaussian density = new Gaussian(new DMatrix4(0, 0, 0, 8), new DMatrix4x4());
        new CoordinatedTurn(9, 0).predict(density, 10);
        assertThat(density.mean.a1).isCloseTo(-8 / rate, within(1e-11));
        assertThat(density.mean.a2).isCloseTo(8 / rate, within(1e-11));
        assertThat(density.mean.a3).isCloseTo(-8, within(1e-12));
        assertThat(density.mean.a4).isCloseTo(0, within(1e-12));
    }

    @Test
    void whatStandsStillStaysWhereItIs() {
        Gaussian density = random(new SplittableRandom(4));
        Gaussian before = density.copy();
        new StandingStill(.04, .1).predict(density, 50);
        assertThat(density.mean.a1).isEqualTo(before.mean.a1);
        assertThat(density.mean.a2).isEqualTo(before.mean.a2);
        assertThat(density.mean.a3).isZero();
        assertThat(density.mean.a4).isZero();
        assertThat(density.covariance.a11).isCloseTo(before.covariance.a11 + 2, within(1e-12));
        assertThat(density.covariance.a12).isEqualTo(before.covariance.a12);
        assertThat(density.covariance.a33).isCloseTo(.01, within(1e-15));
        assertThat(density.covariance.a13).isZero();
    }

    @Test
    void onlyStandingStillGetsNowhere() {
        for (MotionModel model : MODELS) {
            assertThat(model.moves()).as(model.toString()).isEqualTo(!(model instanceof StandingStill));
        }
    }

    /** By its series after halving 20 times: slow, plain, and good for matrices of any kind. */
    private static RealMatrix exponential(RealMatrix m) {
        RealMatrix small = m.scalarMultiply(1.0 / 1024);
        RealMatrix term = MatrixUtils.createRealIdentityMatrix(m.getRowDimension());
        RealMatrix sum = term;
        for (int k = 1; k < 20; k++) {
            term = term.multiply(small).scalarMultiply(1.0 / k);
            sum = sum.add(term);
        }
        for (int i = 0; i < 10; i++) {
            sum = sum.multiply(sum);
        }
        return sum;
    }

    private static RealMatrix matrix(DMatrix4x4 p) {
        RealMatrix matrix = MatrixUtils.createRealMatrix(4, 4);
        for (int i = 0; i < 4; i++) {
            for (int j = 0; j < 4; j++) {
                matrix.setEntry(i, j, p.get(i, j));
            }
        }
        return matrix;
    }

    private static void assertSymmetric(Gaussian density) {
        for (int i = 0; i < 4; i++) {
            for (int j = 0; j < i; j++) {
                assertThat(density.covariance.get(i, j)).isEqualTo(density.covariance.get(j, i));
            }
        }
    }

    private static void assertClose(Gaussian one, Gaussian other, double relative, String as) {
        double largest = 1;
        for (int i = 0; i < 4; i++) {
            largest = Math.max(largest, other.covariance.get(i, i));
        }
        for (int i = 0; i < 4; i++) {
            assertThat(one.mean.get(i, 0)).as(as).isCloseTo(other.mean.get(i, 0), within(relative * largest));
            for (int j = 0; j < 4; j++) {
                assertThat(one.covariance.get(i, j)).as(as).isCloseTo(other.covariance.get(i, j), within(relative * largest));
            }
        }
    }

    private static Gaussian random(SplittableRandom random) {
        RealMatrix a = MatrixUtils.createRealMatrix(4, 4);
        for (int i = 0; i < 4; i++) {
            for (int j = 0; j < 4; j++) {
                a.setEntry(i, j, 4 * random.nextDouble() - 2);
            }
        }
        RealMatrix p = a.multiply(a.transpose());
        DMatrix4x4 covariance = new DMatrix4x4();
        for (int i = 0; i < 4; i++) {
            for (int j = 0; j < 4; j++) {
                covariance.set(i, j, p.getEntry(Math.min(i, j), Math.max(i, j)));
            }
        }
        return new Gaussian(
                new DMatrix4(
                        10 * random.nextDouble(), 10 * random.nextDouble(), 4 * random.nextDouble(), random.nextDouble()),
                covariance);
    }
}
