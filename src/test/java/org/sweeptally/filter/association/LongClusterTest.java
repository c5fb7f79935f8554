package org.sweeptally.filter.association;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.sweeptally.filter.association.DenseAssociation.Answer;

/** Clusters beyond enumeration: long bands of rows, each sharing columns with its neighbours only. */
class LongClusterTest {
    private static final long SEED = 555L;

    /** Row i has the columns i to i + bandwidth, in an order shuffled afterwards. */
    private static DenseAssociation band(Random random, int rows, int bandwidth) {
        DenseAssociation full = DenseAssociation.random(random, rows, rows + bandwidth, 1, 0);
        for (int i = 0; i < rows; i++) {
            for (int j = 0; j < rows + bandwidth; j++) {
                full.w()[i][j] *= j >= i && j <= i + bandwidth ? 1 : 0;
            }
        }
        return full.permuted(DenseAssociation.shuffledOrder(random, rows),
                DenseAssociation.shuffledOrder(random, rows + bandwidth));
    }

    @Test
    void theFrontierOfAShuffledBandStaysAsNarrowAsTheBand() {
        Random random = new Random(SEED);
        for (int bandwidth = 1; bandwidth <= 6; bandwidth++) {
            for (int rows = 20; rows <= 100; rows += 40) {
                AssociationCounts counts = band(random, rows, bandwidth).solve(DenseAssociation.EXACT).counts();
                assertThat(counts.exact()).as("band %s of %s rows", bandwidth, rows).isEqualTo(1);
                assertThat(counts.widestFrontier()).as("band %s of %s rows", bandwidth, rows)
                        .isBetween(1, bandwidth + 1);
            }
        }
    }

    /** Rows and columns sum to 1 although they are summed apart, over tables of 1e100 and more in range. */
    @Test
    void longBandsHaveDistributions() {
        Random random = new Random(SEED + 1);
        for (int trial = 0; trial < 30; trial++) {
            DenseAssociation problem = band(random, 40 + random.nextInt(40), 1 + random.nextInt(6));
            EnumeratedComparisonTest.requireDistributions(problem.solve(DenseAssociation.EXACT), where(trial));
        }
    }

    /** The derivative of ln Z by the logarithm of a weight is the probability of what bears it. */
    @Test
    void marginalsAreTheDerivativesOfTheLogWeight() {
        Random random = new Random(SEED + 2);
        DenseAssociation problem = band(random, 30, 3);
        Answer answer = problem.solve(DenseAssociation.EXACT);
        for (int i = 0; i < problem.rows(); i++) {
            assertThat(slope(problem, problem.d(), i)).isCloseTo(answer.missed()[i], within(1e-7));
            for (int j = 0; j < problem.columns(); j++) {
                if (problem.w()[i][j] > 0) {
                    assertThat(slope(problem, problem.w()[i], j)).isCloseTo(answer.p()[i][j], within(1e-7));
                }
            }
        }
        for (int j = 0; j < problem.columns(); j++) {
            assertThat(slope(problem, problem.c(), j)).isCloseTo(answer.nobody()[j], within(1e-7));
        }
    }

    private static double slope(DenseAssociation problem, double[] weights, int k) {
        double h = 1e-4;
        double weight = weights[k];
        weights[k] = weight * StrictMath.exp(h);
        double above = problem.solve(DenseAssociation.EXACT).logWeight();
        weights[k] = weight * StrictMath.exp(-h);
        double below = problem.solve(DenseAssociation.EXACT).logWeight();
        weights[k] = weight;
        return (above - below) / (2 * h);
    }

    /** A path of n edges has F(n + 2) matchings, the Fibonacci numbers (OEIS A000045): 300 rows are past any double. */
    @Test
    void aLongPathCountsItsMatchings() {
        int rows = 300;
        AssociationProblem path = new AssociationProblem();
        for (int j = 0; j <= rows; j++) {
            path.addColumn(1);
        }
        for (int i = 0; i < rows; i++) {
            path.addRow(1);
            path.addPair(i, 1);
            path.addPair(i + 1, 1);
        }
        java.math.BigInteger[] fibonacci = new java.math.BigInteger[2 * rows + 3];
        fibonacci[0] = java.math.BigInteger.ZERO;
        fibonacci[1] = java.math.BigInteger.ONE;
        for (int n = 2; n < fibonacci.length; n++) {
            fibonacci[n] = fibonacci[n - 1].add(fibonacci[n - 2]);
        }
        AssociationMarginals answer = new Association().solve(path, DenseAssociation.EXACT);
        java.math.BigInteger count = fibonacci[2 * rows + 2];
        int shift = count.bitLength() - 900;
        double expected = shift <= 0 ? StrictMath.log(count.doubleValue())
                : StrictMath.log(count.shiftRight(shift).doubleValue()) + shift * StrictMath.log(2);
        assertThat(answer.logWeight()).isCloseTo(expected, within(1e-11));
        java.math.BigDecimal first = new java.math.BigDecimal(fibonacci[2 * rows])
                .divide(new java.math.BigDecimal(count), java.math.MathContext.DECIMAL64);
        assertThat(answer.pair(0)).isCloseTo(first.doubleValue(), within(1e-13));
        assertThat(answer.counts().widestFrontier()).isEqualTo(2);
    }

    /** A cluster cheap by columns only: few columns, many rows, each row with all of them. */
    @Test
    void manyRowsOnFewColumnsAreSolvedByWhicheverIsCheaper() {
        double[][] w = new double[40][4];
        for (double[] row : w) {
            Arrays.fill(row, 1);
        }
        DenseAssociation tall = DenseAssociation.ofRatios(w);
        Answer answer = tall.solve(new AssociationBounds(20_000, 1));
        Answer wide = tall.turned().solve(new AssociationBounds(20_000, 1));
        double z = 0;
        double term = 1;
        for (int k = 0; k <= 4; k++) {
            z += term;
            term *= (40 - k) * (4 - k) / (k + 1.0);
        }
        assertThat(answer.counts().exact()).isEqualTo(1);
        assertThat(wide.counts().exact()).isEqualTo(1);
        assertThat(StrictMath.exp(answer.logWeight()) / z).isCloseTo(1, within(1e-13));
        assertThat(wide.missed()).containsExactly(answer.nobody(), within(1e-14));
    }

    private static String where(int trial) {
        return "seed from " + SEED + ", trial " + trial;
    }
}
