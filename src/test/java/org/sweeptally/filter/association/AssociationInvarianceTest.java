package org.sweeptally.filter.association;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.Random;
import org.junit.jupiter.api.Test;
import org.sweeptally.filter.association.DenseAssociation.Answer;

/** What must not change the marginals: factors of rows and columns, their order, their roles. */
class AssociationInvarianceTest {
    private static final long SEED = 7310501L;
    private static final int TRIALS = 300;

    @Test
    void factorsOfRowsAndColumnsLeaveTheMarginals() {
        Random random = new Random(SEED);
        for (int trial = 0; trial < TRIALS; trial++) {
            DenseAssociation problem = sample(random);
            double[] rowFactor = factors(random, problem.rows());
            double[] columnFactor = factors(random, problem.columns());
            Answer plain = problem.solve(DenseAssociation.EXACT);
            Answer scaled = problem.scaled(rowFactor, columnFactor).solve(DenseAssociation.EXACT);
            requireSame(plain, scaled, identity(problem.rows()), identity(problem.columns()), where(trial));
            double logFactors = 0;
            for (double factor : rowFactor) {
                logFactors += StrictMath.log(factor);
            }
            for (double factor : columnFactor) {
                logFactors += StrictMath.log(factor);
            }
            assertThat(scaled.logWeight() - logFactors).isCloseTo(plain.logWeight(), within(1e-9));
        }
    }

    @Test
    void theOrderOfRowsAndColumnsLeavesTheMarginals() {
        Random random = new Random(SEED + 1);
        for (int trial = 0; trial < TRIALS; trial++) {
            DenseAssociation problem = sample(random);
            int[] rowOrder = DenseAssociation.shuffledOrder(random, problem.rows());
            int[] columnOrder = DenseAssociation.shuffledOrder(random, problem.columns());
            Answer plain = problem.solve(DenseAssociation.EXACT);
            Answer permuted = problem.permuted(rowOrder, columnOrder).solve(DenseAssociation.EXACT);
            requireSame(plain, permuted, rowOrder, columnOrder, where(trial));
            assertThat(permuted.logWeight()).isCloseTo(plain.logWeight(), within(1e-11));
        }
    }

    @Test
    void exchangingTheRolesOfRowsAndColumnsLeavesTheMarginals() {
        Random random = new Random(SEED + 2);
        for (int trial = 0; trial < TRIALS; trial++) {
            DenseAssociation problem = sample(random);
            Answer plain = problem.solve(DenseAssociation.EXACT);
            Answer turned = problem.turned().solve(DenseAssociation.EXACT);
            assertThat(turned.missed()).containsExactly(plain.nobody(), within(1e-12));
            assertThat(turned.nobody()).containsExactly(plain.missed(), within(1e-12));
            assertThat(turned.logWeight()).isCloseTo(plain.logWeight(), within(1e-11));
            for (int i = 0; i < problem.rows(); i++) {
                for (int j = 0; j < problem.columns(); j++) {
                    assertThat(turned.p()[j][i]).isCloseTo(plain.p()[i][j], within(1e-12));
                }
            }
        }
    }

    @Test
    void aReusedSolverAnswersToTheLastBitAsANewOne() {
        Random random = new Random(SEED + 3);
        Association reused = new Association();
        for (int trial = 0; trial < TRIALS; trial++) {
            DenseAssociation problem = sample(random);
            AssociationBounds bounds = trial % 3 == 0 ? DenseAssociation.PROPAGATED : DenseAssociation.EXACT;
            AssociationProblem sparse = problem.problem();
            Answer again = problem.spread(sparse, reused.solve(sparse, bounds));
            Answer fresh = problem.solve(bounds);
            assertThat(again.p()).isDeepEqualTo(fresh.p());
            assertThat(again.missed()).isEqualTo(fresh.missed());
            assertThat(again.nobody()).isEqualTo(fresh.nobody());
            assertThat(again.logWeight()).isEqualTo(fresh.logWeight());
        }
    }

    /** Ten to twenty rows and columns, sparse: several clusters, frontiers of several columns. */
    private static DenseAssociation sample(Random random) {
        int rows = 1 + random.nextInt(20);
        int columns = 1 + random.nextInt(20);
        return DenseAssociation.random(random, rows, columns, Math.min(.6, 2.5 / columns), .05);
    }

    private static double[] factors(Random random, int n) {
        double[] factors = new double[n];
        for (int k = 0; k < n; k++) {
            factors[k] = StrictMath.pow(10, 100 * (2 * random.nextDouble() - 1));
        }
        return factors;
    }

    private static int[] identity(int n) {
        int[] order = new int[n];
        java.util.Arrays.setAll(order, k -> k);
        return order;
    }

    private static void requireSame(Answer plain, Answer other, int[] rowOrder, int[] columnOrder, String where) {
        for (int i = 0; i < rowOrder.length; i++) {
            assertThat(other.missed()[i]).as(where).isCloseTo(plain.missed()[rowOrder[i]], within(1e-12));
            for (int j = 0; j < columnOrder.length; j++) {
                assertThat(other.p()[i][j]).as(where)
                        .isCloseTo(plain.p()[rowOrder[i]][columnOrder[j]], within(1e-12));
            }
        }
        for (int j = 0; j < columnOrder.length; j++) {
            assertThat(other.nobody()[j]).as(where).isCloseTo(plain.nobody()[columnOrder[j]], within(1e-12));
        }
    }

    private static String where(int trial) {
        return "seed from " + SEED + ", trial " + trial;
    }
}
