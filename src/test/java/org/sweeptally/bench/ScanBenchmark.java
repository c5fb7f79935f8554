package org.sweeptally.bench;

import java.util.concurrent.TimeUnit;
import org.openjdk.jmh.annotations.Benchmark;
import org.openjdk.jmh.annotations.BenchmarkMode;
import org.openjdk.jmh.annotations.Fork;
import org.openjdk.jmh.annotations.Level;
import org.openjdk.jmh.annotations.Measurement;
import org.openjdk.jmh.annotations.Mode;
import org.openjdk.jmh.annotations.OutputTimeUnit;
import org.openjdk.jmh.annotations.Param;
import org.openjdk.jmh.annotations.Scope;
import org.openjdk.jmh.annotations.Setup;
import org.openjdk.jmh.annotations.State;
import org.openjdk.jmh.annotations.Warmup;
import org.sweeptally.filter.ObjectFilter;

/**
 * One scan of a region, beside the bare Kalman updates of its gated pairs. Read the ratios of one run, not the times: machines
 * differ and are noisy.
 */
@BenchmarkMode(Mode.AverageTime)
@OutputTimeUnit(TimeUnit.MICROSECONDS)
@Warmup(iterations = 5, time = 2)
@Measurement(iterations = 5, time = 2)
@Fork(value = 2, jvmArgs = "-Xmx2g")
public class ScanBenchmark {

    /** A filter that is put back before every scan. */
    @State(Scope.Thread)
    public static class Followed {
        @Param({"1000", "10000"})
        int objects;

        ScanScene scene;
        ObjectFilter filter;

        @Setup(Level.Trial)
        public void build() {
            scene = new ScanScene(objects);
        }

        @Setup(Level.Invocation)
        public void restore() {
            filter = scene.restored();
        }
    }

    /** As many pairs as that scan gates. */
    @State(Scope.Thread)
    public static class Pairs {
        @Param({"1000", "10000"})
        int objects;

        BareKalman kalman;

        @Setup(Level.Trial)
        public void build() {
            kalman = new BareKalman((int) new ScanScene(objects).gatedPairs());
        }
    }

    @Benchmark
    public double scan(Followed followed) {
        return followed.scene.step(followed.filter);
    }

    @Benchmark
    public double bareKalmanUpdatesOfItsPairs(Pairs pairs) {
        return pairs.kalman.updateAll();
    }
}
