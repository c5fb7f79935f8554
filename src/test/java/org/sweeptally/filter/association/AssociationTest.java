package org.sweeptally.filter.association;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.Random;
import org.junit.jupiter.api.Test;
import org.sweeptally.filter.association.DenseAssociation.Answer;

class AssociationTest {
    private static DenseAssociation of(double[][] w, double[] d, double[] c) {
        return new DenseAssociation(w, d, c);
    }

    @Test
    void nothingAtAllHasTheWeightOne() {
        AssociationMarginals answer = new Association().solve(new AssociationProblem(), DenseAssociation.EXACT);
        assertThat(answer.logWeight()).isZero();
        assertThat(answer.counts()).isEqualTo(AssociationCounts.NONE);
    }

    @Test
    void anEmptyScanMissesEveryRow() {
        Answer answer = of(new double[2][0], new double[] {.1, .5}, new double[0]).solve(DenseAssociation.EXACT);
        assertThat(answer.missed()).containsExactly(1, 1);
        assertThat(answer.logWeight()).isCloseTo(StrictMath.log(.05), within(1e-14));
    }

    @Test
    void detectionsWithoutRowsAreNobodys() {
        Answer answer = of(new double[0][2], new double[0], new double[] {.25, 4}).solve(DenseAssociation.EXACT);
        assertThat(answer.nobody()).containsExactly(1, 1);
        assertThat(answer.logWeight()).isZero();
    }

    @Test
    void withoutClutterALoneDetectionIsTheRows() {
        Answer answer = of(new double[][] {{3}}, new double[] {.5}, new double[] {0}).solve(DenseAssociation.EXACT);
        assertThat(answer.p()[0][0]).isEqualTo(1);
        assertThat(answer.missed()[0]).isZero();
        assertThat(answer.nobody()[0]).isZero();
        assertThat(answer.logWeight()).isCloseTo(StrictMath.log(3), within(1e-15));
        assertThat(answer.counts().impossible()).isZero();
    }

    @Test
    void clutterWithoutMeasureMissesTheRow() {
        Answer answer = of(new double[][] {{3}}, new double[] {.5}, new double[] {1e300}).solve(DenseAssociation.EXACT);
        assertThat(answer.missed()[0]).isEqualTo(1);
        assertThat(answer.p()[0][0]).isCloseTo(6e-300, within(1e-311));
    }

    @Test
    void aMissThatCannotBeIsAnsweredAndCounted() {
        Answer answer = of(new double[1][0], new double[] {0}, new double[0]).solve(DenseAssociation.EXACT);
        assertThat(answer.missed()[0]).isEqualTo(1);
        assertThat(answer.logWeight()).isEqualTo(Double.NEGATIVE_INFINITY);
        assertThat(answer.counts().impossible()).isEqualTo(1);
    }

    @Test
    void aDetectionThatCannotBeNobodysIsAnsweredAndCounted() {
        Answer answer = of(new double[0][1], new double[0], new double[] {0}).solve(DenseAssociation.EXACT);
        assertThat(answer.nobody()[0]).isEqualTo(1);
        assertThat(answer.logWeight()).isEqualTo(Double.NEGATIVE_INFINITY);
        assertThat(answer.counts().impossible()).isEqualTo(1);
    }

    /** Equally, whatever their weights: a factor of a row that cannot be missed means nothing. */
    @Test
    void twoCertainRowsShareTheirOnlyDetection() {
        Answer answer = of(new double[][] {{3}, {1}}, new double[2], new double[] {1}).solve(DenseAssociation.EXACT);
        assertThat(answer.p()[0][0]).isCloseTo(.5, within(1e-15));
        assertThat(answer.missed()[0]).isCloseTo(.5, within(1e-15));
        assertThat(answer.nobody()[0]).isCloseTo(0, within(1e-15));
        assertThat(answer.counts().impossible()).isEqualTo(1);
    }

    @Test
    void threeCertainRowsWithTwoDetectionsLeaveOneMissed() {
        double[][] w = {{1, 1}, {1, 1}, {1, 1}};
        Answer answer = of(w, new double[3], new double[] {1, 1}).solve(DenseAssociation.EXACT);
        assertThat(answer.missed()).containsExactly(new double[] {1. / 3, 1. / 3, 1. / 3}, within(1e-14));
        assertThat(answer.nobody()).containsExactly(new double[2], within(1e-14));
        assertThat(answer.logWeight()).isEqualTo(Double.NEGATIVE_INFINITY);
        assertThat(answer.counts().impossible()).isEqualTo(1);
        assertThat(answer.counts().exact()).isEqualTo(1);
    }

    @Test
    void aTinyMissedProbabilityIsExactRelatively() {
        double[][] w = {{1e9, 1e9}, {1e9, 1e9}};
        Answer answer = of(w, new double[] {1e-9, 1e-9}, new double[] {1e-9, 1e-9}).solve(DenseAssociation.EXACT);
        double ratio = 1e27;
        double exact = (1 + 2 * ratio) / (1 + 4 * ratio + 2 * ratio * ratio);
        assertThat(answer.missed()[0] / exact).isCloseTo(1, within(1e-13));
        assertThat(answer.nobody()[1] / exact).isCloseTo(1, within(1e-13));
    }

    @Test
    void clustersAreIndependentAndCountedByMethod() {
        double[][] w = {{2, 1, 0, 0, 0}, {1, 2, 0, 0, 0}, {0, 0, 3, 0, 0}, {0, 0, 0, 4, 0}, {0, 0, 0, 5, 0}};
        double[] ones = {1, 1, 1, 1, 1};
        Answer all = of(w, ones, ones).solve(DenseAssociation.EXACT);
        DenseAssociation part = DenseAssociation.ofRatios(new double[] {2, 1}, new double[] {1, 2});
        Answer first = part.solve(DenseAssociation.EXACT);
        assertThat(all.p()[0][1]).isEqualTo(first.p()[0][1]);
        assertThat(all.logWeight()).isCloseTo(StrictMath.log(12 * 4 * 10), within(1e-13));
        assertThat(all.counts().exact()).isEqualTo(1);
        assertThat(all.counts().closed()).isEqualTo(3);
        assertThat(all.counts().widestFrontier()).isEqualTo(2);
    }

    @Test
    void pairsOfWeightZeroNeverHappenAndJoinNothing() {
        AssociationProblem problem = new AssociationProblem();
        problem.addColumn(1);
        problem.addRow(1);
        int never = problem.addPair(0, 0);
        problem.addRow(1);
        int sometimes = problem.addPair(0, 1);
        AssociationMarginals answer = new Association().solve(problem, DenseAssociation.EXACT);
        assertThat(answer.pair(never)).isZero();
        assertThat(answer.pair(sometimes)).isEqualTo(.5);
        assertThat(answer.missed(0)).isEqualTo(1);
        assertThat(answer.counts().closed()).isEqualTo(2);
    }

    @Test
    void whatTheBoundDoesNotAffordGoesToPropagation() {
        Random random = new Random(11);
        DenseAssociation problem = DenseAssociation.random(random, 8, 8, 1, 0);
        FrontierPlan plan = new FrontierPlan();
        Cluster cluster = new Cluster();
        Clusters clusters = new Clusters();
        AssociationProblem sparse = problem.problem();
        clusters.split(sparse);
        cluster.load(sparse, clusters, 0);
        plan.find(cluster, Long.MAX_VALUE);
        assertThat(problem.solve(new AssociationBounds(plan.cost, 1000)).counts().exact()).isEqualTo(1);
        AssociationCounts beyond = problem.solve(new AssociationBounds(plan.cost - 1, 1000)).counts();
        assertThat(beyond.exact()).isZero();
        assertThat(beyond.propagated()).isEqualTo(1);
        assertThat(beyond.sweeps()).isPositive();
    }

    @Test
    void aHugeDenseClusterIsNeverTriedExactly() {
        DenseAssociation problem = DenseAssociation.random(new Random(12), 60, 60, 1, 0);
        Answer answer = problem.solve(new AssociationBounds(Long.MAX_VALUE, 10_000));
        assertThat(answer.counts().propagated()).isEqualTo(1);
        assertThat(answer.counts().sweepCapHits()).isZero();
        EnumeratedComparisonTest.requireDistributions(roundedToSettled(answer), "60 x 60");
    }

    /** Messages settle to 1e-9, columns then sum to 1 as nearly: rounds that away, so that 1e-12 can be asked. */
    private static Answer roundedToSettled(Answer answer) {
        double[][] p = answer.p();
        double[] nobody = answer.nobody().clone();
        for (int j = 0; j < nobody.length; j++) {
            double sum = nobody[j];
            for (double[] row : p) {
                sum += row[j];
            }
            assertThat(sum).isCloseTo(1, within(1e-7));
            nobody[j] += 1 - sum;
        }
        return new Answer(p, answer.missed(), nobody, answer.logWeight(), answer.counts());
    }

    @Test
    void weightsThatAreNoWeightsAreRefused() {
        AssociationProblem problem = new AssociationProblem();
        assertThatThrownBy(() -> problem.addColumn(Double.NaN)).hasMessageContaining("NaN");
        assertThatThrownBy(() -> problem.addRow(-1)).hasMessageContaining("-1.0");
        problem.addColumn(1);
        problem.addRow(1);
        assertThatThrownBy(() -> problem.addPair(0, Double.POSITIVE_INFINITY)).hasMessageContaining("Infinity");
        assertThatThrownBy(() -> problem.addPair(1, 1)).hasMessageContaining("(0, 1)");
        problem.addPair(0, 1);
        assertThatThrownBy(() -> problem.addPair(0, 1)).hasMessageContaining("twice");
        assertThatThrownBy(() -> problem.addColumn(1)).hasMessageContaining("columns come first");
        assertThatThrownBy(() -> new AssociationBounds(-1, 1)).hasMessageContaining("-1");
    }
}
