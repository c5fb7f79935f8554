package org.sweeptally.filter;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.Optional;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.model.DetectionProfile;
import org.sweeptally.model.FieldOfView;
import org.sweeptally.model.Look;
import org.sweeptally.model.SensorModel;

/** What happens where a sensor cannot see. */
class ShadowTest {

    private static final double PERIOD = 2.5;
    private static final double SPEED = 8;

    /** That of {@link FilterScene#settings}. */
    private static final double LIFETIME_SECONDS = 600;

    private final FilterScene scene = new FilterScene(4000, 200, 6000);
    private final FilterSettings settings = FilterScene.settings();

    /** 480 m across: a minute at 8 m/s. */
    private final PlaneArea shadow = rectangle(0, -500, 480, 500);

    private Look look(List<PlaneArea> shadows) {
        FieldOfView view = new FieldOfView(new PlanePoint(0, -1900), 0, 6000, List.of(), shadows, Optional.empty(), List.of());
        SensorModel radar = new SensorModel("mast", 6000, DetectionProfile.constant(0.9), 60);
        return new Look(radar, view, Optional.empty(), scene.core(), scene.apronMetres());
    }

    private static PlaneArea rectangle(double west, double south, double east, double north) {
        return PlaneArea.ofRings(List.of(List.of(
                new PlanePoint(west, south), new PlanePoint(east, south), new PlanePoint(east, north),
                new PlanePoint(west, north))));
    }

    /** One object that sails east and is seen outside the true shadow; the filter is told of the shadow or not. */
    private ObjectFilter sail(long seed, List<PlaneArea> told, double until) {
        SplittableRandom random = new SplittableRandom(seed);
        ObjectFilter filter = scene.filter(settings);
        Look look = look(told);
        for (double seconds = 0; seconds <= until; seconds += PERIOD) {
            double east = -500 + SPEED * seconds;
            boolean seen = !shadow.contains(east, 0) && random.nextDouble() < 0.9;
            double[] detections = seen
                    ? new double[] {east + 15 * gaussian(random), 15 * gaussian(random)}
                    : new double[0];
            filter.predict(seconds == 0 ? 0 : PERIOD);
            filter.update(FilterScene.scan(Math.round(seconds * 1e6), look, detections), Math.round(seconds * 1e6));
        }
        return filter;
    }

    private static double gaussian(SplittableRandom random) {
        return Math.sqrt(-2 * Math.log(1 - random.nextDouble())) * Math.cos(2 * Math.PI * random.nextDouble());
    }

    private static Component shown(ObjectFilter filter) {
        List<Component> shown = filter.components().stream().filter(Component::confirmed).toList();
        assertThat(shown).hasSize(1);
        return shown.get(0);
    }

    @Test
    void anObjectInShadowForAMinuteKeepsItsIdentity() {
        for (long seed = 1; seed <= 20; seed++) {
            Component before = shown(sail(seed, List.of(shadow), 500 / SPEED - 1));
            Component inside = shown(sail(seed, List.of(shadow), 500 / SPEED + 30));
            Component after = shown(sail(seed, List.of(shadow), 980 / SPEED + 20));
            assertThat(inside.identity()).as("seed %d", seed).isEqualTo(before.identity());
            assertThat(after.identity()).as("seed %d", seed).isEqualTo(before.identity());
            assertThat(after.existence()).as("seed %d", seed).isGreaterThan(0.95);
            // Without a word about the shadow the misses end it within seconds.
            assertThat(sail(seed, List.of(), 500 / SPEED + 30).components()).as("seed %d", seed)
                    .noneMatch(Component::confirmed);
        }
    }

    @Test
    void inShadowExistenceFallsBySurvivalOnly() {
        PlaneArea wide = rectangle(0, -1000, 1900, 1000);
        ObjectFilter filter = sail(7, List.of(wide), 500 / SPEED + 20);
        double before = shown(filter).existence();
        for (int scan = 1; scan <= 24; scan++) {
            filter.predict(PERIOD);
            filter.update(FilterScene.scan(0, look(List.of(wide)), new double[0]), 0);
            double survived = before * Math.exp(-scan * PERIOD / LIFETIME_SECONDS);
            assertThat(shown(filter).existence()).isCloseTo(survived, within(1e-12));
        }
    }

    @Test
    void theUnseenPartGrowsInShadowAsIfNobodyLookedAndNowhereElse() {
        PlaneArea half = rectangle(-2300, -2300, 0, 2300);
        // Objects that hardly move, born everywhere; none in the beginning.
        double births = 1e-9;
        double lifetime = LIFETIME_SECONDS;
        FilterSettings still = still(births);
        UnseenGrid grid = new UnseenGrid(still, scene.core(), scene.apronMetres());
        Look look = look(List.of(half));
        for (int scan = 0; scan < 240; scan++) {
            grid.predict(still, still.profiles().get(0), PERIOD);
            grid.missed(grid.probabilityByCell(look));
        }
        // Mean of an M/M/infinity queue from empty, Takacs 1962 (from memory).
        double unseen = births * lifetime * (1 - Math.exp(-240 * PERIOD / lifetime));
        double survival = Math.exp(-PERIOD / lifetime);
        double perScan = births * lifetime * (1 - survival);
        // Fixed point of survival, births and a miss with probability 0.1: derived, no source.
        double seen = 0.1 * perScan / (1 - survival * 0.1);
        assertThat(grid.density(-1000, 0)).isCloseTo(unseen, within(1e-9 * unseen));
        assertThat(grid.density(-1000, 1500)).isCloseTo(unseen, within(1e-9 * unseen));
        assertThat(grid.density(1000, 0)).isCloseTo(seen, within(1e-6 * seen));
    }

    /** A grid whose objects do not move. */
    private static FilterSettings still(double births) {
        return FilterScene.oneKind(
                0.05, 1e-9, LIFETIME_SECONDS, births, 0, 0, 0.7, 0.3, 0.1, 5, 100, 1000, 5000, 200_000, 1000, 1e-5,
                2_000_000);
    }

    @Test
    void theGridIsThinnedByTheShareOfEachCellThatIsSeen() {
        // Askew, so that its edges cross cells.
        PlaneArea askew = PlaneArea.ofRings(List.of(List.of(
                new PlanePoint(-900, -400), new PlanePoint(700, -900), new PlanePoint(900, 600), new PlanePoint(-300, 900))));
        double hidden = thinned(List.of(askew)) - thinned(List.of());
        assertThat(hidden).isCloseTo(0.9e-6 * askew.areaSquareMetres(), within(0.01 * hidden));
    }

    private double thinned(List<PlaneArea> shadows) {
        UnseenGrid grid = new UnseenGrid(settings, scene.core(), scene.apronMetres());
        grid.fill(1e-6);
        grid.missed(grid.probabilityByCell(look(shadows)));
        return grid.total();
    }
}
