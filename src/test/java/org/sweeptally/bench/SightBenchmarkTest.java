package org.sweeptally.bench;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;

/** Keeps {@link SightBenchmark} from rotting, and its cases comparable. */
class SightBenchmarkTest {

    @Test
    void whatTheSensorIsSaidToSeeChangesHardlyAnythingInTheBenchmark() {
        double disc = expected(SceneSight.DISC);
        System.out.println("sight benchmark, 200 objects: expected number " + disc + ", charted "
                + expected(SceneSight.CHARTED) + ", learning " + expected(SceneSight.LEARNING));
        assertThat(expected(SceneSight.CHARTED)).isNotEqualTo(disc).isCloseTo(disc, within(0.05 * disc));
        assertThat(expected(SceneSight.LEARNING)).isNotEqualTo(disc).isCloseTo(disc, within(0.05 * disc));
    }

    private static double expected(SceneSight sight) {
        SightBenchmark benchmark = new SightBenchmark();
        benchmark.objects = 200;
        benchmark.sight = sight;
        benchmark.scene();
        benchmark.copy();
        return benchmark.scan();
    }
}
