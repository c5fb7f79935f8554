package org.sweeptally.filter.count;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.Random;
import org.junit.jupiter.api.Test;

class NumberDistributionTest {
    @Test
    void theIntervalIsTheOneByHand() {
        NumberDistribution n = PoissonBinomial.of(new double[] {.95, .9, .6, .3, .05});
        assertThat(n.least(.9)).isEqualTo(2);
        assertThat(n.most(.9)).isEqualTo(4);
        assertThat(n.held(.9)).isCloseTo(.3022 + .47835 + .17055, within(1e-15));
    }

    @Test
    void quantilesMetExactlyAreNotLostToRounding() {
        NumberDistribution sure = PoissonBinomial.of(new double[] {.95});
        assertThat(sure.least(.9)).isEqualTo(1);
        assertThat(sure.most(.9)).isEqualTo(1);
        assertThat(sure.held(.9)).isCloseTo(.95, within(1e-15));
        NumberDistribution doubtful = PoissonBinomial.of(new double[] {.05});
        assertThat(doubtful.least(.9)).isZero();
        assertThat(doubtful.most(.9)).isZero();
    }

    @Test
    void aSureNumberIsItsOwnInterval() {
        NumberDistribution n = PoissonBinomial.of(new double[] {1, 1, 0});
        assertThat(n.least(.9)).isEqualTo(2);
        assertThat(n.most(.9)).isEqualTo(2);
        assertThat(n.held(.9)).isEqualTo(1);
    }

    @Test
    void theIntervalFollowsItsDefinitionAndHoldsAtLeastItsLevel() {
        Random random = new Random(90);
        for (int trial = 0; trial < 300; trial++) {
            double[] r = random.doubles(1 + random.nextInt(80)).toArray();
            double level = .5 + .49 * random.nextDouble();
            NumberDistribution n = PoissonBinomial.of(r);
            double outside = (1 - level) / 2;
            int least = n.least(level);
            int most = n.most(level);
            assertThat(fewerThan(n, least)).as("trial " + trial).isLessThanOrEqualTo(outside + 1e-11);
            assertThat(fewerThan(n, least + 1)).as("trial " + trial).isGreaterThan(outside);
            assertThat(fewerThan(n, most + 1)).as("trial " + trial).isGreaterThanOrEqualTo(1 - outside - 1e-11);
            assertThat(fewerThan(n, most)).as("trial " + trial).isLessThan(1 - outside);
            assertThat(n.held(level)).isBetween(level - 1e-11, 1 + 1e-12);
        }
    }

    @Test
    void aLevelOutsideZeroToOneIsRefused() {
        NumberDistribution n = PoissonBinomial.of(new double[] {.5});
        assertThatThrownBy(() -> n.least(1)).hasMessageContaining("1.0");
        assertThatThrownBy(() -> n.most(Double.NaN)).hasMessageContaining("NaN");
    }

    @Test
    void theBandIsTheValuesOwn() {
        double[] band = {.5, .5};
        NumberDistribution n = new NumberDistribution(.5, .25, 0, band, 0, 0);
        band[0] = 9;
        n.band()[1] = 9;
        assertThat(n.band()).containsExactly(.5, .5);
        assertThat(n).isEqualTo(PoissonBinomial.of(new double[] {.5}))
                .hasSameHashCodeAs(PoissonBinomial.of(new double[] {.5}));
    }

    private static double fewerThan(NumberDistribution n, int number) {
        double sum = n.below();
        for (int k = n.bandOffset(); k < number; k++) {
            sum += n.probability(k);
        }
        return sum;
    }
}
