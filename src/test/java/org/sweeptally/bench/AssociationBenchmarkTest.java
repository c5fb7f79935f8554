package org.sweeptally.bench;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;
import org.sweeptally.filter.association.Association;
import org.sweeptally.filter.association.AssociationBounds;
import org.sweeptally.filter.association.AssociationMarginals;
import org.sweeptally.filter.association.AssociationProblem;

/** Keeps {@link AssociationBenchmark} from rotting: both of its methods run, and what they answer is printed. */
class AssociationBenchmarkTest {
    @Test
    void bothMethodsOfTheBenchmarkRunAndTheirAnswersAreClose() {
        AssociationBenchmark benchmark = new AssociationBenchmark();
        benchmark.shape = "dense-6";
        benchmark.scene();
        double exact = benchmark.exact();
        double propagated = benchmark.propagated();
        System.out.println("association benchmark, dense-6, missed(0): exact " + exact + ", propagated " + propagated);
        assertThat(exact).isBetween(0.0, 1.0);
        assertThat(Math.abs(exact - propagated)).isBetween(1e-12, .2);
    }

    @Test
    void aFieldOfObjectsIsMostlyClosedOrExact() {
        AssociationProblem field = AssociationScene.field(300, 100, 2, 7);
        AssociationMarginals answer = new Association().solve(field, new AssociationBounds(1_000_000, 1000));
        double missed = 0;
        for (int i = 0; i < field.rows(); i++) {
            missed += answer.missed(i);
        }
        System.out.println("association benchmark, field: " + answer.counts() + ", missed in all " + missed);
        assertThat(answer.counts().propagated()).isLessThanOrEqualTo(2);
        assertThat(answer.counts().exact()).isPositive();
        assertThat(missed).isBetween(0.0, 60.0);
    }
}
