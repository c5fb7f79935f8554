package org.sweeptally.bench;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import org.junit.jupiter.api.Test;

/** Keeps {@link SceneBenchmark} from rotting, and its cases comparable. */
class SceneBenchmarkTest {

    @Test
    void whatTheSensorIsSaidToSeeChangesHardlyAnythingInTheBenchmark() {
        double disc = expected(SceneSight.DISC, SceneMotion.STRAIGHT);
        for (SceneSight sight : List.of(SceneSight.CHARTED, SceneSight.LEARNING, SceneSight.RUNS)) {
            double expected = expected(sight, SceneMotion.STRAIGHT);
            System.out.println("scene benchmark, 200 objects, " + sight + ": expected number " + expected);
            assertThat(expected).as("%s", sight).isNotEqualTo(disc).isCloseTo(disc, within(0.05 * disc));
        }
    }

    @Test
    void howObjectsAreSaidToMoveChangesHardlyAnythingInTheBenchmark() {
        double straight = expected(SceneSight.DISC, SceneMotion.STRAIGHT);
        for (SceneMotion motion : SceneMotion.values()) {
            System.out.println("scene benchmark, 200 objects, " + motion + ": expected number "
                    + expected(SceneSight.DISC, motion));
            assertThat(expected(SceneSight.DISC, motion)).as("%s", motion).isCloseTo(straight, within(0.05 * straight));
        }
    }

    private static double expected(SceneSight sight, SceneMotion motion) {
        SceneBenchmark benchmark = new SceneBenchmark();
        benchmark.objects = 200;
        benchmark.sight = sight;
        benchmark.motion = motion;
        benchmark.scene();
        benchmark.copy();
        return benchmark.scan();
    }
}
