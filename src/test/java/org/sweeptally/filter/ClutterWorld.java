package org.sweeptally.filter;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.SplittableRandom;
import java.util.TreeMap;
import java.util.TreeSet;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.model.ClutterLearning;
import org.sweeptally.model.DetectionProfile;
import org.sweeptally.model.FieldOfView;
import org.sweeptally.model.Look;
import org.sweeptally.model.MissRuns;
import org.sweeptally.model.SensorModel;

/**
 * An invented square of water in which false detections are four times as dense in one corner as the sensor's settings
 * say, and half as dense in another, with objects that are there all along, come for a while, or lie still for an hour.
 */
final class ClutterWorld {

    static final double PERIOD = 2.5;
    static final double DENSITY = 2e-6;
    static final double SECONDS = 7200;

    /** Dense clutter: west, south, east, north. */
    static final double[] DENSE = {600, 600, 1500, 1500};

    static final double[] THIN = {-1500, 600, -600, 1500};

    /** Something real, from when to when, and where it is then. */
    record Real(String name, double from, double until, java.util.function.DoubleFunction<double[]> place) {}

    static final List<Real> REALS = reals();

    /**
     * What came of a run: false births in the last hour, scans shown and there by object, seconds until first shown.
     */
    static final class Outcome {
        int falseBirthsInDense;
        int falseBirthsElsewhere;
        final TreeMap<String, int[]> shown = new TreeMap<>();
        final TreeMap<String, Double> delay = new TreeMap<>();
        ClutterMap map;
        ObjectFilter filter;
    }

    private final FilterScene scene = new FilterScene(4000, 200, 6000);
    private final Look look;

    ClutterWorld(ClutterLearning learning) {
        double perScan = DENSITY * Math.PI * 6000 * 6000;
        SensorModel radar =
                new SensorModel("mast", 6000, DetectionProfile.constant(0.9), perScan, MissRuns.NONE, learning);
        look = new Look(radar, FieldOfView.disc(new PlanePoint(0, 0), 6000), Optional.empty(), scene.core(), 200);
    }

    private static List<Real> reals() {
        List<Real> reals = new ArrayList<>();
        reals.add(new Real("buoy", 0, SECONDS, t -> new double[] {-1000, -1000}));
        reals.add(new Real("patrol", 0, SECONDS, t -> new double[] {
            800 * Math.cos(t * 5 / 800), -400 + 800 * Math.sin(t * 5 / 800)
        }));
        reals.add(new Real("moored", 2400, 6000, t -> new double[] {-250, 1250}));
        reals.add(new Real("moored in dense clutter", 2400, 6000, t -> new double[] {1050, 1050}));
        for (int i = 0; i < 20; i++) {
            double from = 300 * i + 700;
            double north = -1800 + 180 * i;
            reals.add(new Real("passing " + i, from, from + 200, t -> new double[] {-1200 + 9 * (t - from), north}));
        }
        return reals;
    }

    Outcome run(long seed) {
        SplittableRandom random = new SplittableRandom(seed);
        Outcome outcome = new Outcome();
        ObjectFilter filter = scene.filter(FilterScene.settings());
        TreeSet<Identity> born = new TreeSet<>();
        for (double seconds = 0; seconds < SECONDS; seconds += PERIOD) {
            long micros = Math.round(seconds * 1e6);
            filter.predict(seconds == 0 ? 0 : PERIOD);
            filter.update(FilterScene.scan(micros, look, detections(seconds, random)), micros);
            score(filter, seconds, born, outcome);
        }
        outcome.filter = filter;
        outcome.map = filter.clutterMap();
        return outcome;
    }

    private double[] detections(double seconds, SplittableRandom random) {
        List<double[]> all = new ArrayList<>();
        for (Real real : REALS) {
            if (seconds >= real.from() && seconds < real.until() && random.nextDouble() < 0.9) {
                double[] at = real.place().apply(seconds);
                all.add(new double[] {at[0] + 15 * gaussian(random), at[1] + 15 * gaussian(random)});
            }
        }
        double half = 2200;
        double side = 2 * half;
        for (double left = 4 * DENSITY * side * side + Math.log(1 - random.nextDouble());
                left > 0;
                left += Math.log(1 - random.nextDouble())) {
            double[] at = {random.nextDouble(-half, half), random.nextDouble(-half, half)};
            double kept = isIn(DENSE, at) ? 1 : isIn(THIN, at) ? 0.125 : 0.25;
            if (random.nextDouble() < kept) {
                all.add(at);
            }
        }
        double[] flat = new double[2 * all.size()];
        for (int i = 0; i < all.size(); i++) {
            flat[2 * i] = all.get(i)[0];
            flat[2 * i + 1] = all.get(i)[1];
        }
        return flat;
    }

    private static void score(ObjectFilter filter, double seconds, TreeSet<Identity> born, Outcome outcome) {
        for (Component component : filter.components()) {
            if (component.confirmed() && born.add(component.identity()) && seconds > SECONDS / 2) {
                double[] at = {component.density().east(), component.density().north()};
                if (REALS.stream().noneMatch(real -> isThere(real, seconds) && distance(real.place().apply(seconds), at) < 80)) {
                    outcome.falseBirthsInDense += isIn(DENSE, at) ? 1 : 0;
                    outcome.falseBirthsElsewhere += isIn(DENSE, at) ? 0 : 1;
                }
            }
        }
        for (Real real : REALS) {
            if (isThere(real, seconds)) {
                int[] counts = outcome.shown.computeIfAbsent(real.name(), name -> new int[2]);
                double[] truth = real.place().apply(seconds);
                boolean shown = filter.components().stream().anyMatch(c -> c.confirmed()
                        && distance(truth, new double[] {c.density().east(), c.density().north()}) < 60);
                counts[0] += shown ? 1 : 0;
                counts[1]++;
                if (shown) {
                    outcome.delay.putIfAbsent(real.name(), seconds - real.from());
                }
            }
        }
    }

    private static boolean isThere(Real real, double seconds) {
        return seconds >= real.from() && seconds < real.until();
    }

    private static double distance(double[] a, double[] b) {
        return Math.hypot(a[0] - b[0], a[1] - b[1]);
    }

    static boolean isIn(double[] box, double[] at) {
        return at[0] >= box[0] && at[1] >= box[1] && at[0] < box[2] && at[1] < box[3];
    }

    private static double gaussian(SplittableRandom random) {
        return Math.sqrt(-2 * Math.log(1 - random.nextDouble())) * Math.cos(2 * Math.PI * random.nextDouble());
    }
}
