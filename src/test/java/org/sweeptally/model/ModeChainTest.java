package org.sweeptally.model;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.List;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class ModeChainTest {

    private static final MotionModel ANY = new NearlyConstantVelocity(1);

    @Test
    void aSingleModeIsNeverLeft() {
        ModeChain chain = new ModeChain(List.of(new MotionMode("straight", ANY, 1, Double.POSITIVE_INFINITY)));
        for (double seconds : new double[] {0, 1e-9, 2.5, 1e9}) {
            assertThat(chain.transition(seconds)).isDeepEqualTo(new double[][] {{1}});
        }
    }

    @Test
    void inNoTimeNothingChanges() {
        assertThat(chain(10, 20, 5).transition(0)).isDeepEqualTo(new double[][] {{1, 0, 0}, {0, 1, 0}, {0, 0, 1}});
    }

    /**
     * Two modes left at rates a and b: p11(t) = b/(a+b) + a/(a+b) exp(-(a+b) t); Norris 1997, "Markov Chains",
     * section 2.1 (from memory).
     */
    @ParameterizedTest
    @ValueSource(doubles = {1e-6, .1, 1, 2.5, 30, 3600, 1e7})
    void twoModesFollowTheClosedForm(double seconds) {
        double a = 1 / 20.0;
        double b = 1 / 10.0;
        double[][] p = chain(20, 10).transition(seconds);
        double gone = StrictMath.exp(-(a + b) * seconds);
        assertThat(p[0][0]).isCloseTo((b + a * gone) / (a + b), within(1e-14));
        assertThat(p[1][1]).isCloseTo((a + b * gone) / (a + b), within(1e-14));
        // The small probabilities of a short step keep all their digits.
        double left = -StrictMath.expm1(-(a + b) * seconds) * a / (a + b);
        assertThat(p[0][1]).isCloseTo(left, within(1e-13 * left));
    }

    /**
     * Dwells of 20 and 10 s: two thirds and one third of the time, as of the chain [[.95, .05], [.10, .90]] a
     * second.
     */
    @Test
    void inTheLongRunModesHaveTheirShareOfTheTime() {
        assertThat(chain(20, 10).transition(1e6)[0]).containsExactly(new double[] {2.0 / 3, 1.0 / 3}, within(1e-14));
    }

    @Test
    void rowsSumToOneAndTwoStepsAreOne() {
        for (long seed = 1; seed <= 200; seed++) {
            SplittableRandom random = new SplittableRandom(seed);
            List<MotionMode> modes = new ArrayList<>();
            int size = random.nextInt(2, 6);
            for (int i = 0; i < size; i++) {
                double dwell = StrictMath.exp(random.nextDouble(-3, 9));
                modes.add(new MotionMode("mode-" + i, ANY, random.nextDouble(), dwell));
            }
            double first = StrictMath.exp(random.nextDouble(-5, 7));
            double second = StrictMath.exp(random.nextDouble(-5, 7));
            double[][] a = new ModeChain(modes).transition(first);
            double[][] b = new ModeChain(modes).transition(second);
            double[][] whole = new ModeChain(modes).transition(first + second);
            for (int i = 0; i < size; i++) {
                double sum = 0;
                for (int j = 0; j < size; j++) {
                    double product = 0;
                    for (int k = 0; k < size; k++) {
                        product += a[i][k] * b[k][j];
                    }
                    assertThat(product).as("seed %s", seed).isCloseTo(whole[i][j], within(1e-12));
                    assertThat(whole[i][j]).isGreaterThan(0);
                    sum += whole[i][j];
                }
                assertThat(sum).as("seed %s", seed).isCloseTo(1, within(1e-15));
            }
        }
    }

    @Test
    void anObjectPicksItsNextModeByTheShares() {
        List<MotionMode> modes = List.of(
                new MotionMode("still", ANY, .5, 100), new MotionMode("straight", ANY, .3, 100), new MotionMode("turning", ANY, .2, 100));
        double[] row = new ModeChain(modes).transition(1e-6)[0];
        assertThat(row[1] / row[2]).isCloseTo(1.5, within(1e-6));
        assertThat(row[1] + row[2]).isCloseTo(1e-8, within(1e-15));
    }

    @Test
    void aModeBesideOthersOfNoShareIsNeverLeft() {
        List<MotionMode> modes = List.of(new MotionMode("straight", ANY, 1, 10), new MotionMode("turning", ANY, 0, 10));
        double[][] p = new ModeChain(modes).transition(5);
        assertThat(p[0]).containsExactly(1, 0);
        assertThat(p[1][0]).isCloseTo(1 - StrictMath.exp(-.5), within(1e-15));
    }

    @Test
    void timeDoesNotRunBackwards() {
        assertThatThrownBy(() -> chain(20, 10).transition(-1)).isInstanceOf(IllegalArgumentException.class);
        assertThatThrownBy(() -> chain(20, 10).transition(Double.NaN)).isInstanceOf(IllegalArgumentException.class);
    }

    private static ModeChain chain(double... dwells) {
        List<MotionMode> modes = new ArrayList<>();
        for (double dwell : dwells) {
            modes.add(new MotionMode("mode-" + modes.size(), ANY, 1.0 / dwells.length, dwell));
        }
        return new ModeChain(modes);
    }
}
