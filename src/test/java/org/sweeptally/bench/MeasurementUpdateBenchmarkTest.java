package org.sweeptally.bench;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** Keeps {@link MeasurementUpdateBenchmark} from rotting: what it answers is printed, and twice the same. */
class MeasurementUpdateBenchmarkTest {

    @ParameterizedTest
    @ValueSource(strings = {"position", "polar", "polar-rate", "polar-far", "polar-far-rate"})
    void theBenchmarkRunsAndAnswersTheSame(String kind) {
        MeasurementUpdateBenchmark benchmark = new MeasurementUpdateBenchmark();
        benchmark.kind = kind;
        benchmark.pairs();
        double answer = benchmark.update();
        System.out.println("measurement update benchmark, " + kind + ": " + answer);
        assertThat(answer).isFinite().isEqualTo(benchmark.update());
    }
}
