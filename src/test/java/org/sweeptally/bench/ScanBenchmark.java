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
 * One scan of a region whose number of objects grows at constant density, beside the bare Kalman updates of its gated
 * pairs. What counts are ratios within one run: {@code scan} over {@code bareUpdates}, and {@code scan} at 10,000
 * objects over {@code scan} at 1,000.
 */
@State(Scope.Thread)
@BenchmarkMode(Mode.AverageTime)
@OutputTimeUnit(TimeUnit.MICROSECONDS)
@Warmup(iterations = 5, time = 1)
@Measurement(iterations = 10, time = 1)
@Fork(value = 1, jvmArgsAppend = "-Xmx2g")
public class ScanBenchmark {

    @Param({"1000", "10000"})
    public int objects;

    private ScanScene scene;
    private BareUpdates updates;
    private ObjectFilter filter;

    @Setup(Level.Trial)
    public void scene() {
        scene = new ScanScene(objects, 1);
        updates = BareUpdates.of(scene.filter().components(), scene.scan().observations(), scene.gatedPairs());
        System.out.println("# " + objects + " objects: " + scene.scan().observations().size() + " detections, "
                + scene.filter().components().size() + " components, " + updates.size() + " gated pairs");
    }

    /** A scan changes the filter, so each call gets its own copy; copying is not measured. */
    @Setup(Level.Invocation)
    public void copy() {
        filter = scene.filter();
    }

    @Benchmark
    public double scan() {
        return scene.step(filter);
    }

    @Benchmark
    public double bareUpdates() {
        return updates.run();
    }
}
