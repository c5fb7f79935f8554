package org.sweeptally.filter.association;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.sweeptally.filter.association.DenseAssociation.Answer;

/** Belief propagation of Williams and Lau 2014, IEEE TAES 50(4):2942-2959: what holds of it, and how far it errs. */
class PropagatedAssociationTest {
    private static final long SEED = 40501L;

    /** Two rows, two columns, all W equal: the fixed point by hand is 1 / sqrt(1 + 4 W) missed. */
    @Test
    void twoEqualRowsAreMissedFarTooOftenByPropagationAndExactlyByEnumeration() {
        double[] ratios = {1, 10, 100, 1000, 1e6};
        double[] tooMuch = {1.04, 1.79, 5.07, 15.8, 500};
        for (int k = 0; k < ratios.length; k++) {
            double w = ratios[k];
            DenseAssociation problem = DenseAssociation.ofRatios(new double[] {w, w}, new double[] {w, w});
            double exact = problem.solve(DenseAssociation.EXACT).missed()[0];
            double propagated = problem.propagate(1_000_000).missed()[0];
            assertThat(exact / ((1 + 2 * w) / (1 + 4 * w + 2 * w * w))).isCloseTo(1, within(1e-13));
            assertThat(propagated * Math.sqrt(1 + 4 * w)).isCloseTo(1, within(1e-6));
            assertThat(propagated / exact).isCloseTo(tooMuch[k], within(.01 * tooMuch[k]));
        }
    }

    @Test
    void forestsAreExact() {
        Random random = new Random(SEED);
        for (int trial = 0; trial < 200; trial++) {
            DenseAssociation forest = tree(random, 2 + random.nextInt(5), 1 + random.nextInt(5));
            Answer exact = forest.solve(DenseAssociation.EXACT);
            Answer propagated = forest.propagate(10_000);
            assertThat(greatestDifference(exact, propagated)).as(where(trial)).isLessThan(1e-13);
            assertThat(propagated.logWeight()).as(where(trial)).isCloseTo(exact.logWeight(), within(1e-12));
        }
    }

    /** The Bethe value lies below the permanent (Gurvits 2011, Vontobel 2013, Ruozzi 2012, from memory). */
    @Test
    void theBetheValueNeverExceedsTheWeight() {
        Random random = new Random(SEED + 1);
        for (int trial = 0; trial < 300; trial++) {
            DenseAssociation problem =
                    DenseAssociation.random(random, 2 + random.nextInt(4), 2 + random.nextInt(4), 1, 0);
            double gap = problem.solve(DenseAssociation.EXACT).logWeight() - problem.propagate(100_000).logWeight();
            assertThat(gap).as(where(trial)).isGreaterThan(-1e-12);
        }
        DenseAssociation ones = DenseAssociation.ofRatios(new double[] {1, 1}, new double[] {1, 1});
        assertThat(StrictMath.exp(ones.propagate(1000).logWeight()) / 7).isCloseTo(.979157423749955, within(1e-12));
    }

    /** ln W normal with 1.5: median error near 0.0134, 95 % near 0.0413, none above 0.09 (computed apart, once). */
    @Test
    void itsErrorOnDenseProblemsIsAFewHundredths() {
        Random random = new Random(SEED + 2);
        double[] errors = new double[300];
        for (int trial = 0; trial < errors.length; trial++) {
            double[][] w = new double[2 + random.nextInt(4)][2 + random.nextInt(4)];
            int columns = 2 + random.nextInt(4);
            for (int i = 0; i < w.length; i++) {
                w[i] = new double[columns];
                Arrays.setAll(w[i], j -> StrictMath.exp(1.5 * random.nextGaussian()));
            }
            DenseAssociation problem = DenseAssociation.ofRatios(w);
            errors[trial] = greatestDifference(problem.solve(DenseAssociation.EXACT),
                    problem.solve(DenseAssociation.PROPAGATED));
        }
        Arrays.sort(errors);
        assertThat(errors[150]).isBetween(.008, .02);
        assertThat(errors[285]).isBetween(.025, .06);
        assertThat(errors[299]).isLessThan(.09);
    }

    /**
     * After n sweeps no message is farther from the limit than first change * rho^n / (1 - rho), with rho from the row
     * and column sums; the cap on sweeps is respected and reported.
     */
    @Test
    void messagesContractAtLeastAsFastAsTheBound() {
        Random random = new Random(SEED + 3);
        for (int trial = 0; trial < 100; trial++) {
            DenseAssociation problem = DenseAssociation.random(random, 4, 4, 1, 0);
            double rho = contraction(problem);
            Answer limit = problem.propagate(1_000_000);
            double firstChange = StrictMath.log(1 + greatestColumnSum(problem));
            for (int sweeps = 1; sweeps <= 16; sweeps *= 2) {
                Answer early = problem.propagate(sweeps);
                boolean capped = early.counts().sweepCapHits() == 1;
                assertThat(early.counts().sweeps()).isBetween(capped ? sweeps : 1L, (long) sweeps);
                assertThat(capped || sweeps > 1).isTrue();
                double bound = 2 * firstChange * StrictMath.pow(rho, sweeps) / (1 - rho);
                for (int i = 0; i < 4; i++) {
                    double off = Math.abs(StrictMath.log(early.missed()[i] / limit.missed()[i]));
                    assertThat(off).as("%s after %s sweeps", where(trial), sweeps).isLessThanOrEqualTo(bound + 1e-12);
                }
            }
        }
    }

    @Test
    void eventsOfWeightZeroStayImprobable() {
        double[][] w = {{5, 1}, {1, 5}};
        Answer answer = new DenseAssociation(w, new double[] {0, .5}, new double[] {.5, 0})
                .solve(DenseAssociation.PROPAGATED);
        assertThat(answer.missed()[0]).isLessThan(1e-15);
        assertThat(answer.nobody()[1]).isLessThan(1e-15);
        assertThat(answer.p()[0][0] + answer.p()[0][1]).isCloseTo(1, within(1e-15));
    }

    /** Six rows that are all but surely detected, three detections: half of them are missed, by symmetry. */
    @Test
    void whatUnderflowsInTheTablesGoesToPropagation() {
        double[][] w = new double[6][3];
        double[] d = new double[6];
        for (double[] row : w) {
            Arrays.fill(row, 1);
        }
        Arrays.fill(d, 1e-250);
        Answer answer = new DenseAssociation(w, d, new double[] {1, 1, 1})
                .solve(new AssociationBounds(1000, 2000));
        assertThat(answer.counts().underflows()).isEqualTo(1);
        assertThat(answer.counts().propagated()).isEqualTo(1);
        assertThat(answer.counts().sweepCapHits()).isZero();
        for (double missed : answer.missed()) {
            assertThat(missed).isCloseTo(.5, within(1e-8));
        }
    }

    private static double contraction(DenseAssociation problem) {
        double m = 0;
        for (int i = 0; i < problem.rows(); i++) {
            double sum = 0;
            for (int j = 0; j < problem.columns(); j++) {
                sum += problem.w()[i][j] / (problem.d()[i] * problem.c()[j]);
            }
            m = Math.max(m, sum);
        }
        double c = greatestColumnSum(problem);
        return m / (1 + m) * c / (1 + c);
    }

    private static double greatestColumnSum(DenseAssociation problem) {
        double greatest = 0;
        for (int j = 0; j < problem.columns(); j++) {
            double sum = 0;
            for (int i = 0; i < problem.rows(); i++) {
                sum += problem.w()[i][j] / (problem.d()[i] * problem.c()[j]);
            }
            greatest = Math.max(greatest, sum);
        }
        return greatest;
    }

    /** Rows and columns joined one by one to one already there: no loop. */
    private static DenseAssociation tree(Random random, int rows, int columns) {
        DenseAssociation tree = DenseAssociation.random(random, rows, columns, 0, 0);
        tree.w()[0][0] = 1;
        int row = 1;
        int column = 1;
        while (row < rows || column < columns) {
            double weight = StrictMath.exp(2 * random.nextGaussian());
            if (column == columns || row < rows && random.nextBoolean()) {
                tree.w()[row++][random.nextInt(column)] = weight;
            } else {
                tree.w()[random.nextInt(row)][column++] = weight;
            }
        }
        return tree;
    }

    private static double greatestDifference(Answer a, Answer b) {
        double greatest = 0;
        for (int i = 0; i < a.missed().length; i++) {
            greatest = Math.max(greatest, Math.abs(a.missed()[i] - b.missed()[i]));
            for (int j = 0; j < a.nobody().length; j++) {
                greatest = Math.max(greatest, Math.abs(a.p()[i][j] - b.p()[i][j]));
            }
        }
        for (int j = 0; j < a.nobody().length; j++) {
            greatest = Math.max(greatest, Math.abs(a.nobody()[j] - b.nobody()[j]));
        }
        return greatest;
    }

    private static String where(int trial) {
        return "seed from " + SEED + ", trial " + trial;
    }
}
