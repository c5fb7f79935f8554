package org.sweeptally.model;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.SplittableRandom;
import org.apache.commons.statistics.distribution.ChiSquaredDistribution;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.hipparchus.linear.CholeskyDecomposition;
import org.hipparchus.linear.MatrixUtils;
import org.hipparchus.linear.RealMatrix;
import org.hipparchus.linear.RealVector;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;
import org.sweeptally.model.PolarMeasurement.Noise;
import org.sweeptally.model.PolarMeasurement.Station;

/** One object, always detected, followed from its first polar measurement on. Seeded. */
class PolarTrackingSimulationTest {

    private static final double Q = 0.05;
    private static final double SPEED_SIGMA = 6;
    private static final double INTERVAL = 2.5;

    /** A radar and an object at a distance from it. */
    private record Radar(double range, double sigmaRange, double sigmaAzimuth, double sigmaRate, Station station) {
        static Radar at(double range, double sigmaRange, double sigmaDegrees, double sigmaRate) {
            return new Radar(range, sigmaRange, Math.toRadians(sigmaDegrees), sigmaRate, Station.at(0, 0, 30));
        }

        double linearity() {
            return range * sigmaAzimuth * sigmaAzimuth / sigmaRange;
        }

        PolarMeasurement measure(double[] x, double lag, SplittableRandom random) {
            double e = x[0] - lag * x[2] - station.east();
            double n = x[1] - lag * x[3] - station.north();
            double slant = Math.sqrt(e * e + n * n + station.heightDifference() * station.heightDifference());
            double rate = (e * (x[2] - station.eastVelocity()) + n * (x[3] - station.northVelocity())) / slant;
            return new PolarMeasurement(
                    slant + sigmaRange * gaussian(random),
                    Math.atan2(e, n) + sigmaAzimuth * gaussian(random),
                    sigmaRate > 0 ? rate + sigmaRate * gaussian(random) : Double.NaN,
                    new Noise(sigmaRange * sigmaRange, 0, sigmaAzimuth * sigmaAzimuth, sigmaRate * sigmaRate),
                    station,
                    lag);
        }
    }

    /**
     * Mean normalised squared error over runs: 4 for an exact filter, tested by its chi-square interval (Bar-Shalom, Li
     * and Kirubarajan 2001, section 5.4.2, from memory). An extended filter may miss it by the 6 % that the linear rule
     * allows (Lerro and Bar-Shalom 1993, from memory: 2.1193 for 2), at 4.5 times the rule's limit by 15 %, and there
     * with a range rate, which takes part in what is wrong of the direction scan after scan, by 30 %. The cases have
     * r var / sigma_r of 0.01 to 1.8, with lag, height and range rate.
     */
    @ParameterizedTest
    @CsvSource({
        "2000, 20, 0.5, 0, 0, 0, 81", "2000, 20, 0.5, 0.3, 2.5, 0, 82", "30000, 20, 1, 0, 0, 0, 83",
        "30000, 20, 1, 0.3, 1, 0, 84", "30000, 10, 1.4, 0, 0, 0, 85", "30000, 10, 1.4, 0.3, 0, 0, 86",
        "600, 10, 1, 0.3, 0, -400, 87", "300, 10, 3, 0.5, 0, 0, 88"
    })
    void errorsAreAsLargeAsTheFilterSays(
            double range, double sigmaRange, double degrees, double sigmaRate, double lag, double height, long seed) {
        Station station = new Station(0, 0, 0, 0, height, 30);
        Radar radar = new Radar(range, sigmaRange, Math.toRadians(degrees), sigmaRate, station);
        SplittableRandom random = new SplittableRandom(seed);
        int runs = 1000;
        for (int scans : new int[] {1, 2, 5, 20}) {
            double sum = 0;
            for (int run = 0; run < runs; run++) {
                sum += squaredError(track(radar, scans, lag, random, true));
            }
            double low = ChiSquaredDistribution.of(4 * runs).inverseCumulativeProbability(0.0005) / runs;
            double high = ChiSquaredDistribution.of(4 * runs).inverseSurvivalProbability(0.0005) / runs;
            double allowed = radar.linearity() > 1 ? sigmaRate > 0 ? 0.3 : 0.15 : 0.06;
            assertThat(sum / runs).as("seed %s, after %s scans", seed, scans)
                    .isBetween((1 - allowed) * low, (1 + allowed) * high);
        }
    }

    /** Where an object is and what the filter makes of it. */
    private record Followed(double[] truth, Gaussian density) {}

    private static Followed track(Radar radar, int scans, double lag, SplittableRandom random, boolean useRate) {
        double angle = random.nextDouble(-Math.PI, Math.PI);
        double[] x = {
            radar.range() * Math.sin(angle),
            radar.range() * Math.cos(angle),
            SPEED_SIGMA * gaussian(random),
            SPEED_SIGMA * gaussian(random)
        };
        NearlyConstantVelocity motion = new NearlyConstantVelocity(Q);
        MeasurementUpdate update = new MeasurementUpdate();
        PolarMeasurement first = radar.measure(x, lag, random);
        Gaussian density = MeasurementUpdate.firstSeen(useRate ? first : withoutRate(first), SPEED_SIGMA);
        for (int scan = 1; scan < scans; scan++) {
            move(x, random);
            motion.predict(density, INTERVAL);
            update.prior(density);
            PolarMeasurement z = radar.measure(x, lag, random);
            assertThat(update.measure(useRate ? z : withoutRate(z))).isTrue();
            density = update.updated();
        }
        return new Followed(x, density);
    }

    private static PolarMeasurement withoutRate(PolarMeasurement z) {
        return new PolarMeasurement(z.range(), z.azimuth(), Double.NaN, z.noise(), z.station(), z.lagSeconds());
    }

    /** Exact for white noise acceleration: covariance q [t^3/3, t^2/2; t^2/2, t] along each axis. */
    private static void move(double[] x, SplittableRandom random) {
        double t = INTERVAL;
        for (int axis = 0; axis < 2; axis++) {
            double speedNoise = Math.sqrt(Q * t) * gaussian(random);
            double placeNoise = 0.5 * t * speedNoise + Math.sqrt(Q * t * t * t / 12) * gaussian(random);
            x[axis] += t * x[axis + 2] + placeNoise;
            x[axis + 2] += speedNoise;
        }
    }

    private static double squaredError(Followed followed) {
        DMatrix4 m = followed.density().mean;
        double[] x = followed.truth();
        RealVector error =
                MatrixUtils.createRealVector(new double[] {x[0] - m.a1, x[1] - m.a2, x[2] - m.a3, x[3] - m.a4});
        RealMatrix p = MatrixUtils.createRealMatrix(4, 4);
        DMatrix4x4 c = followed.density().covariance;
        for (int i = 0; i < 4; i++) {
            for (int j = 0; j < 4; j++) {
                p.setEntry(i, j, c.get(i, j));
            }
        }
        return error.dotProduct(new CholeskyDecomposition(p, 1e-9, 0).getSolver().solve(error));
    }

    /** At 2 km with 20 m and 0.5 degrees, a range rate within 0.3 m/s leaves only the velocity across unknown. */
    @Test
    void aRangeRateSpeedsTheVelocityUp() {
        Radar radar = Radar.at(2000, 20, 0.5, 0.3);
        for (int scans = 1; scans <= 3; scans++) {
            double with = rootMeanSquareSpeedError(radar, scans, true);
            double without = rootMeanSquareSpeedError(radar, scans, false);
            // Unknown are both components without it, and one of two with it, of 6 m/s each.
            double most = scans == 1 ? 0.75 : 0.8;
            assertThat(with).as("%s scans", scans).isLessThan(most * without);
        }
        assertThat(rootMeanSquareSpeedError(radar, 1, true)).isCloseTo(SPEED_SIGMA, within(0.5));
    }

    private static double rootMeanSquareSpeedError(Radar radar, int scans, boolean useRate) {
        SplittableRandom random = new SplittableRandom(91);
        double sum = 0;
        int runs = 2000;
        for (int run = 0; run < runs; run++) {
            Followed f = track(radar, scans, 0, random, useRate);
            double e = f.truth()[2] - f.density().mean.a3;
            double n = f.truth()[3] - f.density().mean.a4;
            sum += e * e + n * n;
        }
        return Math.sqrt(sum / runs);
    }

    /** The radar's own speed is in the range rate, and taken out of it: a buoy stands still seen from a ferry. */
    @Test
    void aMovingSensorsOwnVelocityIsNotTheObjects() {
        Station ferry = new Station(0, 0, 3, 9, 0, 40);
        Noise noise = new Noise(25, 0, 1e-6, 0.01);
        PolarMeasurement buoy = new PolarMeasurement(3000, 0, -9, noise, ferry, 0);
        Gaussian seen = MeasurementUpdate.firstSeen(buoy, SPEED_SIGMA);
        assertThat(seen.mean.a4).isCloseTo(0, within(1e-6));
        assertThat(seen.covariance.a44).isLessThan(0.02);
        // What the ferry makes across turns the direction, and says nothing of how far the buoy is.
        assertThat(seen.mean.a2).isCloseTo(3000, within(0.01));
        Gaussian taken = MeasurementUpdate.firstSeen(
                new PolarMeasurement(3000, 0, -9, noise, Station.at(0, 0, 40), 0), SPEED_SIGMA);
        assertThat(taken.mean.a4).isCloseTo(-9, within(0.01));
        MeasurementUpdate update = new MeasurementUpdate();
        update.prior(Gaussian.atRest(0, 3000, 25, 0, 25, 1));
        update.measure(buoy);
        assertThat(update.distanceSquared()).isCloseTo(0, within(1e-9));
    }

    /** Against the density of the range rate under the spread of velocities, by its definition. */
    @ParameterizedTest
    @ValueSource(doubles = {0, 3, -7, 15})
    void aFirstRangeRateCountsAsItsDensityOverThatOfFalseOnes(double rate) {
        Noise noise = new Noise(25, 0, 1e-8, 0.25);
        PolarMeasurement z = new PolarMeasurement(3000, 1, rate, noise, Station.at(0, 0, 25), 0);
        double sigma = Math.sqrt(36 + 0.25);
        double density = Math.exp(-0.5 * rate * rate / (sigma * sigma)) / (Math.sqrt(2 * Math.PI) * sigma);
        assertThat(MeasurementUpdate.firstSeenRatio(z, 6)).isCloseTo(density * 50, within(1e-4));
        assertThat(MeasurementUpdate.firstSeenRatio(withoutRate(z), 6)).isEqualTo(1);
        assertThat(MeasurementUpdate.firstSeenRatio(PositionMeasurement.at(1, 2, 3), 6)).isEqualTo(1);
    }

    /** At a place, moved on by a velocity of which the spread is known: E[(p + lag v)(p + lag v)'], derived. */
    @Test
    void whatIsFirstSeenAsAPlaceIsThereAndMovesOn() {
        PositionMeasurement z = new PositionMeasurement(10, 20, 9, 2, 16, 1.5);
        Gaussian seen = MeasurementUpdate.firstSeen(z, 6);
        assertThat(seen.mean.a1).isEqualTo(10);
        assertThat(seen.mean.a2).isEqualTo(20);
        assertThat(seen.mean.a3).isZero();
        DMatrix4x4 p = seen.covariance;
        assertThat(p.a11).isEqualTo(9 + 1.5 * (1.5 * 36));
        assertThat(p.a22).isEqualTo(16 + 1.5 * (1.5 * 36));
        assertThat(p.a12).isEqualTo(2);
        assertThat(p.a13).isEqualTo(1.5 * 36);
        assertThat(p.a24).isEqualTo(1.5 * 36);
        assertThat(p.a33).isEqualTo(36);
        assertThat(p.a14).isZero();
    }

    /** Box and Muller 1958. */
    private static double gaussian(SplittableRandom random) {
        double radius = Math.sqrt(-2 * Math.log(1 - random.nextDouble()));
        return radius * Math.cos(2 * Math.PI * random.nextDouble());
    }
}
