package org.sweeptally.filter;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.model.Look;

class UnseenGridTest {

    private static final double CELL = 100;

    /** A little less than 20 cells wide, so that the grid has exactly 20 x 20. */
    private final PlaneArea core = FilterScene.square(995);

    private static final double GRID_SQUARE_METRES = 4e6;

    /** Births 0.1 a second over the square, lifetime 100 s, objects that hardly move, nothing outside. */
    private final FilterSettings still = settings(1e-9, 100, 0.1 / 4e6, 0);

    @Test
    void objectsWithoutMovementAreAsManyAsInAQueueWithoutWaiting() {
        // Mean of an M/M/infinity queue from empty, b / mu (1 - exp(-mu t)), with b = 0.1 and mu = 0.01: Takacs 1962 (from memory).
        double[][] expected = {{10, 0.9516258196404}, {100, 6.3212055882856}};
        for (double[] row : expected) {
            UnseenGrid grid = new UnseenGrid(still, core, 0);
            grid.predict(still, still.profiles().get(0), row[0]);
            assertThat(grid.total()).isCloseTo(row[1], within(1e-7));
        }
    }

    @Test
    void predictingOverAGapIsPredictingOverItsPieces() {
        SplittableRandom random = new SplittableRandom(5);
        FilterSettings moving = settings(6, 300, 1e-9, 2e-6);
        for (int round = 0; round < 20; round++) {
            UnseenGrid one = new UnseenGrid(moving, core, 300);
            UnseenGrid two = new UnseenGrid(moving, core, 300);
            double amount = random.nextDouble();
            one.deposit(50, 50, amount);
            two.deposit(50, 50, amount);
            double first = 10 * random.nextDouble();
            double second = (round == 0 ? 900 : 10) * random.nextDouble();
            one.predict(moving, moving.profiles().get(0), first + second);
            two.predict(moving, moving.profiles().get(0), first);
            two.predict(moving, moving.profiles().get(0), second);
            assertThat(two.total()).as("seed 5, round %s", round).isCloseTo(one.total(), within(1e-12 * one.total()));
            assertThat(two.density(120, -340)).isCloseTo(one.density(120, -340), within(1e-12 * one.density(120, -340)));
        }
    }

    @Test
    void theDensityOutsideIsAFixedPoint() {
        double density = 3e-6;
        FilterSettings balanced = settings(6, 400, density / 400, density);
        UnseenGrid grid = new UnseenGrid(balanced, core, 200);
        grid.fill(density);
        grid.predict(balanced, balanced.profiles().get(0), 1234.5);
        assertThat(grid.density(0, 0)).isCloseTo(density, within(1e-12 * density));
        assertThat(grid.density(990, -990)).isCloseTo(density, within(1e-12 * density));
    }

    @Test
    void inflowIsTheFluxOfAGaussianVelocity() {
        // Flux through a line = density * sigma / sqrt(2 pi) per metre and second: kinetic theory of gases, Maxwell 1860 (from memory).
        FilterSettings inflow = settings(6, 1e12, 0, 1e-6);
        UnseenGrid grid = new UnseenGrid(inflow, core, 0);
        grid.predict(inflow, inflow.profiles().get(0), 1e-3);
        double perimeter = 4 * 2000;
        assertThat(grid.total() / 1e-3).isCloseTo(1e-6 * 6 / Math.sqrt(2 * Math.PI) * perimeter, within(1e-6));
    }

    @Test
    void aLookThinsOnlyWhatItCouldHaveSeen() {
        FilterScene scene = new FilterScene(1990, 0, 400);
        Look look = scene.look(0.8, 1e-6);
        UnseenGrid grid = new UnseenGrid(still, scene.core(), 0);
        grid.fill(1e-6);
        grid.missed(grid.probabilityByCell(look));
        assertThat(grid.density(0, 0)).isCloseTo(0.2e-6, within(1e-18));
        assertThat(grid.density(900, 900)).isCloseTo(1e-6, within(1e-18));
        double seenArea = Math.PI * 400 * 400;
        assertThat(grid.total()).isCloseTo(GRID_SQUARE_METRES * 1e-6 - 0.8e-6 * seenArea, within(0.02));
    }

    @Test
    void undetectedObjectsSettleWherePublishedFixedPointSays() {
        // D = b / (1 - ps (1 - pd)): (b, ps, pd) = (0.1, 0.99, 0.9) gives 0.110987791342953. Derived fixed point, no source.
        FilterScene scene = new FilterScene(1990, 0, 1e6);
        double lifetime = -1 / StrictMath.log(0.99);
        double bornInAStep = 0.1;
        FilterSettings steady = settings(1e-12, lifetime, bornInAStep / lifetime / (1 - 0.99) / 4e6, 0);
        UnseenGrid grid = new UnseenGrid(steady, scene.core(), 0);
        Look look = scene.look(0.9, 1e-6);
        for (int k = 0; k < 50; k++) {
            grid.missed(grid.probabilityByCell(look));
            grid.predict(steady, steady.profiles().get(0), 1);
        }
        assertThat(grid.density(0, 0) * 4e6).isCloseTo(0.110987791342953, within(1e-12));
    }

    @Test
    void anotherCellSizeKeepsTheMass() {
        UnseenGrid coarse = new UnseenGrid(still, core, 0);
        coarse.fill(1e-6);
        coarse.deposit(10, 10, 0.5);
        FilterSettings fine = FilterScene.oneKind(
                0.05, 1e-9, 100, 0, 0, 0, 0.7, 0.3, 0.1, 5, 40, 1000, 5000, 200_000, 1000, 1e-5, 2_000_000);
        UnseenGrid finer = new UnseenGrid(fine, core, 0);
        finer.takeFrom(coarse, 1);
        assertThat(finer.total()).isCloseTo(coarse.total(), within(1e-12));
    }

    private static FilterSettings settings(double speedSigma, double lifetime, double births, double outside) {
        return FilterScene.oneKind(
                0.05, speedSigma, lifetime, births, outside, 0, 0.7, 0.3, 0.1, 5, CELL, 1000, 5000, 200_000, 1000, 1e-5, 2_000_000);
    }
}
