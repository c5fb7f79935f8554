package org.sweeptally.filter;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.ByteArrayOutputStream;
import java.io.DataOutputStream;
import java.io.IOException;
import java.util.Optional;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.sweeptally.demo.Chance;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.model.ClutterLearning;
import org.sweeptally.model.DetectionProfile;
import org.sweeptally.model.Gaussian;
import org.sweeptally.model.Look;
import org.sweeptally.model.MissRuns;
import org.sweeptally.model.SensorModel;

/**
 * Misses that come in runs, against the forward recursion of a hidden Markov chain written out (Rabiner 1989, from
 * memory).
 */
class DetectabilityTest {

    private static final double PERIOD_SECONDS = 2;
    private static final double P_D = 0.6;

    /** Existence after each of a few looks, detections where the text has an x, by all that the chain may have done. */
    @ParameterizedTest
    @CsvSource({"x...., 6", "..x.x, 3", ".......x, 20", "xx......x..x, 10", "....., 0.5"})
    void existenceIsThatOfTheHiddenChain(String looks, double hiddenSeconds) {
        MissRuns runs = new MissRuns(hiddenSeconds, 0.9);
        ObjectFilter filter = Begun.with(
                Begun.undisturbed(0.05, 5), Gaussian.atRest(0, 0, 100, 0, 100, 5), LogOdds.of(0.5));
        // Before each look: probability of existing and detectable, of existing and hidden, of not existing.
        double share = P_D / 0.9;
        double detectable = 0.5 * share;
        double hidden = 0.5 * (1 - share);
        double absent = 0.5;
        for (int k = 0; k < looks.length(); k++) {
            double kept = StrictMath.exp(-PERIOD_SECONDS / (hiddenSeconds * share));
            if (k > 0) {
                filter.predict(PERIOD_SECONDS);
                double all = detectable + hidden;
                detectable = kept * detectable + (1 - kept) * share * all;
                hidden = all - detectable;
            }
            boolean seen = looks.charAt(k) == 'x';
            long micros = Math.round(k * PERIOD_SECONDS * 1e6);
            filter.update(seen ? FilterScene.scan(micros, look(runs), 0, 0) : FilterScene.scan(micros, look(runs)), micros);
            if (seen) {
                // Nothing else is there that could have been seen, so it exists and is detectable.
                detectable = 1;
                hidden = 0;
                absent = 0;
            } else {
                detectable *= 1 - 0.9;
                double sum = detectable + hidden + absent;
                detectable /= sum;
                hidden /= sum;
                absent /= sum;
            }
            Component component = filter.components().get(0);
            assertThat(component.existence()).as("after look %s", k).isCloseTo(1 - absent, within(1e-9));
            assertThat(component.detectability.probability(0))
                    .as("detectable after look %s", k)
                    .isCloseTo(detectable / (detectable + hidden), within(1e-9));
        }
    }

    @Test
    void withoutTimeHiddenItIsThePlainFilterToTheBit() throws IOException {
        assertThat(state(new MissRuns(0, 0.7))).isEqualTo(state(MissRuns.NONE));
    }

    @Test
    void theShorterTheTimeHiddenTheNearerToIndependentMisses() {
        double independent = existenceAfterMisses(MissRuns.NONE, 4);
        double before = existenceAfterMisses(new MissRuns(8, 0.9), 4);
        for (double hiddenSeconds : new double[] {4, 2, 1, 0.5, 0.01}) {
            double existence = existenceAfterMisses(new MissRuns(hiddenSeconds, 0.9), 4);
            assertThat(existence).isBetween(independent, before);
            before = existence;
        }
        assertThat(before).isCloseTo(independent, within(1e-12));
    }

    @Test
    void whereItIsLikelierThanWhenDetectableItIsAlwaysDetectable() {
        double runs = existenceAfterMisses(new MissRuns(10, P_D / 2), 3);
        assertThat(runs).isCloseTo(existenceAfterMisses(MissRuns.NONE, 3), within(1e-12));
    }

    /** Behind a moored ship for a minute, in clutter: it comes out as who it was, and was shown all the time. */
    @Test
    void anObjectHiddenForAMinuteKeepsItsIdentity() {
        FilterScene scene = new FilterScene(4000, 200, 8000);
        for (long seed = 1; seed <= 10; seed++) {
            Chance chance = new Chance(new SplittableRandom(seed));
            ObjectFilter filter = scene.filter(FilterScene.settings());
            SensorModel sensor = new SensorModel(
                    "mast", 8000, DetectionProfile.constant(0.8), 20, new MissRuns(60, 0.95), ClutterLearning.OFF);
            Look look = new Look(sensor, new PlanePoint(0, 0), Optional.empty(), scene.core(), scene.apronMetres());
            Identity before = null;
            for (int k = 0; k <= 60; k++) {
                double seconds = 2.5 * k;
                boolean hidden = seconds > 60 && seconds <= 120;
                double east = -300 + 4 * seconds + 15 * chance.gaussian();
                double north = 100 + 15 * chance.gaussian();
                double clutterEast = chance.between(-2000, 2000);
                double clutterNorth = chance.between(-2000, 2000);
                long micros = Math.round(seconds * 1e6);
                filter.predict(k == 0 ? 0 : 2.5);
                filter.update(
                        hidden
                                ? FilterScene.scan(micros, look, clutterEast, clutterNorth)
                                : FilterScene.scan(micros, look, clutterEast, clutterNorth, east, north),
                        micros);
                if (seconds == 60) {
                    before = shownNear(filter, -60, 100).identity();
                }
            }
            assertThat(shownNear(filter, 300, 100).identity()).as("seed %s", seed).isEqualTo(before);
        }
    }

    private static Component shownNear(ObjectFilter filter, double east, double north) {
        return filter.components().stream()
                .filter(Component::confirmed)
                .filter(c -> Math.abs(c.density().east() - east) < 60 && Math.abs(c.density().north() - north) < 60)
                .findFirst()
                .orElseThrow(() -> new AssertionError("nothing shown near " + east + ", " + north));
    }

    private static double existenceAfterMisses(MissRuns runs, int misses) {
        ObjectFilter filter = Begun.with(
                Begun.undisturbed(0.05, 5), Gaussian.atRest(0, 0, 100, 0, 100, 5), LogOdds.of(0.9));
        for (int k = 0; k < misses; k++) {
            long micros = Math.round(k * PERIOD_SECONDS * 1e6);
            filter.predict(k == 0 ? 0 : PERIOD_SECONDS);
            filter.update(FilterScene.scan(micros, look(runs)), micros);
        }
        return filter.components().get(0).existence();
    }

    private static byte[] state(MissRuns runs) throws IOException {
        FilterScene scene = new FilterScene(4000, 200, 8000);
        SensorModel sensor = new SensorModel("mast", 8000, DetectionProfile.constant(0.8), 20, runs, ClutterLearning.OFF);
        Look look = new Look(sensor, new PlanePoint(0, 0), Optional.empty(), scene.core(), scene.apronMetres());
        ObjectFilter filter = scene.filter(FilterScene.settings());
        SplittableRandom random = new SplittableRandom(3);
        for (int k = 0; k < 20; k++) {
            double[] places = new double[30];
            for (int i = 0; i < places.length; i++) {
                places[i] = 2000 * (random.nextDouble() - 0.5);
            }
            filter.predict(k == 0 ? 0 : 2.5);
            filter.update(FilterScene.scan(k * 2_500_000L, look, places), k * 2_500_000L);
        }
        ByteArrayOutputStream bytes = new ByteArrayOutputStream();
        filter.write(new DataOutputStream(bytes));
        return bytes.toByteArray();
    }

    /** No clutter, so that a detection is the object's. */
    private static Look look(MissRuns runs) {
        SensorModel sensor = new SensorModel("mast", 1e6, DetectionProfile.constant(P_D), 0, runs, ClutterLearning.OFF);
        return new Look(
                sensor, new PlanePoint(0, 0), Optional.empty(), Begun.SCENE.core(), Begun.SCENE.apronMetres());
    }
}
