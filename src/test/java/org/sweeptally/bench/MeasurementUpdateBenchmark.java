package org.sweeptally.bench;

import java.util.SplittableRandom;
import java.util.concurrent.TimeUnit;
import org.ejml.data.DMatrix4;
import org.openjdk.jmh.annotations.Benchmark;
import org.openjdk.jmh.annotations.BenchmarkMode;
import org.openjdk.jmh.annotations.Fork;
import org.openjdk.jmh.annotations.Mode;
import org.openjdk.jmh.annotations.OperationsPerInvocation;
import org.openjdk.jmh.annotations.OutputTimeUnit;
import org.openjdk.jmh.annotations.Param;
import org.openjdk.jmh.annotations.Scope;
import org.openjdk.jmh.annotations.Setup;
import org.openjdk.jmh.annotations.State;
import org.openjdk.jmh.annotations.Warmup;
import org.sweeptally.model.Gaussian;
import org.sweeptally.model.Measurement;
import org.sweeptally.model.MeasurementUpdate;
import org.sweeptally.model.PolarMeasurement;
import org.sweeptally.model.PositionMeasurement;

/**
 * One update of one density by one measurement, likelihood and covariance included: a place, a range and an
 * azimuth.
 */
@State(Scope.Thread)
@BenchmarkMode(Mode.AverageTime)
@OutputTimeUnit(TimeUnit.NANOSECONDS)
@Warmup(iterations = 3, time = 200, timeUnit = TimeUnit.MILLISECONDS)
@org.openjdk.jmh.annotations.Measurement(iterations = 5, time = 200, timeUnit = TimeUnit.MILLISECONDS)
@Fork(1)
public class MeasurementUpdateBenchmark {

    static final int PAIRS = 1000;

    /** Far is where the linearisation is poor, so that it is iterated. */
    @Param({"position", "polar", "polar-rate", "polar-far", "polar-far-rate"})
    public String kind;

    private final MeasurementUpdate update = new MeasurementUpdate();
    private final Gaussian[] priors = new Gaussian[PAIRS];
    private final Measurement[] measurements = new Measurement[PAIRS];

    @Setup
    public void pairs() {
        SplittableRandom random = new SplittableRandom(1);
        double range = kind.contains("far") ? 30_000 : 3000;
        for (int i = 0; i < PAIRS; i++) {
            double angle = random.nextDouble(-3, 3);
            double east = range * StrictMath.sin(angle);
            double north = range * StrictMath.cos(angle);
            priors[i] = Gaussian.atRest(east, north, 400, 0, 400, 6);
            DMatrix4 mean = priors[i].mean;
            mean.a3 = random.nextDouble(-9, 9);
            mean.a4 = random.nextDouble(-9, 9);
            measurements[i] = measurement(east, north, random);
        }
    }

    private Measurement measurement(double east, double north, SplittableRandom random) {
        double e = east + random.nextDouble(-20, 20);
        double n = north + random.nextDouble(-20, 20);
        double lag = random.nextDouble(2.5);
        if (kind.equals("position")) {
            return new PositionMeasurement(e, n, 225, 0, 225, lag);
        }
        return new PolarMeasurement(
                Math.sqrt(e * e + n * n),
                StrictMath.atan2(e, n),
                kind.contains("rate") ? random.nextDouble(-9, 9) : Double.NaN,
                new PolarMeasurement.Noise(225, 0, 0.0003, 0.09),
                PolarMeasurement.Station.at(0, 0, 30),
                lag);
    }

    @Benchmark
    @OperationsPerInvocation(PAIRS)
    public double update() {
        double sum = 0;
        double[] step = new double[4];
        for (int i = 0; i < PAIRS; i++) {
            update.prior(priors[i]);
            update.measure(measurements[i]);
            update.step(step, 0);
            sum += update.likelihood() + step[0] + update.updatedCovariance().a11;
        }
        return sum;
    }
}
