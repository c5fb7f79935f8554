package org.sweeptally.filter;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.List;
import java.util.SplittableRandom;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.junit.jupiter.api.Test;
import org.sweeptally.model.Gaussian;
import org.sweeptally.model.PositionMeasurement;
import org.sweeptally.model.MeasurementUpdate;

class DetectionIndexTest {

    /** Against looking at all of them, with lags, and with some measurements that are much less exact than the rest. */
    @Test
    void itFindsAllThatLieInAGateAndInTheOrderOfTheScan() {
        for (long seed = 1; seed <= 200; seed++) {
            SplittableRandom random = new SplittableRandom(seed);
            List<Observation> observations = observations(random, random.nextInt(60));
            DetectionIndex index = new DetectionIndex(observations);
            for (int query = 0; query < 20; query++) {
                Gaussian density = density(random);
                List<Integer> found = new ArrayList<>();
                int count = index.query(Bank.of(density), 4);
                for (int i = 0; i < count; i++) {
                    found.add(index.found(i));
                }
                assertThat(found).as("seed %s", seed).isSorted().doesNotHaveDuplicates();
                assertThat(found).as("seed %s", seed).containsAll(inGate(density, observations, 4));
            }
        }
    }

    @Test
    void oneWideMeasurementDoesNotMakeEveryQueryFindEverything() {
        SplittableRandom random = new SplittableRandom(1);
        List<Observation> observations = new ArrayList<>();
        for (int j = 0; j < 1000; j++) {
            observations.add(observation(j, 20_000 * random.nextDouble(), 20_000 * random.nextDouble(), 15, 0));
        }
        observations.add(observation(1000, 0, 0, 1e6, 0));
        DetectionIndex index = new DetectionIndex(observations);
        Gaussian here = Gaussian.atRest(10_000, 10_000, 225, 0, 225, 5);
        int count = index.query(Bank.of(here), 5);
        assertThat(count).isLessThan(50);
        assertThat(index.found(count - 1)).as("the wide one").isEqualTo(1000);
    }

    private static List<Integer> inGate(Gaussian density, List<Observation> observations, double gate) {
        MeasurementUpdate update = new MeasurementUpdate();
        update.prior(density);
        List<Integer> inside = new ArrayList<>();
        for (int j = 0; j < observations.size(); j++) {
            if (update.measure(observations.get(j).measurement()) && update.distanceSquared() <= gate * gate) {
                inside.add(j);
            }
        }
        return inside;
    }

    private static List<Observation> observations(SplittableRandom random, int number) {
        List<Observation> observations = new ArrayList<>();
        for (int j = 0; j < number; j++) {
            double sigma = random.nextInt(10) == 0 ? 2000 * random.nextDouble() : 5 + 20 * random.nextDouble();
            observations.add(observation(
                    j, 3000 * random.nextDouble(), 3000 * random.nextDouble(), sigma, 3 * random.nextDouble()));
        }
        return observations;
    }

    private static Observation observation(int j, double east, double north, double sigma, double lag) {
        double variance = sigma * sigma;
        return new Observation(new PositionMeasurement(east, north, variance, 0, variance, lag), 0, j, null, null);
    }

    private static Gaussian density(SplittableRandom random) {
        double p = 10 + 5000 * random.nextDouble();
        double c = 20 * random.nextDouble();
        return new Gaussian(
                new DMatrix4(
                        3000 * random.nextDouble(), 3000 * random.nextDouble(), 20 * random.nextDouble() - 10,
                        20 * random.nextDouble() - 10),
                new DMatrix4x4(p, 0, c, 0, 0, p, 0, c, c, 0, 60, 0, 0, c, 0, 60));
    }
}
