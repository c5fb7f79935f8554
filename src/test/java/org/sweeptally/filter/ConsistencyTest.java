package org.sweeptally.filter;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.SplittableRandom;
import org.apache.commons.statistics.distribution.ChiSquaredDistribution;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.ejml.dense.fixed.CommonOps_DDF4;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.sweeptally.model.Gaussian;
import org.sweeptally.model.Look;
import org.sweeptally.model.PositionMeasurement;
import org.sweeptally.model.MeasurementUpdate;

/**
 * Gates hold what they should, errors are as large as the filter says, and existence adds up evidence as a sequential
 * test does. Bar-Shalom, Li and Kirubarajan 2001, section 5.4.2, and Wald 1947, chapter 3 (from memory).
 */
class ConsistencyTest {

    /** Innovation covariance diag(36, 64): 27 + 9 east, 55 + 9 north. */
    private static final DMatrix4x4 WIDE =
            new DMatrix4x4(27, 0, 0, 0, 0, 55, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1);

    /** Area of the gate: pi g^2 sqrt |S|. Clutter that falls into it is Poisson with clutter times area as its mean. */
    @ParameterizedTest
    @CsvSource({"1, 21", "2, 22", "3, 23", "5, 24"})
    void aGateCatchesAsMuchClutterAsItsArea(double gate, long seed) {
        SplittableRandom random = new SplittableRandom(seed);
        double half = 60;
        int thrown = 20_000;
        double[] places = new double[2 * thrown];
        for (int i = 0; i < places.length; i++) {
            places[i] = half * (2 * random.nextDouble() - 1);
        }
        double share = StrictMath.PI * gate * gate * Math.sqrt(36 * 64) / (4 * half * half);
        double expected = thrown * share;
        double standardError = Math.sqrt(thrown * share * (1 - share));
        assertThat((double) gated(gate, places)).as("seed %s", seed).isCloseTo(expected, within(4 * standardError));
    }

    /** 1 - exp(-g^2 / 2) of true detections; the chi-squared distribution of an independent library says the same. */
    @ParameterizedTest
    @CsvSource({
        "1, .3934693403, 31", "2, .8646647168, 32", "3, .9888910035, 33", "4, .9996645374, 34"
    })
    void aGateHoldsItsShareOfTrueDetections(double gate, double share, long seed) {
        assertThat(ChiSquaredDistribution.of(2).cumulativeProbability(gate * gate)).isCloseTo(share, within(1e-10));
        SplittableRandom random = new SplittableRandom(seed);
        int thrown = 20_000;
        double[] places = new double[2 * thrown];
        for (int i = 0; i < places.length; i += 2) {
            places[i] = 6 * gaussian(random);
            places[i + 1] = 8 * gaussian(random);
        }
        assertThat((double) gated(gate, places) / thrown)
                .as("seed %s", seed)
                .isCloseTo(share, within(4 * Math.sqrt(share * (1 - share) / thrown)));
    }

    private static long gated(double gate, double[] places) {
        Gaussian density = new Gaussian(new DMatrix4(0, 0, 0, 0), WIDE);
        ObjectFilter filter = Begun.with(Begun.undisturbed(0, gate), density, 0);
        Look look = Begun.SCENE.look(0.9, 1e-3);
        List<Observation> observations = new ArrayList<>();
        for (int i = 0; i < places.length; i += 2) {
            PositionMeasurement z = PositionMeasurement.at(places[i], places[i + 1], 3);
            observations.add(new Observation(z, 0, i / 2, null, null));
        }
        filter.update(new Scan("mast", 0, look, observations), 0);
        return filter.counters().get(Counters.Name.GATED_COMPONENT_PAIRS);
    }

    /** Mean squared distance of what the gate lets in: n F_{n+2}(g) / F_n(g), derived by integrating the density. */
    @ParameterizedTest
    @CsvSource({"0.95, 1.68465976068", "0.99, 1.90696625887", "0.999, 1.9861706601"})
    void distancesInsideAGateAreShorterByItsTruncation(double level, double expected) {
        double gate = -2 * StrictMath.log(1 - level);
        SplittableRandom random = new SplittableRandom(41);
        MeasurementUpdate update = new MeasurementUpdate();
        update.prior(new Gaussian(new DMatrix4(0, 0, 0, 0), WIDE));
        double sum = 0;
        double squares = 0;
        int n = 0;
        for (int i = 0; i < 100_000; i++) {
            update.measure(PositionMeasurement.at(6 * gaussian(random), 8 * gaussian(random), 3));
            double distance = update.distanceSquared();
            if (distance <= gate) {
                sum += distance;
                squares += distance * distance;
                n++;
            }
        }
        double mean = sum / n;
        assertThat(mean).as("seed 41").isCloseTo(expected, within(4 * Math.sqrt((squares / n - mean * mean) / n)));
    }

    /** Averages over independent runs, one time each, lie in the 99 % interval of the chi-squared distribution. */
    @Test
    void errorsAreAsLargeAsTheFilterSays() {
        SplittableRandom random = new SplittableRandom(200);
        int runs = 200;
        double state = 0;
        double innovation = 0;
        for (int run = 0; run < runs; run++) {
            double[] last = lastOfARun(random);
            state += last[0] / runs;
            innovation += last[1] / runs;
        }
        System.out.printf(
                Locale.ROOT, "seed 200, %d runs: mean NEES %.3f of 4, mean NIS %.3f of 2%n", runs, state, innovation);
        assertThat(state).isBetween(quantile(4, runs, 0.005), quantile(4, runs, 0.995));
        assertThat(innovation).isBetween(quantile(2, runs, 0.005), quantile(2, runs, 0.995));
        assertThat(quantile(2, 50, 0.025)).as("the textbook's example").isCloseTo(1.4844385495, within(1e-8));
        assertThat(quantile(2, 50, 0.975)).as("the textbook's example").isCloseTo(2.59122394372, within(1e-8));
    }

    private static double quantile(int dimension, int runs, double level) {
        return ChiSquaredDistribution.of(dimension * runs).inverseCumulativeProbability(level) / runs;
    }

    /**
     * Squared error of the state and of the innovation at the end of 30 scans, 10 % of them missed, in units of the
     * filter's.
     */
    private static double[] lastOfARun(SplittableRandom random) {
        double[] x = {20 * gaussian(random), 20 * gaussian(random), 5 * gaussian(random), 5 * gaussian(random)};
        Gaussian prior = Gaussian.atRest(0, 0, 400, 0, 400, 5);
        ObjectFilter filter = Begun.with(Begun.undisturbed(0.05, 9), prior, Double.POSITIVE_INFINITY);
        Look look = Begun.SCENE.look(0.9, 0);
        MeasurementUpdate update = new MeasurementUpdate();
        for (int k = 1; k <= 30; k++) {
            double kick = Math.sqrt(0.05 * 2.5);
            for (int axis = 0; axis < 2; axis++) {
                double u = gaussian(random);
                x[axis] += 2.5 * (x[axis + 2] + kick * (0.5 * u + gaussian(random) / Math.sqrt(12)));
                x[axis + 2] += kick * u;
            }
            filter.predict(2.5);
            PositionMeasurement z =
                    PositionMeasurement.at(x[0] + 15 * gaussian(random), x[1] + 15 * gaussian(random), 15);
            update.prior(filter.components().get(0).density().copy());
            update.measure(z);
            boolean detected = k == 30 || random.nextDouble() < 0.9;
            List<Observation> seen = detected ? List.of(new Observation(z, 0, 0, null, null)) : List.of();
            filter.update(new Scan("mast", 2_500_000L * k, look, seen), 2_500_000L * k);
        }
        Gaussian density = filter.components().get(0).density();
        DMatrix4 error = new DMatrix4(
                x[0] - density.mean.a1, x[1] - density.mean.a2, x[2] - density.mean.a3, x[3] - density.mean.a4);
        DMatrix4x4 inverse = new DMatrix4x4();
        CommonOps_DDF4.invert(density.covariance, inverse);
        DMatrix4 weighed = new DMatrix4();
        CommonOps_DDF4.mult(inverse, error, weighed);
        return new double[] {CommonOps_DDF4.dot(error, weighed), update.distanceSquared()};
    }

    /**
     * Hits that speak 9 : 1 for an object and misses that speak 9 : 1 against it, in any order: only their difference
     * counts, as in the sequential probability ratio test (Wald 1947). From 1/10, two hits make 9/10.
     */
    @Test
    void evidenceAddsUpInAnyOrder() {
        int scans = 6;
        for (int sequence = 0; sequence < 1 << scans; sequence++) {
            Gaussian still = new Gaussian(new DMatrix4(0, 0, 0, 0), new DMatrix4x4());
            ObjectFilter filter = Begun.with(Begun.undisturbed(0, 5), still, LogOdds.of(0.1));
            int net = 0;
            for (int k = 0; k < scans; k++) {
                boolean hit = (sequence >> k & 1) == 1;
                net += hit ? 1 : -1;
                filter.update(hit ? hit(k) : new Scan("mast", k, Begun.SCENE.look(8.0 / 9, 1), List.of()), k);
                assertThat(filter.components().get(0).existenceLogOdds())
                        .as("hits as the bits of %s, scan %s", sequence, k)
                        .isCloseTo(LogOdds.of(0.1) + net * StrictMath.log(9), within(1e-12));
            }
        }
        ObjectFilter twice = Begun.with(
                Begun.undisturbed(0, 5), new Gaussian(new DMatrix4(0, 0, 0, 0), new DMatrix4x4()), LogOdds.of(0.1));
        twice.update(hit(0), 0);
        twice.update(hit(1), 1);
        assertThat(twice.components().get(0).existence()).isCloseTo(0.9, within(1e-14));
    }

    /**
     * A detection at a place that is known to be the object's, so dense in clutter that pd l / clutter + 1 - pd = 9.
     */
    private static Scan hit(int k) {
        double likelihood = 1 / (2 * StrictMath.PI * 225);
        double clutter = 8.0 / 9 * likelihood / (9 - 1.0 / 9);
        return FilterScene.scan(k, Begun.SCENE.look(8.0 / 9, clutter), 0, 0);
    }

    /** Weights 0.6 and 0.4, by hand: the mean and covariance that Runnalls 2007, IEEE TAES 43(3):989, merges into. */
    @Test
    void mergingKeepsMeanAndCovariance() {
        Mixture mixture = new Mixture();
        mixture.reset(0, 0, 0, 0);
        mixture.add(0.6, new double[] {0, 0, 0, 0}, 0, new DMatrix4x4(1, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1));
        mixture.add(0.4, new double[] {2, 1, 0, 0}, 0, new DMatrix4x4(2, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1));
        Gaussian merged = mixture.matched();
        assertThat(new double[] {merged.east(), merged.north(), merged.covariance.a11, merged.covariance.a12,
                merged.covariance.a22})
                .containsExactly(new double[] {0.8, 0.4, 2.36, 0.48, 1.24}, within(1e-14));
    }

    /** An empty look lowers existence; no look at all, or one that could not see the object, leaves it as it was. */
    @Test
    void onlyALookThatCouldHaveSeenItSpeaksAgainstAnObject() {
        Gaussian density = Gaussian.atRest(9000, 0, 25, 0, 25, 1);
        ObjectFilter filter = Begun.with(Begun.undisturbed(0, 5), density, 2);
        filter.predict(10);
        assertThat(filter.components().get(0).existenceLogOdds()).isCloseTo(2, within(1e-12));
        Look near = new FilterScene(20_000, 100, 1000).look(0.9, 1e-6);
        filter.update(new Scan("mast", 1, near, List.of()), 1);
        assertThat(filter.components().get(0).existenceLogOdds()).isCloseTo(2, within(1e-12));
        filter.update(new Scan("mast", 2, Begun.SCENE.look(0.9, 1e-6), List.of()), 2);
        assertThat(filter.components().get(0).existenceLogOdds()).isCloseTo(2 + StrictMath.log(0.1), within(1e-12));
    }

    private static double gaussian(SplittableRandom random) {
        return Math.sqrt(-2 * StrictMath.log(1 - random.nextDouble()))
                * StrictMath.cos(2 * StrictMath.PI * random.nextDouble());
    }
}
