package org.sweeptally.bench;

import java.util.Locale;
import java.util.concurrent.TimeUnit;
import org.openjdk.jmh.annotations.Benchmark;
import org.openjdk.jmh.annotations.BenchmarkMode;
import org.openjdk.jmh.annotations.Fork;
import org.openjdk.jmh.annotations.Measurement;
import org.openjdk.jmh.annotations.Mode;
import org.openjdk.jmh.annotations.OutputTimeUnit;
import org.openjdk.jmh.annotations.Param;
import org.openjdk.jmh.annotations.Scope;
import org.openjdk.jmh.annotations.Setup;
import org.openjdk.jmh.annotations.State;
import org.openjdk.jmh.annotations.Warmup;
import org.sweeptally.filter.association.Association;
import org.sweeptally.filter.association.AssociationBounds;
import org.sweeptally.filter.association.AssociationMarginals;
import org.sweeptally.filter.association.AssociationProblem;

/**
 * One cluster by the exact method and by belief propagation: where the one should hand over to the other. JMH measures;
 * {@link #main} prints a table of costs, times and errors over many scenes, quickly.
 */
@State(Scope.Thread)
@BenchmarkMode(Mode.AverageTime)
@OutputTimeUnit(TimeUnit.MICROSECONDS)
@Warmup(iterations = 3, time = 200, timeUnit = TimeUnit.MILLISECONDS)
@Measurement(iterations = 5, time = 200, timeUnit = TimeUnit.MILLISECONDS)
@Fork(1)
public class AssociationBenchmark {
    private static final AssociationBounds EXACT = new AssociationBounds(Long.MAX_VALUE, 1000);
    private static final AssociationBounds PROPAGATED = new AssociationBounds(0, 1000);
    private static final int SCENES = 20;

    @Param({"dense-2", "dense-4", "dense-6", "dense-8", "dense-10", "dense-12", "dense-14", "chain-50-2", "chain-50-4",
            "chain-50-6"})
    public String shape;

    private final Association association = new Association();
    private AssociationProblem problem;

    @Setup
    public void scene() {
        problem = AssociationScene.of(shape, 1);
    }

    @Benchmark
    public double exact() {
        return association.solve(problem, EXACT).missed(0);
    }

    @Benchmark
    public double propagated() {
        return association.solve(problem, PROPAGATED).missed(0);
    }

    public static void main(String[] arguments) {
        System.out.println("| shape | table entries | frontier | exact us | propagation us | sweeps "
                + "| error: mean of greatest | greatest | missed, greatest ratio |");
        System.out.println("|---|---|---|---|---|---|---|---|---|");
        for (int round = 0; round < 2; round++) {
            for (int k = 2; k <= 14; k++) {
                printRow("dense-" + k, round > 0);
            }
            for (int rows = 20; rows <= 100; rows += 40) {
                for (int width = 2; width <= 6; width++) {
                    printRow("chain-" + rows + "-" + width, round > 0);
                }
            }
        }
        printField(1000, 1000, 2);
        printField(10_000, 10_000, 2);
        printField(10_000, 10_000, 4);
        printField(10_000, 1000, 6);
    }

    private static void printRow(String shape, boolean print) {
        Association association = new Association();
        double entries = 0;
        int frontier = 0;
        double sweeps = 0;
        double sumOfErrors = 0;
        double greatestError = 0;
        double greatestRatio = 0;
        double[] micros = new double[2];
        for (int seed = 0; seed < SCENES; seed++) {
            AssociationProblem problem = AssociationScene.of(shape, seed);
            micros[1] += micros(association, problem, PROPAGATED) / SCENES;
            AssociationMarginals propagated = new Association().solve(problem, PROPAGATED);
            sweeps += propagated.counts().sweeps() / (double) SCENES;
            micros[0] += micros(association, problem, EXACT) / SCENES;
            AssociationMarginals exact = association.solve(problem, EXACT);
            entries += exact.counts().exactSteps() / (double) SCENES;
            frontier = Math.max(frontier, exact.counts().widestFrontier());
            double error = 0;
            for (int i = 0; i < problem.rows(); i++) {
                error = Math.max(error, Math.abs(exact.missed(i) - propagated.missed(i)));
                greatestRatio = Math.max(greatestRatio, propagated.missed(i) / exact.missed(i));
            }
            for (int p = 0; p < problem.pairs(); p++) {
                error = Math.max(error, Math.abs(exact.pair(p) - propagated.pair(p)));
            }
            sumOfErrors += error / SCENES;
            greatestError = Math.max(greatestError, error);
        }
        if (print) {
            System.out.printf(Locale.ROOT, "| %s | %.0f | %d | %.1f | %.1f | %.0f | %.3f | %.3f | %.2f |%n",
                    shape, entries, frontier, micros[0], micros[1], sweeps, sumOfErrors, greatestError, greatestRatio);
        }
    }

    /** Least of five means, each over about two milliseconds. */
    private static double micros(Association association, AssociationProblem problem, AssociationBounds bounds) {
        double least = Double.POSITIVE_INFINITY;
        for (int k = 0; k < 5; k++) {
            int calls = 0;
            long start = System.nanoTime();
            long now = start;
            while (now - start < 2_000_000) {
                association.solve(problem, bounds);
                calls++;
                now = System.nanoTime();
            }
            least = Math.min(least, (now - start) / 1e3 / calls);
        }
        return least;
    }

    private static void printField(int objects, int clutter, double gated) {
        Association association = new Association();
        AssociationProblem problem = AssociationScene.field(objects, clutter, gated, 1);
        AssociationBounds bounds = new AssociationBounds(1_000_000, 1000);
        double micros = micros(association, problem, bounds);
        for (int k = 0; k < 20; k++) {
            micros = Math.min(micros, micros(association, problem, bounds));
        }
        System.out.printf(Locale.ROOT, "field of %d objects, %d clutter, %d pairs: %.0f us, %s%n", objects, clutter,
                problem.pairs(), micros, association.solve(problem, bounds).counts());
    }
}
