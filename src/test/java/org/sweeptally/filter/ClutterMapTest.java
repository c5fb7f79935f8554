package org.sweeptally.filter;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.DataInputStream;
import java.io.DataOutputStream;
import java.io.IOException;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.junit.jupiter.api.Test;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.model.ClutterLearning;
import org.sweeptally.model.DetectionProfile;
import org.sweeptally.model.FieldOfView;
import org.sweeptally.model.Look;
import org.sweeptally.model.MissRuns;
import org.sweeptally.model.SensorModel;

class ClutterMapTest {

    private static final double REACH = 3000;

    /** Ten expected in a cell of 500 m in a hundred scans. */
    private static final double DENSITY = 0.1 / 250_000;

    private static final ClutterLearning LEARNING = new ClutterLearning(600, 500);

    private final FilterScene scene = new FilterScene(1990, 0, REACH);

    private Look look(ClutterLearning learning) {
        SensorModel radar = new SensorModel("mast", REACH, DetectionProfile.constant(0.9),
                DENSITY * StrictMath.PI * REACH * REACH, MissRuns.NONE, learning);
        return new Look(radar, FieldOfView.disc(new PlanePoint(0, 0), REACH), Optional.empty(), scene.core(), 0);
    }

    @Test
    void whatIsLearnedIsTheMeanOfAGammaThatHasSeenPoissonCounts() {
        ClutterMap map = new ClutterMap(scene.core(), 0);
        Look look = look(LEARNING);
        for (int scan = 0; scan < 100; scan++) {
            // A quarter of the scans bring two detections into one cell, each false with probability 0.8.
            double[] z = scan % 4 == 0 ? new double[] {100, 100, 150, 200} : new double[0];
            map.learn(FilterScene.scan(scan, look, z), j -> 0.8, 0);
        }
        assertThat(map.ratio("mast", 120, 130)).isCloseTo((4 + 50 * 0.8) / (4 + 10), within(1e-6));
        assertThat(map.ratio("mast", -700, 130)).isCloseTo(4.0 / (4 + 10), within(1e-6));
        Scan next = FilterScene.scan(101, look, 120, 130, -700, 130, 5000, 0);
        assertThat(map.clutterOf(next)).containsExactly(
                new double[] {DENSITY * 44 / 14, DENSITY * 4 / 14, DENSITY}, within(1e-12));
    }

    @Test
    void itNeverLeavesAQuarterToFourTimes() {
        ClutterMap map = new ClutterMap(scene.core(), 0);
        Look look = look(LEARNING);
        for (int scan = 0; scan < 1000; scan++) {
            map.learn(FilterScene.scan(scan, look, 100, 100), j -> 1, 0);
        }
        assertThat(map.ratio("mast", 100, 100)).isEqualTo(4);
        assertThat(map.ratio("mast", -600, -600)).isEqualTo(0.25);
    }

    @Test
    void afterItsTimeEFoldLessCounts() {
        ClutterMap map = new ClutterMap(scene.core(), 0);
        Look look = look(LEARNING);
        for (int scan = 0; scan < 10; scan++) {
            map.learn(FilterScene.scan(scan, look, 100, 100), j -> 1, 0);
        }
        map.learn(FilterScene.scan(11, look), j -> 1, 600_000_000L);
        double kept = Math.exp(-1);
        assertThat(map.ratio("mast", 100, 100)).isCloseTo((4 + 10 * kept) / (4 + 1 * kept + 0.1), within(1e-6));
    }

    @Test
    void whereTheSensorDoesNotLookNothingIsLearned() {
        ClutterMap map = new ClutterMap(scene.core(), 0);
        SensorModel radar = new SensorModel("mast", REACH, DetectionProfile.constant(0.9),
                DENSITY * StrictMath.PI * 300 * 300, MissRuns.NONE, LEARNING);
        Look narrow = new Look(radar, FieldOfView.disc(new PlanePoint(0, 0), 300), Optional.empty(), scene.core(), 0);
        for (int scan = 0; scan < 100; scan++) {
            map.learn(FilterScene.scan(scan, narrow), j -> 1, 0);
        }
        assertThat(map.ratio("mast", 900, 900)).isEqualTo(1);
        assertThat(map.ratio("mast", 100, 100)).isLessThan(0.8);
    }

    @Test
    void otherSettingsBeginAnewAndNoneStandStill() {
        ClutterMap map = new ClutterMap(scene.core(), 0);
        map.learn(FilterScene.scan(0, look(LEARNING), 100, 100), j -> 1, 0);
        assertThat(map.ratio("mast", 100, 100)).isGreaterThan(1);
        map.clutterOf(FilterScene.scan(1, look(new ClutterLearning(1200, 500)), 100, 100));
        assertThat(map.ratio("mast", 100, 100)).isEqualTo(1);
        map.learn(FilterScene.scan(2, look(ClutterLearning.OFF), 100, 100), j -> 1, 0);
        assertThat(map.ratio("mast", 100, 100)).isEqualTo(1);
        Look off = look(ClutterLearning.OFF);
        assertThat(map.clutterOf(FilterScene.scan(3, off, 100, 100))).containsExactly(off.clutterPerSquareMetre());
    }

    @Test
    void unevenClutterIsLearnedWhereItIsAndMakesFewerFalseBirths() {
        int[] dense = new int[2];
        int[] elsewhere = new int[2];
        for (long seed = 1; seed <= 3; seed++) {
            ClutterWorld.Outcome without = new ClutterWorld(ClutterLearning.OFF).run(seed);
            ClutterWorld.Outcome with = new ClutterWorld(new ClutterLearning(1200, 300)).run(seed);
            dense[0] += without.falseBirthsInDense;
            dense[1] += with.falseBirthsInDense;
            elsewhere[0] += without.falseBirthsElsewhere;
            elsewhere[1] += with.falseBirthsElsewhere;
            double inDense = mean(with.map, 750, 750, 1350, 1350);
            double inThin = mean(with.map, -1350, 750, -750, 1350);
            double inPlain = mean(with.map, -1800, -1800, 1800, 400);
            System.out.printf("clutter map, seed %d: dense %.2f, thin %.2f, elsewhere %.2f; false births an hour in dense"
                            + " clutter %d without, %d with, elsewhere %d and %d%n",
                    seed, inDense, inThin, inPlain, without.falseBirthsInDense, with.falseBirthsInDense,
                    without.falseBirthsElsewhere, with.falseBirthsElsewhere);
            assertThat(inDense).as("seed %d", seed).isBetween(2.8, 4.0);
            assertThat(inThin).as("seed %d", seed).isBetween(0.4, 0.75);
            assertThat(inPlain).as("seed %d", seed).isBetween(0.85, 1.15);
        }
        assertThat(dense[1]).isLessThan((dense[0] + 1) / 2);
        // A Poisson number of more than a hundred either way: a quarter more would be two standard errors.
        assertThat(elsewhere[1]).isLessThan(elsewhere[0] * 5 / 4);
    }

    @Test
    void nothingRealIsLearnedAway() {
        double[] lateness = new double[2];
        for (long seed = 1; seed <= 3; seed++) {
            ClutterWorld.Outcome without = new ClutterWorld(ClutterLearning.OFF).run(seed);
            ClutterWorld.Outcome with = new ClutterWorld(new ClutterLearning(1200, 300)).run(seed);
            for (ClutterWorld.Real real : ClutterWorld.REALS) {
                double shareWithout = share(without, real);
                double shareWith = share(with, real);
                assertThat(shareWith).as("seed %d, %s is shown; without learning %.3f", seed, real.name(), shareWithout)
                        .isGreaterThan(shareWithout - 0.06);
                if (real.name().startsWith("passing")) {
                    lateness[0] += without.delay.get(real.name());
                    lateness[1] += with.delay.get(real.name());
                }
            }
            double moored = with.map.ratio("mast", -250, 1250);
            double buoy = with.map.ratio("mast", -1000, -1000);
            System.out.printf("clutter map, seed %d: ratio %.2f where a craft lay for an hour, %.2f at the buoy;"
                    + " moored in dense clutter shown %.3f with, %.3f without%n", seed, moored, buoy,
                    share(with, ClutterWorld.REALS.get(3)), share(without, ClutterWorld.REALS.get(3)));
            assertThat(moored).as("seed %d", seed).isLessThan(1.6);
            assertThat(buoy).as("seed %d", seed).isLessThan(1.6);
        }
        System.out.printf("clutter map: passing craft first shown after %.2f s without, %.2f s with%n",
                lateness[0] / 60, lateness[1] / 60);
        assertThat(lateness[1] / 60).isLessThan(lateness[0] / 60 + 2);
    }

    private static double share(ClutterWorld.Outcome outcome, ClutterWorld.Real real) {
        int[] counts = outcome.shown.get(real.name());
        return (double) counts[0] / counts[1];
    }

    private static double mean(ClutterMap map, double west, double south, double east, double north) {
        List<Double> ratios = new ArrayList<>();
        for (double x = west; x <= east; x += 100) {
            for (double y = south; y <= north; y += 100) {
                ratios.add(map.ratio("mast", x, y));
            }
        }
        return ratios.stream().mapToDouble(Double::doubleValue).average().orElseThrow();
    }

    @Test
    void aSnapshotGoesOnAsTheFilterWould() throws IOException {
        Look look = look(LEARNING);
        ObjectFilter filter = scene.filter(FilterScene.settings());
        for (int scan = 0; scan < 30; scan++) {
            filter.predict(2.5);
            filter.update(FilterScene.scan(scan, look, 100 + 20 * scan, 100, 10 * scan, -300), scan * 2_500_000L);
        }
        ObjectFilter restored = ObjectFilter.read(
                new DataInputStream(new ByteArrayInputStream(bytes(filter))), FilterScene.settings(), scene.core(), 0);
        assertThat(restored.clutterMap().ratio("mast", 120, -300)).isNotEqualTo(1);
        for (ObjectFilter each : List.of(filter, restored)) {
            each.predict(2.5);
            each.update(FilterScene.scan(30, look, 700, 100, 0, 0), 30 * 2_500_000L);
        }
        assertThat(bytes(restored)).isEqualTo(bytes(filter));
    }

    private static byte[] bytes(ObjectFilter filter) throws IOException {
        ByteArrayOutputStream bytes = new ByteArrayOutputStream();
        filter.write(new DataOutputStream(bytes));
        return bytes.toByteArray();
    }
}
