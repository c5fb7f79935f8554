package org.sweeptally.filter;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.Locale;
import java.util.SplittableRandom;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.sweeptally.model.Gaussian;
import org.sweeptally.model.Look;
import org.sweeptally.model.PositionMeasurement;

/**
 * An object that certainly exists, without clutter: no filter can be nearer to it on average than the posterior
 * Cramer-Rao bound, enumerated over all sequences of detections and misses (Farina, Ristic and Timmoneri 2002, IEEE
 * TSP 50(8); Tichavsky, Muravchik and Nehorai 1998, IEEE TSP 46(5):1386; from memory), and the Kalman filter attains
 * it. So must ours.
 *
 * <p>Per axis: q = 0.1, error variance 25, a scan a second, at first variance 25 in place and 4 in velocity.
 */
class PosteriorBoundTest {

    private static final double NOISE = 0.1;
    private static final double SIGMA = 5;

    /** So wide that no true detection is lost. */
    private static final double GATE = 9;

    /**
     * Exhaustively: the variance that the filter states, averaged over all sequences. Values computed two ways
     * elsewhere.
     */
    @ParameterizedTest
    @CsvSource({
        "0.9, 1, 14.9930927411", "0.9, 2, 12.9518530445", "0.9, 3, 12.9634319822", "0.9, 5, 12.5979713731",
        "0.9, 8, 10.6237949897", "0.9, 10, 9.5895451854", "0.7, 1, 18.1131462060", "0.7, 5, 17.8773311117",
        "0.7, 10, 13.2841982025", "0.5, 1, 21.2331996710", "0.5, 5, 28.6528407339", "0.5, 10, 22.7345523973",
        "1, 1, 13.4330660086", "1, 5, 10.9792267621", "1, 12, 7.9320923023"
    })
    void theStatedVarianceIsTheEnumeratedBound(double pd, int scans, double bound) {
        double sum = 0;
        for (int sequence = 0; sequence < 1 << scans; sequence++) {
            double probability = 1;
            for (int k = 0; k < scans; k++) {
                probability *= (sequence >> k & 1) == 1 ? pd : 1 - pd;
            }
            if (probability > 0) {
                sum += probability * varianceAfter(pd, sequence, scans);
            }
        }
        assertThat(sum).isCloseTo(bound, within(1e-8));
    }

    private static double varianceAfter(double pd, int sequence, int scans) {
        ObjectFilter filter = certain();
        Look look = Begun.SCENE.look(pd, 0);
        for (int k = 0; k < scans; k++) {
            filter.predict(1);
            boolean detected = (sequence >> k & 1) == 1;
            Gaussian density = filter.components().get(0).density();
            filter.update(detected ? scan(k, look, density.east(), density.north()) : scan(k, look), micros(k));
        }
        Component component = filter.components().get(0);
        assertThat(component.existence()).isEqualTo(1);
        return component.density().covariance.a11;
    }

    /**
     * By chance: the errors really made, over 20,000 runs of each stated seed, within 4 standard errors of the bound.
     */
    @ParameterizedTest
    @CsvSource({"0.9, 12, 8.9366631923, 12", "0.7, 12, 12.1365364379, 13", "0.5, 12, 20.0366010124, 14"})
    void theErrorsReallyMadeAttainIt(double pd, int scans, double bound, long seed) {
        SplittableRandom random = new SplittableRandom(seed);
        Look look = Begun.SCENE.look(pd, 0);
        int runs = 20_000;
        double squares = 0;
        double fourths = 0;
        for (int run = 0; run < runs; run++) {
            ObjectFilter filter = certain();
            double[] x = {
                SIGMA * gaussian(random), SIGMA * gaussian(random), 2 * gaussian(random), 2 * gaussian(random)
            };
            for (int k = 0; k < scans; k++) {
                move(x, random);
                filter.predict(1);
                filter.update(
                        random.nextDouble() < pd
                                ? scan(k, look, x[0] + SIGMA * gaussian(random), x[1] + SIGMA * gaussian(random))
                                : scan(k, look),
                        micros(k));
            }
            Gaussian density = filter.components().get(0).density();
            for (double error : new double[] {density.east() - x[0], density.north() - x[1]}) {
                squares += error * error / (2 * runs);
                fourths += error * error * error * error / (2 * runs);
            }
        }
        // Both axes share their misses, so that they count as one sample for the error of the mean.
        double standardError = Math.sqrt((fourths - squares * squares) / runs);
        System.out.printf(Locale.ROOT, "P_D %.1f, seed %d: mean square error %.4f, bound %.4f, standard error %.4f%n",
                pd, seed, squares, bound, standardError);
        assertThat(squares).isCloseTo(bound, within(4 * standardError));
        assertThat(standardError).isLessThan(0.02 * bound);
    }

    /** In the long run without misses: the root of the Riccati equation (8.13270381094409 is that of R / 0.9). */
    @Test
    void theLooserBoundOfAveragedInformationLiesBelow() {
        ObjectFilter filter = certain();
        Look look = Begun.SCENE.look(1, 0);
        double averaged = SIGMA / Math.sqrt(0.9);
        for (int k = 0; k < 500; k++) {
            filter.predict(1);
            Gaussian density = filter.components().get(0).density();
            PositionMeasurement z = PositionMeasurement.at(density.east(), density.north(), averaged);
            filter.update(new Scan("mast", micros(k), look, List.of(new Observation(z, 0, 0, null, null))), micros(k));
        }
        DMatrix4x4 p = filter.components().get(0).density().covariance;
        assertThat(p.a11).isCloseTo(8.13270381094409, within(1e-8));
        assertThat(p.a13).isCloseTo(1.40160886009021, within(1e-8));
        assertThat(p.a33).isCloseTo(.530240610809258, within(1e-8));
        assertThat(p.a11).as("below the enumerated bound, which is about 8.34").isLessThan(8.34 * 0.99);
    }

    private static ObjectFilter certain() {
        Gaussian prior = new Gaussian(
                new DMatrix4(0, 0, 0, 0),
                new DMatrix4x4(25, 0, 0, 0, 0, 25, 0, 0, 0, 0, 4, 0, 0, 0, 0, 4));
        return Begun.with(Begun.undisturbed(NOISE, GATE), prior, Double.POSITIVE_INFINITY);
    }

    private static Scan scan(int k, Look look, double... eastNorth) {
        List<Observation> observations = eastNorth.length == 0
                ? List.of()
                : List.of(new Observation(PositionMeasurement.at(eastNorth[0], eastNorth[1], SIGMA), 0, 0, null, null));
        return new Scan("mast", micros(k), look, observations);
    }

    private static long micros(int k) {
        return 1_000_000L * (k + 1);
    }

    /** Exactly the noise of a second: velocity by sqrt(q) u, place by sqrt(q) (u / 2 + v / sqrt(12)). */
    private static void move(double[] x, SplittableRandom random) {
        double kick = Math.sqrt(NOISE);
        for (int axis = 0; axis < 2; axis++) {
            double u = gaussian(random);
            x[axis] += x[axis + 2] + kick * (0.5 * u + gaussian(random) / Math.sqrt(12));
            x[axis + 2] += kick * u;
        }
    }

    private static double gaussian(SplittableRandom random) {
        return Math.sqrt(-2 * StrictMath.log(1 - random.nextDouble()))
                * StrictMath.cos(2 * StrictMath.PI * random.nextDouble());
    }
}
