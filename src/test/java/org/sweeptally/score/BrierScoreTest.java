package org.sweeptally.score;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;

class BrierScoreTest {

    /**
     * The score of Brier 1950 and its decomposition by Murphy 1973 (formulas from memory); a case small enough to
     * redo.
     */
    @Test
    void aWorkedCaseComesApartIntoItsThreeParts() {
        BrierScore.Tally tally = new BrierScore.Tally(10);
        add(tally, 0.1, 10, 2);
        add(tally, 0.5, 10, 4);
        add(tally, 0.9, 20, 17);
        BrierScore score = tally.score();
        assertThat(score.score()).isCloseTo(0.17, within(1e-12));
        assertThat(score.reliability()).isCloseTo(0.00625, within(1e-12));
        assertThat(score.resolution()).isCloseTo(0.080625, within(1e-12));
        assertThat(score.uncertainty()).isCloseTo(0.244375, within(1e-12));
        assertThat(score.forecasts()).isEqualTo(40);
    }

    @Test
    void honestForecastsAreReliableAndBoastfulOnesAreNot() {
        SplittableRandom random = new SplittableRandom(1950);
        BrierScore.Tally honest = new BrierScore.Tally(10);
        BrierScore.Tally boastful = new BrierScore.Tally(10);
        for (int n = 0; n < 20_000; n++) {
            double p = random.nextDouble();
            boolean happens = random.nextDouble() < p;
            honest.add(p, happens);
            boastful.add(0.5 * (1 + p), happens);
        }
        assertThat(honest.score().reliability()).as("seed 1950").isLessThan(0.001);
        assertThat(boastful.score().reliability()).as("seed 1950").isGreaterThan(0.05);
    }

    @Test
    void whatIsNoProbabilityIsRefused() {
        BrierScore.Tally tally = new BrierScore.Tally(10);
        assertThatThrownBy(() -> tally.add(Double.NaN, true)).hasMessageContaining("NaN");
        assertThatThrownBy(() -> tally.add(1.01, true)).hasMessageContaining("1.01");
    }

    private static void add(BrierScore.Tally tally, double probability, int forecasts, int happened) {
        for (int i = 0; i < forecasts; i++) {
            tally.add(probability, i < happened);
        }
    }
}
