package org.sweeptally.filter.count;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.stream.Stream;
import org.hipparchus.distribution.discrete.PoissonDistribution;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;

/**
 * How far a Poisson count is from the count of components that it replaces: what recycling weak components costs.
 * Le Cam 1960, Pacific J. Math. 10:1181 (from memory); Barbour and Hall 1984, Math. Proc. Camb. Phil. Soc. 95:473-480;
 * Kontoyiannis, Harremoes and Johnson 2005, IEEE Trans. Inf. Theory 51(2):466-472.
 */
class PoissonApproximationTest {
    private record Row(double[] r, double upper, double distance, double lower) {}

    static Stream<Row> barbourAndHall() {
        return Stream.of(
                new Row(PoissonBinomialTest.filled(1, .1), .0095162581964, .009516258196404, .0003125),
                new Row(PoissonBinomialTest.filled(5, .1), .0393469340287, .024784670143683, .0015625),
                new Row(PoissonBinomialTest.filled(10, .1), .0632120558829, .029311571742837, .003125),
                new Row(PoissonBinomialTest.filled(50, .1), .0993262053001, .025958599812783, .003125),
                new Row(PoissonBinomialTest.filled(100, .01), .00632120558829, .0027752947174267, .0003125),
                new Row(PoissonBinomialTest.filled(10, .5), .4966310265, .17183508936737, .015625),
                new Row(PoissonBinomialTest.filled(10, .9), .899888931176, .54771781757238, .028125),
                new Row(new double[] {.1, .2, .7}, .341345101767, .21818083824284, .016875),
                new Row(new double[] {.95, .9, .6, .3, .05}, .726195076577, .33450218099699, .024162946));
    }

    @ParameterizedTest
    @MethodSource("barbourAndHall")
    void theTotalVariationDistanceLiesBetweenTheBoundsOfBarbourAndHall(Row row) {
        double squares = 0;
        for (double r : row.r()) {
            squares += r * r;
        }
        double lambda = PoissonBinomial.of(row.r()).mean();
        double distance = distance(row.r());
        assertThat(distance).isCloseTo(row.distance(), within(1e-11));
        double upper = (1 - StrictMath.exp(-lambda)) / lambda * squares;
        assertThat(upper).isCloseTo(row.upper(), within(1e-9));
        assertThat(distance).isBetween(row.lower() * (1 - 1e-6), upper * (1 + 1e-12)).isLessThanOrEqualTo(squares);
    }

    /** One component of r: r (1 - exp(-r)) and r + (1 - r) ln(1 - r), and a variance too large by r squared. */
    @Test
    void recyclingOneComponentCostsWhatTheFormulaSays() {
        double[] rs = {.001, .01, .05, .1, .2, .5};
        double[] distances = {
            9.9950016662501e-7, 9.9501662508319e-5, .0024385287749643,
            .009516258196404, .036253849384404, .19673467014368
        };
        double[] divergences = {
            5.0016675005e-7, 5.01675050336e-5, .001271370331827, .0051755359079563, .021485158948632, .15342640972003
        };
        for (int k = 0; k < rs.length; k++) {
            double r = rs[k];
            assertThat(distance(new double[] {r})).isCloseTo(distances[k], within(1e-12));
            assertThat(divergence(new double[] {r})).isCloseTo(divergences[k], within(1e-12));
            assertThat(r - PoissonBinomial.of(new double[] {r}).variance()).isCloseTo(r * r, within(1e-16));
        }
    }

    @Test
    void recyclingManyStaysBelowTheBoundOfKontoyiannis() {
        int[] counts = {5, 10, 50, 100, 10};
        double[] rs = {.1, .1, .1, .01, .5};
        double[] divergences = {.0028901503945, .0027784334642, .0026989853, 2.52525295929e-5, .101304018944};
        for (int k = 0; k < counts.length; k++) {
            double[] r = PoissonBinomialTest.filled(counts[k], rs[k]);
            double divergence = divergence(r);
            assertThat(divergence).isCloseTo(divergences[k], within(2e-10));
            assertThat(divergence).isLessThanOrEqualTo(rs[k] * rs[k] / (1 - rs[k]));
            assertThat(distance(r)).isLessThanOrEqualTo(Math.sqrt(divergence / 2));
        }
    }

    private static double distance(double[] r) {
        NumberDistribution n = PoissonBinomial.of(r);
        PoissonDistribution poisson = new PoissonDistribution(n.mean());
        double sum = 0;
        for (int k = 0; k < 400; k++) {
            sum += Math.abs(n.probability(k) - poisson.probability(k));
        }
        return sum / 2;
    }

    private static double divergence(double[] r) {
        NumberDistribution n = PoissonBinomial.of(r);
        PoissonDistribution poisson = new PoissonDistribution(n.mean());
        double sum = 0;
        for (int k = n.bandOffset(); k < n.bandOffset() + n.band().length; k++) {
            sum += n.probability(k) * StrictMath.log(n.probability(k) / poisson.probability(k));
        }
        return sum;
    }
}
