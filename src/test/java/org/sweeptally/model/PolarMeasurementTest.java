package org.sweeptally.model;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.sweeptally.model.PolarMeasurement.Noise;
import org.sweeptally.model.PolarMeasurement.Station;

/**
 * The unbiased conversion of Longbin, Xiaoquan, Yizhou, Kang and Bar-Shalom 1998, IEEE Transactions on Aerospace and
 * Electronic Systems 34(3):1023-1027: multiplicative factor exp(sigma^2 / 2), covariance given the measurement. Its
 * angles are counter-clockwise from the first axis; measured clockwise from north, its first axis is north and its
 * second east.
 */
class PolarMeasurementTest {

    private static PolarMeasurement polar(double range, double degrees, double sigmaRange, double sigmaDegrees) {
        double azimuth = StrictMath.toRadians(sigmaDegrees);
        return new PolarMeasurement(
                range,
                StrictMath.toRadians(degrees),
                Double.NaN,
                new Noise(sigmaRange * sigmaRange, 0, azimuth * azimuth, 0),
                Station.at(0, 0, 30),
                0);
    }

    @ParameterizedTest
    @CsvSource({
        "0.1, 1.00000152308826, .1523085939",
        "0.5, 1.00003807790242, 3.807645255",
        "1, 1.00015232030945, 15.22971115",
        "1.5, 1.00034275332376, 34.26358842",
        "2, 1.00060942046081, 60.90492937",
        "5, 1.00381497631449, 380.0477583"
    })
    void aConvertedPlaceLiesFartherOutByTheBiasOfUncertainAngles(double sigmaDegrees, double factor, double bias) {
        assertThat(polar(1, 0, 0.001, sigmaDegrees).north()).isCloseTo(factor, within(1e-12));
        double lambda = 1 / polar(1, 0, 0.001, sigmaDegrees).north();
        assertThat(100_000 * (1 - lambda)).isCloseTo(bias, within(1e-5));
    }

    /** Mean of the converted place over the azimuth's errors: r cos(theta), where the plain conversion gives less. */
    @Test
    void theConvertedPlaceIsUnbiased() {
        double sum = 0;
        double plain = 0;
        double weights = 0;
        for (int i = -8000; i <= 8000; i++) {
            double u = i / 1000.0;
            double weight = Math.exp(-0.5 * u * u);
            double degrees = StrictMath.toDegrees(0.3) + 5 * u;
            sum += weight * polar(1000, degrees, 10, 5).north();
            plain += weight * 1000 * Math.cos(Math.toRadians(degrees));
            weights += weight;
        }
        assertThat(sum / weights).isCloseTo(955.3364891256, within(1e-9));
        assertThat(plain / weights).isCloseTo(951.7057542149, within(1e-9));
    }

    @ParameterizedTest
    @CsvSource({
        "10000, 30, 50, 1, 8661.57317042, 5000.76160155, 9498.17353024, 23468.2085082, -12098.4051827",
        "100000, 45, 50, 1.5, 70734.9144386, 70734.9144386, 3429370.63682, 3429370.63682, -3419827.58291",
        "1000, 0, 10, 5, 1003.81497631, 0, 186.016943299, 7558.48972996, 0",
        "70000, 120, 20, .5, -35001.3327266, 60624.0866151, 279956.613915, 93613.9344244, 161377.494248",
        "1000, 17.188733853924695, 10, 5, 958.981, 296.647, 829.8711562376, 6914.6355170221, -2081.4056346492"
    })
    void itsCovarianceIsThatGivenTheMeasurement(
            double range,
            double degrees,
            double sigmaRange,
            double sigmaDegrees,
            double first,
            double second,
            double r11,
            double r22,
            double r12) {
        PolarMeasurement z = polar(range, degrees, sigmaRange, sigmaDegrees);
        double tolerance = range == 1000 && degrees > 0 ? 1e-3 : 1e-9 * range;
        assertThat(z.north()).isCloseTo(first, within(tolerance));
        assertThat(z.east()).isCloseTo(second, within(tolerance));
        double scale = 1e-9 * (r11 + r22);
        assertThat(z.varNorth()).isCloseTo(r11, within(scale));
        assertThat(z.varEast()).isCloseTo(r22, within(scale));
        assertThat(z.covEastNorth()).isCloseTo(r12, within(scale));
    }

    /**
     * Mean normalised squared error of a converted place given the truth, by quadrature: 2 would be consistent. The
     * plain conversion with its linearised covariance is what the rule r sigma^2 / sigma_r < 0.4 warns of (Lerro and
     * Bar-Shalom 1993, IEEE Transactions on Aerospace and Electronic Systems 29(3), from memory); the unbiased one
     * holds beyond.
     */
    @ParameterizedTest
    @CsvSource({
        ".05, 2.0018, 2.0017", ".1, 2.0070, 2.0014", ".2, 2.0293, 2.0012", ".4, 2.1193, 2.0007", "1, 2.7489, 1.9999",
        "2, 4.9976, 1.9999", "4, 13.992, 1.9999"
    })
    void theUnbiasedConversionStaysConsistentWhereTheLinearisedOneFails(double ratio, double plain, double unbiased) {
        double sigma = Math.toRadians(1.5);
        double range = ratio * 50 / (sigma * sigma);
        double sumPlain = 0;
        double sumUnbiased = 0;
        double weights = 0;
        for (int i = -120; i <= 120; i++) {
            for (int j = -120; j <= 120; j++) {
                double u = i / 20.0;
                double v = j / 20.0;
                double weight = Math.exp(-0.5 * (u * u + v * v));
                weights += weight;
                sumUnbiased += weight * squaredError(polar(range + 50 * u, 1.5 * v, 50, 1.5), range);
                sumPlain += weight * squaredErrorOfPlain(range + 50 * u, sigma * v, 50, sigma, range);
            }
        }
        assertThat(sumUnbiased / weights).isCloseTo(unbiased, within(1e-3));
        assertThat(sumPlain / weights).isCloseTo(plain, within(2e-3));
    }

    /** Of the object due north at a range. */
    private static double squaredError(PolarMeasurement z, double range) {
        return squaredError(z.east(), z.north() - range, z.varEast(), z.covEastNorth(), z.varNorth());
    }

    private static double squaredErrorOfPlain(double r, double angle, double sigmaRange, double sigma, double range) {
        double s = Math.sin(angle);
        double c = Math.cos(angle);
        double along = sigmaRange * sigmaRange;
        double across = r * r * sigma * sigma;
        return squaredError(
                r * s,
                r * c - range,
                s * s * along + c * c * across,
                s * c * (along - across),
                c * c * along + s * s * across);
    }

    private static double squaredError(double e, double n, double ee, double en, double nn) {
        return (nn * e * e - 2 * en * e * n + ee * n * n) / (ee * nn - en * en);
    }

    @Test
    void aSlantRangeIsTakenToTheGround() {
        Station high = new Station(100, 200, 0, 0, -300, 30);
        PolarMeasurement z = new PolarMeasurement(500, 0, Double.NaN, new Noise(4, 0, 1e-12, 0), high, 0);
        assertThat(z.east()).isCloseTo(100, within(1e-3));
        assertThat(z.north()).isCloseTo(200 + 400, within(1e-3));
        // dg = s / g ds: 5 / 4 times 2 m, a little less since the square of the range is uncertain too.
        assertThat(z.varNorth()).isCloseTo(6.25, within(0.05));
    }

    @Test
    void belowTheSensorAPlaceIsUncertainAndNotANumber() {
        Station high = new Station(0, 0, 0, 0, -300, 30);
        for (double range : new double[] {0, 295, 300, 300.001}) {
            PolarMeasurement z = new PolarMeasurement(range, 1, Double.NaN, new Noise(4, 0, 1e-4, 0), high, 0);
            assertThat(z.east() + z.north()).isFinite();
            assertThat(z.varEast() * z.varNorth() - z.covEastNorth() * z.covEastNorth()).isFinite().isPositive();
            assertThat(Math.sqrt(z.varEast() + z.varNorth())).isLessThan(40);
        }
    }

    /** To the first order: J R J' with J by central differences. */
    @Test
    void aCovarianceOfRangeAndAzimuthIsTurnedWithThem() {
        Noise noise = new Noise(25, 0.001, 1e-6, 0);
        PolarMeasurement z =
                new PolarMeasurement(4000, 1.1, Double.NaN, noise, Station.at(0, 0, 30), 0);
        double[] byRange = {Math.sin(1.1), Math.cos(1.1)};
        double[] byAzimuth = {4000 * Math.cos(1.1), -4000 * Math.sin(1.1)};
        double[][] expected = new double[2][2];
        for (int i = 0; i < 2; i++) {
            for (int j = 0; j < 2; j++) {
                expected[i][j] = 25 * byRange[i] * byRange[j]
                        + 1e-6 * byAzimuth[i] * byAzimuth[j]
                        + 0.001 * (byRange[i] * byAzimuth[j] + byAzimuth[i] * byRange[j]);
            }
        }
        assertThat(z.varEast()).isCloseTo(expected[0][0], within(1e-3));
        assertThat(z.covEastNorth()).isCloseTo(expected[0][1], within(1e-3));
        assertThat(z.varNorth()).isCloseTo(expected[1][1], within(1e-3));
    }
}
