package org.sweeptally.bench;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Arrays;
import org.junit.jupiter.api.Test;
import org.sweeptally.filter.ObjectFilter;

/** The benchmark once, tiny, so that it cannot rot; it prints a digest, so that speed is not bought with meaning. */
class ScanBenchmarkTest {

    @Test
    void aScanOfTheBenchmarkIsTheSameEachTime() {
        ScanScene scene = new ScanScene(60);
        ObjectFilter one = scene.restored();
        ObjectFilter two = scene.restored();
        double result = scene.step(one);
        assertThat(scene.step(two)).isEqualTo(result);
        assertThat(ScanScene.bytes(one)).isEqualTo(ScanScene.bytes(two));
        System.out.println("scan of 60 objects: " + result + ", state " + Arrays.hashCode(ScanScene.bytes(one)));
        assertThat(one.components().size()).isBetween(45, 75);
        assertThat(scene.gatedPairs()).isGreaterThan(60);
        assertThat(new BareKalman((int) scene.gatedPairs()).updateAll()).isPositive();
    }
}
