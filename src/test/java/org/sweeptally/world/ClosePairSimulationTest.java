package org.sweeptally.world;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.Collections;
import java.util.Comparator;
import java.util.List;
import java.util.Random;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.sweeptally.filter.Component;
import org.sweeptally.filter.Identity;
import org.sweeptally.filter.ObjectFilter;

/**
 * Two craft that come together and sail side by side for 60 scans, closer than a detection can tell: what the picture
 * says of the distance between them, beside what filters say that are told which detection is whose.
 */
class ClosePairSimulationTest {

    private static final int RUNS = 60;
    private static final int APPROACH_SCANS = 60;
    private static final int TOGETHER_SCANS = 60;

    /** Mean distances between the two, over the scans in which both are shown. */
    private record Distances(double shown, double told, double bothShown, double identityStays, double identityKept) {}

    @ParameterizedTest
    @CsvSource({"20, 1.0", "30, 1.0", "20, 2.5", "30, 2.5"})
    void twoCraftSideBySideStayApart(double metresApart, double periodSeconds) {
        double shown = 0;
        double told = 0;
        double both = 0;
        double stays = 0;
        double kept = 0;
        for (long seed = 1; seed <= RUNS; seed++) {
            Distances run = run(metresApart, periodSeconds, seed);
            shown += run.shown() / RUNS;
            told += run.told() / RUNS;
            both += run.bothShown() / RUNS;
            stays += run.identityStays() / RUNS;
            kept += run.identityKept() / RUNS;
        }
        System.out.printf(
                "%s m apart, a scan each %s s, seeds 1 to %d: shown %.1f m apart, told %.1f, both shown %.3f of scans,"
                        + " last identity probability %.2f, right %.2f%n",
                metresApart, periodSeconds, RUNS, shown, told, both, stays, kept);
        assertThat(both).isGreaterThan(0.95);
        assertThat(shown / told).isBetween(0.85, 1.2);
        assertThat(stays).as("what the record says of the identity, beside how often it is right").isCloseTo(kept, within(0.25));
    }

    /** Two that cross at a right angle, within a few metres of each other, keep their identities and know it. */
    @Test
    void twoThatCrossKeepTheirIdentities() {
        int kept = 0;
        double stated = 0;
        for (long seed = 1; seed <= RUNS; seed++) {
            WorldSettings world = new WorldSettings(4000, 200, 2, 600, 0.05, 6, 2.5, 80, 15, 0.9, 20);
            ModelRun model = new ModelRun(world, 0.7, 0.3);
            SplittableRandom random = new SplittableRandom(seed);
            Random normal = new Random(random.nextLong());
            Identity eastbound = null;
            for (int k = 0; k <= 40; k++) {
                double along = 6 * 2.5 * (k - 20);
                SimulatedScan scan = detected(
                        world, k, new double[] {along, 0}, new double[] {0, along}, random, normal);
                model.update(scan);
                if (k == 12 || k == 40) {
                    Component there = nearest(model.filter(), along, 0);
                    eastbound = k == 12 ? there.identity() : eastbound;
                    kept += k == 40 && there.identity().equals(eastbound) ? 1 : 0;
                    stated += k == 40 ? there.identityProbability() / RUNS : 0;
                }
            }
        }
        System.out.printf("crossing, seeds 1 to %d: %d keep their identity, stated %.3f%n", RUNS, kept, stated);
        assertThat((double) kept / RUNS).isGreaterThan(0.9);
        assertThat(stated).isGreaterThan(0.9);
    }

    private static Component nearest(ObjectFilter filter, double east, double north) {
        return filter.components().stream()
                .filter(Component::confirmed)
                .min(Comparator.comparingDouble(c -> distance(place(c), new double[] {east, north})))
                .orElseThrow();
    }

    private static Distances run(double metresApart, double periodSeconds, long seed) {
        WorldSettings world = new WorldSettings(4000, 200, 2, 600, 0.05, 6, periodSeconds, 120, 15, 0.9, 20);
        ModelRun model = new ModelRun(world, 0.7, 0.3);
        ObjectFilter filter = model.filter();
        ToldFilter told = new ToldFilter(world);
        SplittableRandom random = new SplittableRandom(seed);
        Random normal = new Random(random.nextLong());
        double shownSum = 0;
        double toldSum = 0;
        int shown = 0;
        double stays = 1;
        Identity west = null;
        double kept = 0;
        for (int k = 0; k < APPROACH_SCANS + TOGETHER_SCANS; k++) {
            SimulatedScan scan = scan(world, metresApart, k, random, normal);
            model.update(scan);
            double[][] places = told.update(scan);
            List<Component> near = near(filter, scan);
            if (near.size() == 2 && k == 20) {
                west = western(near).identity();
            }
            if (near.size() == 2 && k == APPROACH_SCANS + TOGETHER_SCANS - 1) {
                kept = western(near).identity().equals(west) ? 1 : 0;
            }
            if (k >= APPROACH_SCANS) {
                toldSum += distance(places[0], places[1]);
                if (near.size() == 2) {
                    shown++;
                    shownSum += distance(place(near.get(0)), place(near.get(1)));
                    stays = near.get(0).identityProbability();
                }
            }
        }
        return new Distances(
                shownSum / Math.max(1, shown), toldSum / TOGETHER_SCANS, (double) shown / TOGETHER_SCANS, stays, kept);
    }

    private static List<Component> near(ObjectFilter filter, SimulatedScan scan) {
        List<Component> near = new ArrayList<>();
        for (Component component : filter.components()) {
            double nearest = Double.POSITIVE_INFINITY;
            for (TrueObject object : scan.objects()) {
                nearest = Math.min(
                        nearest, distance(place(component), new double[] {object.east(), object.north()}));
            }
            if (component.confirmed() && nearest < 60) {
                near.add(component);
            }
        }
        return near;
    }

    private static Component western(List<Component> two) {
        return two.get(0).density().east() < two.get(1).density().east() ? two.get(0) : two.get(1);
    }

    private static double[] place(Component component) {
        return new double[] {component.density().east(), component.density().north()};
    }

    private static double distance(double[] a, double[] b) {
        return Math.sqrt((a[0] - b[0]) * (a[0] - b[0]) + (a[1] - b[1]) * (a[1] - b[1]));
    }

    /** Both sail north at 5 m/s; the second comes in gently from 150 m to the east. */
    private static SimulatedScan scan(
            WorldSettings world, double metresApart, int k, SplittableRandom random, Random normal) {
        double seconds = k * world.periodSeconds();
        double left = Math.max(0, 1 - (double) k / APPROACH_SCANS);
        double closing = left * left * (3 - 2 * left);
        double north = -500 + 5 * seconds;
        double east = metresApart + (150 - metresApart) * closing;
        return detected(world, k, new double[] {0, north}, new double[] {east, north}, random, normal);
    }

    private static SimulatedScan detected(
            WorldSettings world, int k, double[] first, double[] second, SplittableRandom random, Random normal) {
        double[][] places = {first, second};
        List<TrueObject> objects = new ArrayList<>();
        List<SimulatedScan.Detection> detections = new ArrayList<>();
        for (int i = 0; i < 2; i++) {
            objects.add(new TrueObject(i, places[i][0], places[i][1], 0, 0, true, true));
            if (random.nextDouble() < world.probabilityOfDetection()) {
                detections.add(new SimulatedScan.Detection(
                        places[i][0] + 15 * normal.nextGaussian(), places[i][1] + 15 * normal.nextGaussian(), i));
            }
        }
        for (int i = 0; i < 20; i++) {
            detections.add(new SimulatedScan.Detection(
                    4000 * (random.nextDouble() - 0.5), 4000 * (random.nextDouble() - 0.5), SimulatedScan.CLUTTER));
        }
        Collections.shuffle(detections, normal);
        return new SimulatedScan(k * world.periodSeconds(), detections, objects);
    }
}
