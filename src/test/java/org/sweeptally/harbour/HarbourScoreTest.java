package org.sweeptally.harbour;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.Map;
import org.junit.jupiter.api.Test;
import org.sweeptally.harbour.HarbourScore.Shown;

class HarbourScoreTest {

    @Test
    void distancesAreCutAndChangesOfIdentityCounted() {
        HarbourScore.Tally tally = new HarbourScore.Tally();
        Map<String, double[]> truth = Map.of("1", new double[] {0, 0}, "2", new double[] {100, 0});
        tally.scan(truth, List.of(new Shown("a", 3, 4), new Shown("b", 100, 6)));
        tally.scan(truth, List.of(new Shown("c", 3, 4), new Shown("b", 100, 500)));
        tally.scan(truth, List.of());
        HarbourScore score = tally.score(2);
        assertThat(score.truthSideMetres()).isCloseTo((5 + 6 + 5 + 20 + 20 + 20) / 6.0, within(1e-12));
        assertThat(score.identityChangesPerVessel()).isEqualTo(0.5);
        assertThat(score.meanConfirmed()).isCloseTo(4 / 3.0, within(1e-12));
    }

    @Test
    void theAssignmentIsTheBestOfAllAndNotTheGreedyOne() {
        HarbourScore.Tally tally = new HarbourScore.Tally();
        Map<String, double[]> truth = Map.of("1", new double[] {0, 0}, "2", new double[] {10, 0});
        tally.scan(truth, List.of(new Shown("a", 9, 0), new Shown("b", 13, 0)));
        assertThat(tally.score(2).truthSideMetres()).isCloseTo((9 + 3) / 2.0, within(1e-12));
    }
}
