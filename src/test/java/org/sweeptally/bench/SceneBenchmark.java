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
 * One scan of a region with 1,000 objects, by what is said of what its sensor sees and of how its objects
 * move. What counts are ratios to DISC and STRAIGHT; a case is chosen by {@code -p sight=RUNS -p motion=STRAIGHT}.
 */
@State(Scope.Thread)
@BenchmarkMode(Mode.AverageTime)
@OutputTimeUnit(TimeUnit.MICROSECONDS)
@Warmup(iterations = 5, time = 1)
@Measurement(iterations = 10, time = 1)
@Fork(value = 1, jvmArgsAppend = "-Xmx2g")
public class SceneBenchmark {

    @Param({"DISC", "CHARTED", "LEARNING", "RUNS"})
    public SceneSight sight = SceneSight.DISC;

    @Param({"STRAIGHT", "RESTLESS", "TURNING", "TWO_KINDS"})
    public SceneMotion motion = SceneMotion.STRAIGHT;

    public int objects = 1000;

    private ScanScene scene;
    private ObjectFilter filter;

    @Setup(Level.Trial)
    public void scene() {
        scene = new ScanScene(objects, 1, sight, motion);
    }

    @Setup(Level.Invocation)
    public void copy() {
        filter = scene.filter();
    }

    @Benchmark
    public double scan() {
        return scene.step(filter);
    }
}
