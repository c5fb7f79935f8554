package org.sweeptally.world;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.sweeptally.world.SimulatedScan.Detection;

class ToldFilterTest {

    private static final WorldSettings WORLD = WorldSettings.fourKilometres(200, 30);

    @Test
    void itFollowsWhatItIsToldAndNothingElse() {
        ToldFilter filter = new ToldFilter(WORLD);
        TrueObject one = new TrueObject(1, 100, 0, 0, 0, true, true);
        TrueObject two = new TrueObject(2, 120, 0, 0, 0, true, true);
        double[][] first = filter.update(new SimulatedScan(
                0, List.of(new Detection(119, 5, 2), new Detection(101, 0, SimulatedScan.CLUTTER)), List.of(one, two)));
        assertThat(first).isDeepEqualTo(new double[][] {{119, 5}});

        // Variance 225 + 2.5^2 36 + q 2.5^3 / 3 before, so the gain is that over itself plus 225.
        double predicted = 225 + 6.25 * 36 + 0.05 * 15.625 / 3;
        double gain = predicted / (predicted + 225);
        double[][] second =
                filter.update(new SimulatedScan(2.5, List.of(new Detection(129, 5, 2)), List.of(one, two)));
        assertThat(second[0][0]).isCloseTo(119 + 10 * gain, within(1e-12));
        assertThat(second[0][1]).isCloseTo(5, within(1e-12));

        assertThat(filter.update(new SimulatedScan(5, List.of(), List.of(one)))).as("it is told of the end").isEmpty();
    }

    @Test
    void whatItEstimatesOutsideTheSquareIsNotShown() {
        ToldFilter filter = new ToldFilter(WORLD);
        TrueObject beyond = new TrueObject(1, 2050, 0, 0, 0, false, true);
        assertThat(filter.update(new SimulatedScan(0, List.of(new Detection(2040, 0, 1)), List.of(beyond)))).isEmpty();
    }
}
