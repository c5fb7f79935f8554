package org.sweeptally.filter;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.SplittableRandom;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.junit.jupiter.api.Test;
import org.sweeptally.model.Gaussian;
import org.sweeptally.model.MeasurementUpdate;
import org.sweeptally.model.NearlyConstantVelocity;
import org.sweeptally.model.PositionMeasurement;

class ModeMixingTest {

    /** So wide a measurement of the north axis says nothing there, and weighs the modes alike. */
    private static final double WIDE = 1e13;

    /**
     * One cycle of interacting multiple models by Blom and Bar-Shalom 1988, IEEE TAC 33(8):780-783; layout of the
     * cycle in Bar-Shalom, Li and Kirubarajan 2001, section 11.6.6 (from memory). The numbers were computed outside
     * this project: along one axis, nearly constant velocity with q = 0.01 and q = 10, T = 1, R = 4, z = 13.
     */
    @Test
    void oneCycleGivesTheNumbersComputedElsewhere() {
        double[] weights = {.9, .1};
        Gaussian[] densities = {alongEast(0, 10, 1, .5, 1), alongEast(1, 12, 2, 1, 4)};
        new ModeMixing().mix(weights, densities, new double[][] {{.95, .05}, {.10, .90}});

        assertThat(weights[0]).isCloseTo(.865, within(1e-15));
        assertThat(weights[1]).isCloseTo(.135, within(1e-15));
        assertEast(densities[0], .011560693641618, 10.023121387283, 1.0229877376457617, .5286344348290956,
                1.0803902569414283);
        assertEast(densities[1], 2.0 / 3, 34.0 / 3, 17.0 / 9, 1.2777777777777777, 3.888888888888889);

        Updated slow = updated(densities[0], .01);
        Updated fast = updated(densities[1], 10);
        assertThat(slow.likelihood).isCloseTo(.0806872862558840, within(1e-10));
        assertThat(fast.likelihood).isCloseTo(.0976250573527146, within(1e-10));
        assertEast(slow.density, 11.34431819, 10.69119922, 1.7666046584819, .9011888069239, .7267550103608);
        assertEast(fast.density, 12.74468085, 11.9822695, 2.9787234042553, 2.5957446808511, 7.2913711583924);

        double total = weights[0] * slow.likelihood + weights[1] * fast.likelihood;
        assertThat(total).isCloseTo(.0829738853539561, within(1e-10));
        double slowNow = weights[0] * slow.likelihood / total;
        assertThat(slowNow).isCloseTo(.84116228, within(1e-8));
        Gaussian published = matched(new double[] {slowNow, 1 - slowNow}, slow.density, fast.density);
        assertEast(published, 11.5667486, 10.89626988, 2.221142790071158, 1.4119075413858986, 1.9921703304008174);
    }

    /**
     * The four ways through two modes, each with its own Kalman filter, are what the mixing approximates: modes
     * .8435918 and .1564082, mean (11.5273325, 10.87077878), computed outside this project. One cycle must be within
     * 0.05 of it.
     */
    @Test
    void oneCycleIsCloseToAllWaysThroughTheModes() {
        Gaussian[] before = {alongEast(0, 10, 1, .5, 1), alongEast(1, 12, 2, 1, 4)};
        double[] prior = {.9, .1};
        double[][] transition = {{.95, .05}, {.10, .90}};
        double[] noise = {.01, 10};
        double total = 0;
        double slow = 0;
        double place = 0;
        double speed = 0;
        for (int from = 0; from < 2; from++) {
            for (int to = 0; to < 2; to++) {
                Updated updated = updated(before[from].copy(), noise[to]);
                double weight = prior[from] * transition[from][to] * updated.likelihood;
                total += weight;
                slow += to == 0 ? weight : 0;
                place += weight * updated.density.mean.a1;
                speed += weight * updated.density.mean.a3;
            }
        }
        assertThat(slow / total).isCloseTo(.8435918, within(1e-7)).isCloseTo(.84116228, within(.05));
        assertThat(place / total).isCloseTo(11.5273325, within(1e-7)).isCloseTo(11.5667486, within(.05));
        assertThat(speed / total).isCloseTo(10.87077878, within(1e-7)).isCloseTo(10.89626988, within(.05));
    }

    @Test
    void aSingleModeIsLeftAsItIs() {
        Gaussian density = random(new SplittableRandom(1));
        double[] weights = {.3};
        Gaussian[] densities = {density};
        new ModeMixing().mix(weights, densities, new double[][] {{1}});
        assertThat(densities[0]).isSameAs(density);
        assertThat(weights[0]).isEqualTo(.3);
    }

    @Test
    void modesThatNeverChangeAreIndependentFiltersBitForBit() {
        long seed = 2;
        SplittableRandom random = new SplittableRandom(seed);
        Gaussian[] densities = {random(random), random(random), random(random)};
        Gaussian[] before = densities.clone();
        double[] weights = {.2, .5, .3};
        new ModeMixing().mix(weights, densities, new double[][] {{1, 0, 0}, {0, 1, 0}, {0, 0, 1}});
        assertThat(weights).containsExactly(.2, .5, .3);
        assertThat(densities).containsExactly(before);
    }

    /** All modes hold and move alike: whatever the chain, each stays the plain Kalman filter. */
    @Test
    void equalModelsAreThePlainKalmanFilter() {
        long seed = 3;
        SplittableRandom random = new SplittableRandom(seed);
        NearlyConstantVelocity motion = new NearlyConstantVelocity(.3);
        Gaussian plain = random(random);
        double[] weights = {.25, .6, .15};
        Gaussian[] densities = {plain.copy(), plain.copy(), plain.copy()};
        double[][] transition = {{.7, .2, .1}, {.25, .5, .25}, {0, .4, .6}};
        ModeMixing mixing = new ModeMixing();
        for (int scan = 0; scan < 100; scan++) {
            mixing.mix(weights, densities, transition);
            PositionMeasurement z = new PositionMeasurement(
                    20 * random.nextDouble(), 20 * random.nextDouble(), 9, 1, 16, 0);
            motion.predict(plain, 2);
            plain = updated(plain, z);
            for (int i = 0; i < densities.length; i++) {
                motion.predict(densities[i], 2);
                densities[i] = updated(densities[i], z);
                assertClose(densities[i], plain, 1e-9, "seed " + seed + ", scan " + scan + ", mode " + i);
            }
            assertThat(weights[0] + weights[1] + weights[2]).isCloseTo(1, within(1e-12));
        }
    }

    /** Mixing may move mass between modes; mean and covariance of the whole stay where they are. */
    @Test
    void theWholeKeepsItsMoments() {
        for (long seed = 10; seed < 60; seed++) {
            SplittableRandom random = new SplittableRandom(seed);
            Gaussian[] densities = {random(random), random(random), random(random)};
            double[] weights = {random.nextDouble(), 0, random.nextDouble()};
            Gaussian before = matched(weights.clone(), densities[0], densities[1], densities[2]);
            double sum = weights[0] + weights[2];
            new ModeMixing().mix(weights, densities, new double[][] {{.5, .5, 0}, {.3, .3, .4}, {.1, .2, .7}});
            assertThat(weights[0] + weights[1] + weights[2]).as("seed %s", seed).isCloseTo(sum, within(1e-14));
            assertClose(matched(weights, densities), before, 1e-9, "seed " + seed);
        }
    }

    @Test
    void aModeOfNoWeightLeavesNoTrace() {
        long seed = 4;
        SplittableRandom random = new SplittableRandom(seed);
        Gaussian unheld = new Gaussian(new DMatrix4(Double.NaN, 0, 0, 0), new DMatrix4x4());
        Gaussian held = random(random);
        double[] weights = {1, 0};
        Gaussian[] densities = {held, unheld};
        new ModeMixing().mix(weights, densities, new double[][] {{1, 0}, {.5, .5}});
        assertThat(weights).containsExactly(1, 0);
        assertThat(densities[0]).isSameAs(held);
        assertThat(densities[1]).isSameAs(unheld);
    }

    /** Predictions change a density in place: two modes must never share one. */
    @Test
    void aModeThatTakesAnothersDensityOverHasACopyOfItsOwn() {
        Gaussian density = random(new SplittableRandom(5));
        double[] weights = {1, 0};
        Gaussian[] densities = {density, random(new SplittableRandom(6))};
        new ModeMixing().mix(weights, densities, new double[][] {{.75, .25}, {.5, .5}});
        assertThat(weights).containsExactly(.75, .25);
        assertThat(densities[0]).isSameAs(density);
        assertThat(densities[1]).isNotSameAs(density);
        assertClose(densities[1], density, 0, "copied");
    }

    private record Updated(Gaussian density, double likelihood) {}

    /**
     * One prediction over 1 s and one update with z = 13, R = 4 along the east axis; the likelihood of that axis
     * alone.
     */
    private static Updated updated(Gaussian density, double noise) {
        new NearlyConstantVelocity(noise).predict(density, 1);
        MeasurementUpdate update = new MeasurementUpdate();
        update.prior(density);
        update.measure(new PositionMeasurement(13, 0, 4, 0, WIDE, 0));
        double north = 1 / Math.sqrt(2 * Math.PI * (density.covariance.a22 + WIDE));
        return new Updated(update.updated(), update.likelihood() / north);
    }

    private static Gaussian updated(Gaussian density, PositionMeasurement z) {
        MeasurementUpdate update = new MeasurementUpdate();
        update.prior(density);
        update.measure(z);
        return update.updated();
    }

    private static Gaussian matched(double[] weights, Gaussian... densities) {
        Mixture mixture = new Mixture();
        mixture.reset(0, 0, 0, 0);
        for (int i = 0; i < weights.length; i++) {
            DMatrix4 x = densities[i].mean;
            mixture.add(weights[i], new double[] {x.a1, x.a2, x.a3, x.a4}, 0, densities[i].covariance);
        }
        return mixture.matched();
    }

    private static Gaussian alongEast(double place, double speed, double p11, double p12, double p22) {
        return new Gaussian(
                new DMatrix4(place, 0, speed, 0),
                new DMatrix4x4(p11, 0, p12, 0, 0, 1, 0, 0, p12, 0, p22, 0, 0, 0, 0, 1));
    }

    private static void assertEast(Gaussian density, double place, double speed, double p11, double p12, double p22) {
        assertThat(density.mean.a1).isCloseTo(place, within(1e-8));
        assertThat(density.mean.a3).isCloseTo(speed, within(1e-8));
        assertThat(density.covariance.a11).isCloseTo(p11, within(1e-8));
        assertThat(density.covariance.a13).isCloseTo(p12, within(1e-8));
        assertThat(density.covariance.a33).isCloseTo(p22, within(1e-8));
    }

    private static void assertClose(Gaussian one, Gaussian other, double tolerance, String as) {
        for (int i = 0; i < 4; i++) {
            assertThat(one.mean.get(i, 0)).as(as).isCloseTo(other.mean.get(i, 0), within(tolerance));
            for (int j = 0; j < 4; j++) {
                assertThat(one.covariance.get(i, j)).as(as).isCloseTo(other.covariance.get(i, j), within(tolerance));
            }
        }
    }

    /** A dense covariance A A' + I / 10 about a random place. */
    private static Gaussian random(SplittableRandom random) {
        double[][] a = new double[4][4];
        for (double[] row : a) {
            for (int j = 0; j < 4; j++) {
                row[j] = 4 * random.nextDouble() - 2;
            }
        }
        DMatrix4x4 p = new DMatrix4x4();
        for (int i = 0; i < 4; i++) {
            for (int j = 0; j < 4; j++) {
                double sum = i == j ? .1 : 0;
                for (int k = 0; k < 4; k++) {
                    sum += a[Math.min(i, j)][k] * a[Math.max(i, j)][k];
                }
                p.set(i, j, sum);
            }
        }
        return new Gaussian(
                new DMatrix4(
                        10 * random.nextDouble(), 10 * random.nextDouble(), random.nextDouble(), random.nextDouble()),
                p);
    }
}
