package org.sweeptally.filter.count;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import java.util.Random;
import org.hipparchus.complex.Complex;
import org.hipparchus.distribution.discrete.BinomialDistribution;
import org.hipparchus.distribution.discrete.PoissonDistribution;
import org.junit.jupiter.api.Test;

/** Values by hand and by Wang 1993, Statistica Sinica 3:295-312 (from memory); binomials and Poisson by Hipparchus. */
class PoissonBinomialTest {
    private static final long SEED = 1905L;
    private static final double[] A = {.1, .2, .7};
    private static final double[] B = {.95, .9, .6, .3, .05};

    @Test
    void threeProbabilitiesGiveTheNumbersByHand() {
        NumberDistribution n = PoissonBinomial.of(A);
        assertThat(n.bandOffset()).isZero();
        assertThat(n.band()).containsExactly(new double[] {.216, .582, .188, .014}, within(1e-15));
        assertThat(n.mean()).isCloseTo(1, within(1e-15));
        assertThat(n.variance()).isCloseTo(.46, within(1e-15));
    }

    @Test
    void fiveProbabilitiesGiveTheNumbersByHand() {
        NumberDistribution n = PoissonBinomial.of(B);
        assertThat(n.band())
                .containsExactly(new double[] {.00133, .039875, .3022, .47835, .17055, .007695}, within(1e-15));
        assertThat(n.mean()).isCloseTo(2.8, within(1e-15));
        assertThat(n.variance()).isCloseTo(.635, within(1e-15));
        double third = 0;
        for (int k = 0; k <= 5; k++) {
            third += n.probability(k) * (k - 2.8) * (k - 2.8) * (k - 2.8);
        }
        assertThat(third).isCloseTo(-.036, within(1e-14));
    }

    @Test
    void thoseFiveWithPoissonObjectsBesideGiveTheirConvolution() {
        double[] expected = {
            .000891525661227, .027085622100162, .213333644699137, .403823711739843, .259073839313081, .0787284951636962,
            .0148476941926067, .00199155773116699
        };
        NumberDistribution n = PoissonBinomial.of(B);
        PoissonDistribution unseen = new PoissonDistribution(.4);
        for (int k = 0; k < expected.length; k++) {
            double sum = 0;
            for (int i = 0; i <= k; i++) {
                sum += n.probability(i) * unseen.probability(k - i);
            }
            assertThat(sum).isCloseTo(expected[k], within(1e-12));
        }
    }

    /** The characteristic function at the roots of unity and back (Hong 2013, CSDA 59:41-51, from memory). */
    @Test
    void theFourierTransformGivesTheSame() {
        int size = B.length + 1;
        for (int k = 0; k < size; k++) {
            Complex sum = Complex.ZERO;
            for (int l = 0; l < size; l++) {
                Complex turn = new Complex(0, 2 * Math.PI * l / size).exp();
                Complex product = Complex.ONE;
                for (double r : B) {
                    product = product.multiply(turn.multiply(r).add(1 - r));
                }
                sum = sum.add(product.multiply(new Complex(0, -2 * Math.PI * l * k / size).exp()));
            }
            assertThat(PoissonBinomial.of(B).probability(k)).isCloseTo(sum.getReal() / size, within(1e-14));
        }
    }

    @Test
    void equalProbabilitiesGiveBinomials() {
        assertThat(PoissonBinomial.of(filled(200, .5)).probability(100)).isCloseTo(.0563484790092564, within(1e-15));
        assertThat(PoissonBinomial.of(filled(1000, .3)).probability(300)).isCloseTo(.027521003821268, within(1e-13));
        int[] numbers = {1, 10, 200, 1000};
        double[] probabilities = {.001, .3, .5, .99};
        for (int n : numbers) {
            for (double r : probabilities) {
                BinomialDistribution binomial = new BinomialDistribution(n, r);
                NumberDistribution sum = PoissonBinomial.of(filled(n, r));
                for (int k = 0; k <= n; k++) {
                    assertThat(sum.probability(k)).as("%s times %s, at %s", n, r, k)
                            .isCloseTo(binomial.probability(k), within(1.1e-12));
                }
                assertThat(sum.below()).isLessThanOrEqualTo(1.001e-12);
                assertThat(sum.above()).isLessThanOrEqualTo(1.001e-12);
            }
        }
    }

    @Test
    void theBandAgreesWithTheWholeDistributionAndItsTailsWithTheRest() {
        Random random = new Random(SEED);
        for (int trial = 0; trial < 60; trial++) {
            double[] r = probabilities(random, 1 + random.nextInt(1500), trial % 3);
            double[] whole = whole(r);
            NumberDistribution n = PoissonBinomial.of(r);
            double below = 0;
            double above = 0;
            for (int k = 0; k < whole.length; k++) {
                boolean listed = k >= n.bandOffset() && k < n.bandOffset() + n.band().length;
                below += k < n.bandOffset() ? whole[k] : 0;
                above += k >= n.bandOffset() + n.band().length ? whole[k] : 0;
                assertThat(n.probability(k)).as("seed %s, trial %s, at %s", SEED, trial, k)
                        .isCloseTo(listed ? whole[k] : 0, within(1e-12));
            }
            assertThat(n.below()).as("trial " + trial).isCloseTo(below, within(2e-15)).isLessThanOrEqualTo(1.001e-12);
            assertThat(n.above()).as("trial " + trial).isCloseTo(above, within(2e-15)).isLessThanOrEqualTo(1.001e-12);
            assertThat(n.below() + Arrays.stream(n.band()).sum() + n.above()).isCloseTo(1, within(1e-14));
        }
    }

    @Test
    void tenThousandSureObjectsNeedANarrowBand() {
        double[] r = probabilities(new Random(SEED + 1), 10_000, 2);
        NumberDistribution n = PoissonBinomial.of(r);
        double mean = 0;
        for (double each : r) {
            mean += each;
        }
        double sigma = Math.sqrt(n.variance());
        assertThat(n.mean()).isEqualTo(mean);
        assertThat((double) n.band().length).isLessThan(16 * sigma + 4);
        assertThat(n.below() + Arrays.stream(n.band()).sum() + n.above()).isCloseTo(1, within(1e-14));
        double listedMean = 0;
        for (int k = 0; k < n.band().length; k++) {
            listedMean += n.band()[k] * (n.bandOffset() + k);
        }
        assertThat(listedMean).isCloseTo(mean, within(1e-7));
    }

    @Test
    void probabilitiesOfZeroAndOneAreExact() {
        double[] r = {1, 0, .25, 1, 0, 1};
        NumberDistribution n = PoissonBinomial.of(r);
        assertThat(n.bandOffset()).isEqualTo(3);
        assertThat(n.band()).containsExactly(.75, .25);
        assertThat(PoissonBinomial.of(filled(5000, 1)).band()).containsExactly(1);
        assertThat(PoissonBinomial.of(filled(5000, 1)).bandOffset()).isEqualTo(5000);
        assertThat(PoissonBinomial.of(new double[0]).band()).containsExactly(1);
        assertThat(PoissonBinomial.of(r, 3)).isEqualTo(PoissonBinomial.of(new double[] {1, 0, .25}));
    }

    /** Newton's inequalities; Darroch 1964, Ann. Math. Stat. 35:1317; Hoeffding 1956 (all from memory). */
    @Test
    void theDistributionIsLogConcaveWithItsModeAtTheMeanAndLessSpreadThanABinomial() {
        Random random = new Random(SEED + 2);
        for (int trial = 0; trial < 200; trial++) {
            int count = 2 + random.nextInt(40);
            double[] r = probabilities(random, count, trial % 3);
            NumberDistribution n = PoissonBinomial.of(r);
            int mode = 0;
            for (int k = n.bandOffset() + 1; k < n.bandOffset() + n.band().length - 1; k++) {
                double newton = n.probability(k - 1) * n.probability(k + 1) * (1 + 1.0 / k) * (1 + 1.0 / (count - k));
                double square = n.probability(k) * n.probability(k);
                assertThat(square).as("seed %s, trial %s", SEED + 2, trial).isGreaterThanOrEqualTo(newton * (1 - 1e-9));
            }
            for (int k = 0; k <= count; k++) {
                mode = n.probability(k) > n.probability(mode) ? k : mode;
            }
            assertThat(Math.abs(mode - n.mean())).isLessThan(1);
            double average = n.mean() / count;
            assertThat(n.variance()).isLessThanOrEqualTo(count * average * (1 - average) * (1 + 1e-12));
        }
    }

    @Test
    void theOrderOfTheProbabilitiesDoesNotMatter() {
        Random random = new Random(SEED + 3);
        for (int trial = 0; trial < 40; trial++) {
            double[] r = probabilities(random, 300, trial % 3);
            double[] other = r.clone();
            for (int i = other.length - 1; i > 0; i--) {
                int j = random.nextInt(i + 1);
                double kept = other[i];
                other[i] = other[j];
                other[j] = kept;
            }
            NumberDistribution n = PoissonBinomial.of(r);
            NumberDistribution permuted = PoissonBinomial.of(other);
            for (int k = 0; k <= r.length; k++) {
                assertThat(permuted.probability(k)).as("seed %s, trial %s", SEED + 3, trial)
                        .isCloseTo(n.probability(k), within(1e-12));
            }
        }
    }

    @Test
    void whatIsNoProbabilityIsRefused() {
        assertThatThrownBy(() -> PoissonBinomial.of(new double[] {.5, 1.5})).hasMessageContaining("1 is 1.5");
        assertThatThrownBy(() -> PoissonBinomial.of(new double[] {Double.NaN})).hasMessageContaining("NaN");
    }

    static double[] filled(int n, double value) {
        double[] array = new double[n];
        Arrays.fill(array, value);
        return array;
    }

    /** All in the middle, all near 0, or most near 1 and some anywhere. */
    private static double[] probabilities(Random random, int n, int kind) {
        double[] r = new double[n];
        for (int i = 0; i < n; i++) {
            double u = random.nextDouble();
            r[i] = kind == 0 ? u : kind == 1 ? .05 * u : random.nextDouble() < .9 ? 1 - .01 * u : u;
        }
        return r;
    }

    private static double[] whole(double[] r) {
        double[] p = new double[r.length + 1];
        p[0] = 1;
        for (int i = 0; i < r.length; i++) {
            for (int k = i + 1; k > 0; k--) {
                p[k] = p[k] * (1 - r[i]) + p[k - 1] * r[i];
            }
            p[0] *= 1 - r[i];
        }
        return p;
    }
}
