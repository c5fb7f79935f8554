package org.sweeptally.filter.association;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Random;
import org.junit.jupiter.api.Test;
import org.sweeptally.filter.association.DenseAssociation.Answer;

/** The fast exact method beside {@link EnumeratedAssociation}: every probability to 1e-12 of itself. */
class EnumeratedComparisonTest {
    private static final double RELATIVE = 1e-12;

    @Test
    void denseProblemsAgreeWithTheEnumeration() {
        compareMany(20310501L, 1500, 1.0, 0);
    }

    @Test
    void sparseProblemsAgreeWithTheEnumeration() {
        compareMany(20310502L, 3000, .4, 0);
    }

    @Test
    void problemsWithWeightsOfZeroAgreeWithTheEnumeration() {
        compareMany(20310503L, 3000, .5, .3);
    }

    /** All 2^6 choices of which pairs exist, with all 2^5 of which missed and nobody's weights are zero. */
    @Test
    void everyPatternOfTwoRowsAndThreeColumnsAgrees() {
        int possible = 0;
        for (int pattern = 0; pattern < 1 << 11; pattern++) {
            double[][] w = new double[2][3];
            double[] d = new double[2];
            double[] c = new double[3];
            for (int k = 0; k < 6; k++) {
                w[k / 3][k % 3] = (pattern >> k & 1) * (k + .5);
            }
            for (int k = 0; k < 2; k++) {
                d[k] = (pattern >> 6 + k & 1) * (k + .25);
            }
            for (int k = 0; k < 3; k++) {
                c[k] = (pattern >> 8 + k & 1) * (k + .125);
            }
            possible += compare(new DenseAssociation(w, d, c), "pattern " + pattern) ? 1 : 0;
        }
        assertThat(possible).isBetween(1, (1 << 11) - 1);
    }

    private static void compareMany(long seed, int trials, double density, double zeroShare) {
        Random random = new Random(seed);
        int possible = 0;
        for (int trial = 0; trial < trials; trial++) {
            int rows = 1 + random.nextInt(6);
            int columns = 1 + random.nextInt(6);
            DenseAssociation problem = DenseAssociation.random(random, rows, columns, density, zeroShare);
            possible += compare(problem, "seed " + seed + ", trial " + trial) ? 1 : 0;
        }
        assertThat(possible).isGreaterThan(trials / 4);
    }

    /** Compares, and returns whether the problem is possible at all. */
    private static boolean compare(DenseAssociation problem, String where) {
        Answer fast = problem.solve(DenseAssociation.EXACT);
        Answer slow = EnumeratedAssociation.solve(problem);
        boolean possible = slow.logWeight() != Double.NEGATIVE_INFINITY;
        assertThat(fast.counts().impossible() == 0).as(where).isEqualTo(possible);
        assertThat(fast.counts().propagated()).as(where).isZero();
        if (!possible) {
            assertThat(fast.logWeight()).as(where).isEqualTo(slow.logWeight());
            requireDistributions(fast, where);
            return false;
        }
        assertThat(Math.abs(fast.logWeight() - slow.logWeight())).as(where).isLessThan(RELATIVE * 10);
        requireSame(fast.missed(), slow.missed(), where + ", missed");
        requireSame(fast.nobody(), slow.nobody(), where + ", nobody");
        for (int i = 0; i < problem.rows(); i++) {
            requireSame(fast.p()[i], slow.p()[i], where + ", row " + i);
        }
        return true;
    }

    private static void requireSame(double[] fast, double[] slow, String where) {
        for (int k = 0; k < slow.length; k++) {
            assertThat(Math.abs(fast[k] - slow[k])).as("%s: %s beside %s", where, fast[k], slow[k])
                    .isLessThanOrEqualTo(RELATIVE * slow[k]);
        }
    }

    static void requireDistributions(Answer answer, String where) {
        double[] columnSums = answer.nobody().clone();
        for (int i = 0; i < answer.p().length; i++) {
            double rowSum = answer.missed()[i];
            for (int j = 0; j < columnSums.length; j++) {
                assertThat(answer.p()[i][j]).as(where).isBetween(0.0, 1 + 1e-12);
                rowSum += answer.p()[i][j];
                columnSums[j] += answer.p()[i][j];
            }
            assertThat(Math.abs(rowSum - 1)).as(where + ", row " + i).isLessThan(1e-12);
        }
        for (int j = 0; j < columnSums.length; j++) {
            assertThat(Math.abs(columnSums[j] - 1)).as(where + ", column " + j).isLessThan(1e-12);
        }
    }
}
