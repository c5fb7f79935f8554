package org.sweeptally.bench;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;
import org.sweeptally.filter.Component;
import org.sweeptally.filter.Counters;
import org.sweeptally.filter.ObjectFilter;
import org.sweeptally.model.Gaussian;
import org.sweeptally.model.PositionMeasurement;
import org.sweeptally.model.MeasurementUpdate;

/** Keeps {@link ScanBenchmark} from rotting: it runs, small, and what comes out is printed and looked at. */
class ScanBenchmarkTest {

    @Test
    void aScanOfTheBenchmarkSeesAboutAsManyObjectsAsThereAre() {
        ScanBenchmark benchmark = new ScanBenchmark();
        benchmark.objects = 50;
        benchmark.scene();
        benchmark.copy();
        double expected = benchmark.scan();
        benchmark.copy();
        assertThat(benchmark.scan()).as("each call starts from the same state").isEqualTo(expected);
        System.out.println("scan benchmark, 50 objects: expected number " + expected + ", bare updates sum "
                + benchmark.bareUpdates() + ", digest of the state " + Long.toHexString(digest(new ScanScene(50, 1))));
        assertThat(expected).isBetween(25.0, 80.0);
    }

    @Test
    void theBareUpdatesAreTheSameUpdates() {
        ScanScene scene = new ScanScene(20, 1);
        Gaussian prior = scene.filter().components().get(0).density();
        BareUpdates bare = BareUpdates.of(scene.filter().components().subList(0, 1), scene.scan().observations(), 1);
        bare.run();
        MeasurementUpdate update = new MeasurementUpdate();
        update.prior(prior);
        update.measure(PositionMeasurement.at(prior.east() + 15, prior.north() - 15, 15));
        Gaussian expected = update.updated();
        assertThat(bare.last().mean.a3).isCloseTo(expected.mean.a3, within(1e-9));
        assertThat(bare.last().east()).isCloseTo(expected.east(), within(1e-9));
        assertThat(bare.last().covariance.a11).isCloseTo(expected.covariance.a11, within(1e-9));
        assertThat(bare.last().covariance.a13).isCloseTo(expected.covariance.a13, within(1e-9));
        assertThat(bare.last().covariance.a44).isCloseTo(expected.covariance.a44, within(1e-9));
    }

    @Test
    void theSceneGrowsAtConstantDensity() {
        int small = new ScanScene(50, 1).gatedPairs();
        int large = new ScanScene(200, 1).gatedPairs();
        assertThat((double) large / small).isBetween(2.5, 6.0);
    }

    @Test
    void noBoundBitesInTheBenchmark() {
        ScanScene scene = new ScanScene(100, 1);
        ObjectFilter filter = scene.filter();
        scene.step(filter);
        assertThat(filter.counters().get(Counters.Name.COMPONENTS_OVER_BOUND)).isZero();
        assertThat(filter.counters().get(Counters.Name.TERMS_OVER_BOUND)).isZero();
    }

    private static long digest(ScanScene scene) {
        ObjectFilter filter = scene.filter();
        scene.step(filter);
        long digest = 0;
        for (Component component : filter.components()) {
            digest = 31 * digest + Double.doubleToLongBits(component.existenceLogOdds());
            digest = 31 * digest + Double.doubleToLongBits(component.density().east());
        }
        return digest;
    }
}
