package org.sweeptally.model;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.SplittableRandom;
import org.apache.commons.statistics.distribution.ChiSquaredDistribution;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;
import org.sweeptally.model.PolarMeasurement.Noise;
import org.sweeptally.model.PolarMeasurement.Station;

/** The extended update by range, azimuth and range rate, against the textbook's matrices and its own definitions. */
class PolarUpdateTest {

    private static Gaussian at(double east, double north, double sigma, double speedSigma) {
        return Gaussian.atRest(east, north, sigma * sigma, 0, sigma * sigma, speedSigma);
    }

    private static PolarMeasurement polar(double range, double azimuth, double sigmaRange, double sigmaAzimuth) {
        Noise noise = new Noise(sigmaRange * sigmaRange, 0, sigmaAzimuth * sigmaAzimuth, 0);
        return new PolarMeasurement(range, azimuth, Double.NaN, noise, Station.at(0, 0, 30), 0);
    }

    private static MeasurementUpdate update(Gaussian prior, Measurement z) {
        MeasurementUpdate update = new MeasurementUpdate();
        update.prior(prior);
        assertThat(update.measure(z)).isTrue();
        return update;
    }

    /**
     * Clockwise from north, h = (hypot(E, N), atan2(E, N)): at (3000, 4000) range 5000, azimuth 0.6435, slopes
     * [[0.6, 0.8], [0.00016, -0.00012]] (derived; an angle from the east axis would give 0.9273).
     */
    @Test
    void slopesAreThoseOfAnAzimuthClockwiseFromNorth() {
        Gaussian prior = at(3000, 4000, 2, 1);
        double azimuth = .643501108793284;
        MeasurementUpdate here = update(prior, polar(5000, azimuth, 10, 0.001));
        assertThat(here.distanceSquared()).isCloseTo(0, within(1e-18));
        // K = P H' S^-1: with P = 4 I, 4 H' / (4 |h|^2 + R).
        double[] step = new double[4];
        update(prior, polar(5001, azimuth, 10, 0.001)).step(step, 0);
        assertThat(step[0]).isCloseTo(4 * 0.6 / (4 + 100), within(1e-9));
        assertThat(step[1]).isCloseTo(4 * 0.8 / (4 + 100), within(1e-9));
        update(prior, polar(5000, azimuth + 1e-4, 10, 0.001)).step(step, 0);
        assertThat(step[0]).isCloseTo(4 * 0.00016 * 1e-4 / (4 * 4e-8 + 1e-6), within(1e-9));
        assertThat(step[1]).isCloseTo(4 * -0.00012 * 1e-4 / (4 * 4e-8 + 1e-6), within(1e-9));
    }

    /** Azimuths on both sides of north and of south are near each other; 3.2 is 3.2 - 2 pi. */
    @ParameterizedTest
    @CsvSource({"0, 1e4", "-1, 1e4", "1, 1e4", "1, -1e4", "-1, -1e4", "0, -1e4"})
    void innovationsAreWrapped(double east, double north) {
        for (double offset : new double[] {-0.02, -1e-4, 0, 1e-4, 0.02}) {
            for (double turns : new double[] {-1, 0, 1}) {
                double azimuth = StrictMath.atan2(east, north) + offset + turns * 2 * Math.PI;
                MeasurementUpdate update = update(at(east, north, 10, 1), polar(1e4, azimuth, 10, 0.01));
                double expected = offset * offset / (0.01 * 0.01 + 10 * 10 / 1e8);
                assertThat(update.distanceSquared()).as("offset %s", offset).isCloseTo(expected, within(1e-6));
            }
        }
        assertThat(PolarUpdate.wrapped(StrictMath.toRadians(359 - 1))).isCloseTo(-.034906585039887, within(1e-14));
        assertThat(PolarUpdate.wrapped(3.2)).isCloseTo(-3.083185307179586, within(1e-14));
    }

    /** Seeded cases with lag, height, moving station, correlated noise and prior: everything at once. */
    @ParameterizedTest
    @ValueSource(longs = {71, 72, 73, 74})
    void theUpdateIsTheTextbooks(long seed) {
        SplittableRandom random = new SplittableRandom(seed);
        int iterated = 0;
        for (int trial = 0; trial < 300; trial++) {
            Case c = new Case(random, trial % 2 == 0, trial % 3 == 0);
            MeasurementUpdate update = update(c.prior, c.z);
            boolean poor = c.isPoor();
            iterated += poor ? 1 : 0;
            DensePolarUpdate dense = new DensePolarUpdate(c.prior, c.z, poor ? 30 : 0);
            double tolerance = poor ? 2e-3 : 1e-6;
            Gaussian updated = update.updated();
            double[] got = {updated.mean.a1, updated.mean.a2, updated.mean.a3, updated.mean.a4};
            for (int i = 0; i < 4; i++) {
                double sigma = Math.sqrt(dense.updatedCovariance.getEntry(i, i));
                assertThat(got[i]).as("seed %s trial %s state %s", seed, trial, i)
                        .isCloseTo(dense.updatedMean.getEntry(i), within(tolerance * sigma + 1e-6));
                for (int j = 0; j < 4; j++) {
                    double scale = sigma * Math.sqrt(dense.updatedCovariance.getEntry(j, j));
                    assertThat(updated.covariance.get(i, j)).as("seed %s trial %s", seed, trial)
                            .isCloseTo(dense.updatedCovariance.getEntry(i, j), within(tolerance * scale));
                    assertThat(updated.covariance.get(i, j)).isEqualTo(updated.covariance.get(j, i));
                }
            }
            double d2 = dense.distanceSquared();
            assertThat(update.distanceSquared()).as("seed %s trial %s", seed, trial)
                    .isCloseTo(d2, within(tolerance * (1 + d2)));
            double dimension = c.z.hasRangeRate() ? 3 : 2;
            double density = Math.exp(-0.5 * d2)
                    / Math.sqrt(Math.pow(2 * Math.PI, dimension) * dense.determinant());
            double perSquareMetre = density / c.z.range() * (c.z.hasRangeRate() ? 2 * 30 : 1);
            assertThat(update.likelihood())
                    .isCloseTo(perSquareMetre, within(2 * tolerance * (1 + d2) * perSquareMetre));
            assertThat(update.logLikelihood()).isCloseTo(Math.log(update.likelihood()), within(1e-9));
        }
        assertThat(iterated).as("seed %s: both kinds are met", seed).isBetween(20, 280);
    }

    /** A random prior and a measurement of an object drawn from it. */
    private static final class Case {
        final Gaussian prior;
        final PolarMeasurement z;

        Case(SplittableRandom random, boolean withRate, boolean far) {
            double range = far ? random.nextDouble(5000, 40_000) : random.nextDouble(1000, 4000);
            double angle = random.nextDouble(-Math.PI, Math.PI);
            double height = random.nextBoolean() ? 0 : random.nextDouble(-100, 100);
            Station station = new Station(
                    random.nextDouble(-900, 900), random.nextDouble(-900, 900), random.nextDouble(-9, 9),
                    random.nextDouble(-9, 9), height, 30);
            double[][] l = new double[4][4];
            double[] scale = {30, 30, 3, 3};
            for (int i = 0; i < 4; i++) {
                l[i][i] = scale[i] * random.nextDouble(0.3, 1);
                for (int j = 0; j < i; j++) {
                    l[i][j] = scale[i] * random.nextDouble(-0.4, 0.4);
                }
            }
            double[] p = new double[16];
            for (int i = 0; i < 4; i++) {
                for (int j = 0; j < 4; j++) {
                    for (int k = 0; k < 4; k++) {
                        p[4 * i + j] += l[i][k] * l[j][k];
                    }
                }
            }
            double east = station.east() + range * Math.sin(angle);
            double north = station.north() + range * Math.cos(angle);
            prior = new Gaussian(
                    new DMatrix4(east, north, random.nextDouble(-9, 9), random.nextDouble(-9, 9)),
                    new DMatrix4x4(
                            p[0], p[1], p[2], p[3], p[4], p[5], p[6], p[7],
                            p[8], p[9], p[10], p[11], p[12], p[13], p[14], p[15]));
            double sigmaRange = random.nextDouble(5, 20);
            double sigmaAzimuth = Math.toRadians(random.nextDouble(0.1, 1.5));
            double covariance = random.nextDouble(-0.5, 0.5) * sigmaRange * sigmaAzimuth;
            Noise noise = new Noise(
                    sigmaRange * sigmaRange, covariance, sigmaAzimuth * sigmaAzimuth, random.nextDouble(0.05, 1));
            double slant = Math.sqrt(range * range + height * height) + random.nextDouble(-20, 20);
            double rate = withRate ? random.nextDouble(-12, 12) : Double.NaN;
            z = new PolarMeasurement(
                    slant, angle + random.nextDouble(-0.01, 0.01), rate, noise, station, random.nextDouble(0, 2.5));
        }

        boolean isPoor() {
            DensePolarUpdate plain = new DensePolarUpdate(prior, z, 0);
            double range = z.range() - plain.innovation.getEntry(0);
            return range * plain.innovationCovariance.getEntry(1, 1) > 0.4 * Math.sqrt(z.noise().varRange())
                    || z.hasRangeRate() && plain.added[1] > 0.08 * z.noise().varRangeRate();
        }
    }

    /** The posterior's peak, with the range's variance of the second order: no state near it is more probable. */
    @Test
    void theIteratedUpdateEndsAtTheMostProbableState() {
        Gaussian prior = at(0, 20_000, 3000, 5);
        PolarMeasurement z = polar(20_100, 0.3, 5, 0.02);
        Gaussian updated = update(prior, z).updated();
        double best = cost(prior, z, updated.mean.a1, updated.mean.a2);
        for (int i = 0; i < 16; i++) {
            double angle = i * Math.PI / 8;
            double near = cost(prior, z, updated.mean.a1 + Math.sin(angle), updated.mean.a2 + Math.cos(angle));
            assertThat(near).isGreaterThan(best - 1e-4);
        }
        DensePolarUpdate plain = new DensePolarUpdate(prior, z, 0);
        double plainCost = cost(prior, z, plain.updatedMean.getEntry(0), plain.updatedMean.getEntry(1));
        assertThat(plainCost).as("one linear step is far from it").isGreaterThan(best + 1);
    }

    private static double cost(Gaussian prior, PolarMeasurement z, double east, double north) {
        double bent = prior.covariance.a11 / 20_000;
        double range = (z.range() - Math.hypot(east, north)) / Math.sqrt(z.noise().varRange() + 0.5 * bent * bent);
        double azimuth = (z.azimuth() - Math.atan2(east, north)) / Math.sqrt(z.noise().varAzimuth());
        double e = east - prior.mean.a1;
        double n = north - prior.mean.a2;
        return 0.5 * (range * range + azimuth * azimuth + (e * e + n * n) / prior.covariance.a11);
    }

    /** A radar whose cross-range error at a place is as the error along is a position sensor there. */
    @Test
    void tinyAnglesMakeAPositionSensor() {
        SplittableRandom random = new SplittableRandom(75);
        for (int trial = 0; trial < 100; trial++) {
            double range = 100_000;
            double angle = random.nextDouble(-Math.PI, Math.PI);
            double east = range * Math.sin(angle);
            double north = range * Math.cos(angle);
            Gaussian prior = at(east, north, 20, 5);
            double e = east + random.nextDouble(-30, 30);
            double n = north + random.nextDouble(-30, 30);
            PolarMeasurement polar =
                    polar(Math.hypot(e, n), Math.atan2(e, n), 10, 10 / range);
            PositionMeasurement position = new PositionMeasurement(e, n, 100, 0, 100, 0);
            MeasurementUpdate one = update(prior, polar);
            MeasurementUpdate other = update(prior, position);
            assertThat(one.likelihood()).isCloseTo(other.likelihood(), within(2e-3 * other.likelihood()));
            assertThat(one.distanceSquared())
                    .isCloseTo(other.distanceSquared(), within(2e-3 * (1 + other.distanceSquared())));
            assertThat(one.updated().mean.a1).isCloseTo(other.updated().mean.a1, within(0.02));
            assertThat(one.updated().mean.a2).isCloseTo(other.updated().mean.a2, within(0.02));
            assertThat(one.updatedCovariance().a11).isCloseTo(other.updatedCovariance().a11, within(0.1));
        }
    }

    /** Per square metre: summed over the plane of measured places, and for rates over all of them, it is 1. */
    @ParameterizedTest
    @ValueSource(booleans = {false, true})
    void theDensityOverTheMeasuredPlaneIsOne(boolean withRate) {
        Gaussian prior = at(600, 800, 20, 4);
        MeasurementUpdate update = new MeasurementUpdate();
        update.prior(prior);
        Noise noise = new Noise(100, 0, 0.0004, 0.25);
        double sum = 0;
        double rateStep = withRate ? 0.5 : 60;
        for (double rate = withRate ? -29.75 : 0; rate < 30; rate += rateStep) {
            for (double range = 850; range <= 1150; range += 4) {
                for (double azimuth = 0.35; azimuth <= 0.95; azimuth += 0.004) {
                    update.measure(new PolarMeasurement(
                            range, azimuth, withRate ? rate : Double.NaN, noise, Station.at(0, 0, 30), 0));
                    sum += update.likelihood() * range * 4 * 0.004 * (rateStep / 60);
                }
            }
        }
        assertThat(sum).isCloseTo(1, within(0.01));
    }

    /** Near the sensor, and before anything is known of an object, a place is a place. */
    @ParameterizedTest
    @CsvSource({"0, 0, 20", "3, -1, 20", "40, 0, 30", "0, 5000, 2000"})
    void nearTheSensorTheConvertedPlaceIsUsed(double east, double north, double sigma) {
        Gaussian prior = at(east, north, sigma, 5);
        for (double azimuth = -3; azimuth < 3; azimuth += 0.5) {
            for (double range : new double[] {0, 1, 20, 100}) {
                PolarMeasurement z = polar(range, azimuth, 5, 0.01);
                MeasurementUpdate update = update(prior, z);
                MeasurementUpdate place = update(prior, z.converted());
                assertThat(update.distanceSquared()).isFinite().isEqualTo(place.distanceSquared());
                assertThat(update.likelihood()).isEqualTo(place.likelihood());
                assertThat(update.updatedCovariance().a11).isPositive().isEqualTo(place.updatedCovariance().a11);
            }
        }
    }

    @Test
    void aPositionAfterAPolarMeasurementIsAsWithoutIt() {
        Gaussian prior = at(600, 800, 20, 4);
        PositionMeasurement position = PositionMeasurement.at(610, 790, 15);
        MeasurementUpdate mixed = update(prior, position);
        assertThat(mixed.measure(polar(1000, 0.64, 10, 0.01))).isTrue();
        Gaussian polar = mixed.updated();
        assertThat(mixed.measure(position)).isTrue();
        MeasurementUpdate alone = update(prior, position);
        assertThat(mixed.likelihood()).isEqualTo(alone.likelihood());
        assertThat(mixed.updatedCovariance().a11).isEqualTo(alone.updatedCovariance().a11);
        assertThat(polar.covariance.a11).isNotEqualTo(alone.updatedCovariance().a11);
    }

    /** With three numbers a gate leaves out as much as with two; quantiles by an independent library. */
    @ParameterizedTest
    @ValueSource(doubles = {1, 2, 2.447746830680816, 3, 4, 5, 8})
    void aRangeRateDoesNotNarrowTheGate(double gateSigmas) {
        double left = ChiSquaredDistribution.of(2).survivalProbability(gateSigmas * gateSigmas);
        double threshold = new GateRule().ofThree(gateSigmas);
        assertThat(ChiSquaredDistribution.of(3).survivalProbability(threshold)).isCloseTo(left, within(1e-10 * left));
        if (gateSigmas > 2.44 && gateSigmas < 2.45) {
            assertThat(threshold).as("95 %% of chi-square with 3 degrees").isCloseTo(7.814727903251, within(1e-8));
        }
    }

    @Test
    void theGateOfThreeIsUsedWithARangeRateOnly() {
        Gaussian prior = at(0, 1000, 1e-3, 1e-3);
        Noise noise = new Noise(100, 0, 1e-4, 1);
        MeasurementUpdate update = new MeasurementUpdate();
        update.prior(prior);
        double outsideTwo = 10 * Math.sqrt(5 * 5 + 1);
        update.measure(new PolarMeasurement(1000 + outsideTwo, 0, Double.NaN, noise, Station.at(0, 0, 30), 0));
        assertThat(update.isWithin(5)).isFalse();
        update.measure(new PolarMeasurement(1000 + outsideTwo, 0, 0, noise, Station.at(0, 0, 30), 0));
        assertThat(update.distanceSquared()).isBetween(25.0, 28.0);
        assertThat(update.isWithin(5)).isTrue();
    }
}
