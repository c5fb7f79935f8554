package org.sweeptally.world;

import java.util.ArrayList;
import java.util.List;
import java.util.SplittableRandom;
import org.sweeptally.demo.Chance;

/**
 * An invented world that is as the filter believes it to be: objects come into being anywhere, uniformly in place and
 * time, with a Gaussian velocity; live for an exponential time; move with continuous white noise acceleration, exactly
 * discretised. The sensor sees those near enough with a constant probability, with Gaussian errors, among uniform
 * clutter.
 *
 * <p>Objects live on an area so much larger than what the sensor sees that what comes into view during a run is what
 * would come from an endless plane; so the square loses and gains objects across its border, at a steady density.
 */
public final class SimulatedWorld {

    /** Whoever is farther away than a run at so many standard deviations of the first speed never comes into view. */
    private static final double FOUR_SIGMAS = 4;

    private final WorldSettings settings;
    private final Chance life;
    private final Chance sensor;
    private final Chance falsehood;
    private final double half;

    private List<double[]> states = new ArrayList<>();
    private List<Integer> ids = new ArrayList<>();
    private int nextId;

    private SimulatedWorld(WorldSettings settings, long seed) {
        this.settings = settings;
        SplittableRandom root = new SplittableRandom(seed);
        life = new Chance(root.split());
        sensor = new Chance(root.split());
        falsehood = new Chance(root.split());
        double run = settings.scans() * settings.periodSeconds();
        half = settings.sideMetres() / 2 + settings.marginMetres() + FOUR_SIGMAS * settings.speedSigma() * run;
    }

    /**
     * All scans of a run. Equal seeds give equal objects, and equal detections of them, whatever the clutter.
     */
    public static List<SimulatedScan> scans(WorldSettings settings, long seed) {
        SimulatedWorld world = new SimulatedWorld(settings, seed);
        world.populate();
        List<SimulatedScan> scans = new ArrayList<>();
        for (int k = 0; k < settings.scans(); k++) {
            if (k > 0) {
                world.pass(settings.periodSeconds());
            }
            scans.add(world.look(k * settings.periodSeconds()));
        }
        return scans;
    }

    private void populate() {
        int objects = life.poisson(settings.objectsPerSquareMetre() * 4 * half * half);
        for (int i = 0; i < objects; i++) {
            add(anywhere());
        }
    }

    private void pass(double seconds) {
        List<double[]> before = states;
        List<Integer> numbers = ids;
        states = new ArrayList<>();
        ids = new ArrayList<>();
        for (int i = 0; i < before.size(); i++) {
            if (life.happens(survival(seconds))) {
                states.add(moved(before.get(i), seconds));
                ids.add(numbers.get(i));
            }
        }
        double birthsPerSecond = settings.objectsPerSquareMetre() * 4 * half * half / settings.lifetimeSeconds();
        int births = life.poisson(birthsPerSecond * seconds);
        for (int i = 0; i < births; i++) {
            double age = life.between(0, seconds);
            double[] state = moved(anywhere(), age);
            if (life.happens(survival(age))) {
                add(state);
            }
        }
    }

    private double survival(double seconds) {
        return StrictMath.exp(-seconds / settings.lifetimeSeconds());
    }

    private void add(double[] state) {
        states.add(state);
        ids.add(nextId++);
    }

    private double[] anywhere() {
        return new double[] {
            life.between(-half, half),
            life.between(-half, half),
            settings.speedSigma() * life.gaussian(),
            settings.speedSigma() * life.gaussian()
        };
    }

    /**
     * With u, v independent and of variance 1: velocity changes by sqrt(q t) u, place by t velocity + sqrt(q t^3) (u /
     * 2 + v / sqrt(12)), which have the variances q t and q t^3 / 3 and the covariance q t^2 / 2.
     */
    private double[] moved(double[] x, double seconds) {
        double[] y = x.clone();
        double kick = Math.sqrt(settings.accelerationNoise() * seconds);
        for (int axis = 0; axis < 2; axis++) {
            double u = life.gaussian();
            double v = life.gaussian();
            y[axis] += seconds * (x[axis + 2] + kick * (0.5 * u + v / Math.sqrt(12)));
            y[axis + 2] += kick * u;
        }
        return y;
    }

    private SimulatedScan look(double seconds) {
        List<SimulatedScan.Detection> detections = new ArrayList<>();
        List<TrueObject> objects = new ArrayList<>();
        for (int i = 0; i < states.size(); i++) {
            double[] x = states.get(i);
            boolean seen = settings.sees(x[0], x[1]);
            objects.add(new TrueObject(ids.get(i), x[0], x[1], x[2], x[3], settings.holds(x[0], x[1]), seen));
            if (seen && sensor.happens(settings.probabilityOfDetection())) {
                double sigma = settings.sigmaMetres();
                detections.add(new SimulatedScan.Detection(
                        x[0] + sigma * sensor.gaussian(), x[1] + sigma * sensor.gaussian(), ids.get(i)));
            }
        }
        double field = settings.sideMetres() / 2 + settings.marginMetres();
        int clutter = falsehood.poisson(settings.clutterPerSquareMetre() * 4 * field * field);
        for (int i = 0; i < clutter; i++) {
            double east = falsehood.between(-field, field);
            double north = falsehood.between(-field, field);
            if (settings.sees(east, north)) {
                detections.add(new SimulatedScan.Detection(east, north, SimulatedScan.CLUTTER));
            }
        }
        shuffle(detections);
        return new SimulatedScan(seconds, detections, objects);
    }

    private void shuffle(List<SimulatedScan.Detection> detections) {
        for (int i = detections.size() - 1; i > 0; i--) {
            int j = falsehood.below(i + 1);
            SimulatedScan.Detection swap = detections.get(i);
            detections.set(i, detections.get(j));
            detections.set(j, swap);
        }
    }
}
