package org.sweeptally.bench;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;

/** Keeps {@link SightBenchmark} and {@link MotionBenchmark} from rotting, and its cases comparable. */
class SightBenchmarkTest {

    @Test
    void whatTheSensorIsSaidToSeeChangesHardlyAnythingInTheBenchmark() {
        double disc = expected(SceneSight.DISC);
        System.out.println("sight benchmark, 200 objects: expected number " + disc + ", charted "
                + expected(SceneSight.CHARTED) + ", learning " + expected(SceneSight.LEARNING));
        assertThat(expected(SceneSight.CHARTED)).isNotEqualTo(disc).isCloseTo(disc, within(0.05 * disc));
        assertThat(expected(SceneSight.LEARNING)).isNotEqualTo(disc).isCloseTo(disc, within(0.05 * disc));
        assertThat(expected(SceneSight.RUNS)).isNotEqualTo(disc).isCloseTo(disc, within(0.1 * disc));
    }

    @Test
    void howObjectsAreSaidToMoveChangesHardlyAnythingInTheBenchmark() {
        double straight = expected(SceneMotion.STRAIGHT);
        for (SceneMotion motion : SceneMotion.values()) {
            System.out.println("motion benchmark, 200 objects, " + motion + ": expected number " + expected(motion));
            assertThat(expected(motion)).as("%s", motion).isCloseTo(straight, within(0.05 * straight));
        }
    }

    private static double expected(SceneMotion motion) {
        MotionBenchmark benchmark = new MotionBenchmark();
        benchmark.objects = 200;
        benchmark.motion = motion;
        benchmark.scene();
        benchmark.copy();
        return benchmark.scan();
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
