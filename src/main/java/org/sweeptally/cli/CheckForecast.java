package org.sweeptally.cli;

import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.DataInputStream;
import java.io.DataOutputStream;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Comparator;
import java.util.List;
import java.util.PriorityQueue;
import java.util.SplittableRandom;
import java.util.TreeSet;
import org.sweeptally.filter.Component;
import org.sweeptally.filter.FilterSettings;
import org.sweeptally.filter.Identity;
import org.sweeptally.filter.ObjectFilter;
import org.sweeptally.filter.Observation;
import org.sweeptally.filter.Scan;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.model.Look;
import org.sweeptally.model.PositionMeasurement;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.SensorSettings.PositionNoise;

/**
 * What to expect of a region, found by running the real filter on simulated scans: clutter alone for false births, one
 * steady object for the time to confirm it. Seeded, so that the same site gives the same answer.
 */
final class CheckForecast {

    private static final long SEED = 20310501;

    /** Work of the simulation of clutter. */
    private static final int CLUTTER_SCANS = 3000;
    private static final long CLUTTER_DETECTIONS = 60_000;

    private static final int TRIALS = 200;
    private static final int TRIAL_SCANS = 60;

    /** Empty scans before anything is counted, in which the unseen part settles. */
    private static final int SETTLING_SCANS = 60;

    private final SiteScene scene;
    private final FilterSettings settings;
    private final List<SensorSettings> sensors;

    CheckForecast(SiteScene scene) {
        this.scene = scene;
        this.settings = scene.site().filterSettings(scene.region());
        this.sensors = scene.sensors();
    }

    /**
     * Births from clutter alone.
     *
     * @param hours simulated
     */
    record FalseBirths(long births, int scans, double hours) {}

    /**
     * Scans that reach the object, of whatever sensor, from that of the first detection to that of the confirmation,
     * both counted.
     *
     * @param median    of the trials in which it was confirmed
     * @param ninetieth so many scans are enough in 90 % of them
     * @param confirmed trials in which it was
     */
    record ScansToConfirm(int median, int ninetieth, int confirmed, int trials) {}

    FalseBirths falseBirths() {
        SplittableRandom random = new SplittableRandom(SEED);
        Timetable timetable = new Timetable();
        ObjectFilter filter = settled(timetable);
        double begin = timetable.seconds;
        TreeSet<Identity> born = new TreeSet<>();
        long detections = 0;
        int scans = 0;
        while (scans < CLUTTER_SCANS && detections < CLUTTER_DETECTIONS) {
            SensorSettings sensor = timetable.next(filter);
            List<Observation> clutter = clutter(sensor, random);
            update(filter, sensor, clutter, timetable);
            detections += clutter.size();
            scans++;
            filter.components().stream().filter(this::isShown).forEach(c -> born.add(c.identity()));
        }
        return new FalseBirths(born.size(), scans, (timetable.seconds - begin) / 3600);
    }

    private boolean isShown(Component component) {
        return component.confirmed()
                && scene.core().contains(component.density().east(), component.density().north());
    }

    /** False detections of a scan, uniform over what the sensor sees and the region hears. */
    private List<Observation> clutter(SensorSettings sensor, SplittableRandom random) {
        PlanePoint at = scene.positionOf(sensor);
        Look look = scene.look(sensor);
        List<Observation> observations = new ArrayList<>();
        double disc = StrictMath.PI * sensor.reachMetres() * sensor.reachMetres();
        for (int left = poisson(look.clutterPerSquareMetre() * disc, random); left > 0; left--) {
            double range = sensor.reachMetres() * Math.sqrt(random.nextDouble());
            double angle = 2 * StrictMath.PI * random.nextDouble();
            double east = at.eastMetres() + range * StrictMath.sin(angle);
            double north = at.northMetres() + range * StrictMath.cos(angle);
            if (look.probabilityOfDetection(east, north) > 0) {
                observations.add(observation(sensor, east, north, observations.size()));
            }
        }
        return observations;
    }

    /** Time to confirm an object at a typical place that crosses it at a typical speed. */
    ScansToConfirm scansToConfirm(PlanePoint place) {
        SplittableRandom random = new SplittableRandom(SEED);
        Timetable timetable = new Timetable();
        byte[] settled = bytes(settled(timetable));
        int[] scans = new int[TRIALS];
        int confirmed = 0;
        for (int trial = 0; trial < TRIALS; trial++) {
            int needed = trial(read(settled), timetable.copy(), place, random);
            if (needed > 0) {
                scans[confirmed++] = needed;
            }
        }
        Arrays.sort(scans, 0, confirmed);
        return new ScansToConfirm(
                confirmed == 0 ? 0 : scans[confirmed / 2],
                confirmed == 0 ? 0 : scans[(9 * confirmed + 9) / 10 - 1],
                confirmed,
                TRIALS);
    }

    /** How many scans one object needed, 0 if too many. */
    private int trial(ObjectFilter filter, Timetable timetable, PlanePoint place, SplittableRandom random) {
        double heading = 2 * StrictMath.PI * random.nextDouble();
        double speed = scene.site().motion().typicalSpeedMetresPerSecond();
        double begin = timetable.seconds;
        int sinceFirst = 0;
        for (int scan = 0; scan < TRIAL_SCANS; scan++) {
            SensorSettings sensor = timetable.next(filter);
            double way = speed * (timetable.seconds - begin);
            double east = place.eastMetres() + way * StrictMath.sin(heading);
            double north = place.northMetres() + way * StrictMath.cos(heading);
            double detection = scene.look(sensor).probabilityOfDetection(east, north);
            List<Observation> seen = new ArrayList<>();
            if (random.nextDouble() < detection) {
                PositionNoise noise = noise(sensor, east, north);
                double along = noise.alongSigmaMetres() * gaussian(random);
                double across = noise.acrossSigmaMetres() * gaussian(random);
                double[] sight = lineOfSight(sensor, east, north);
                seen.add(observation(
                        sensor,
                        east + along * sight[0] + across * sight[1],
                        north + along * sight[1] - across * sight[0],
                        0));
            }
            update(filter, sensor, seen, timetable);
            sinceFirst += !seen.isEmpty() || sinceFirst > 0 && detection > 0 ? 1 : 0;
            if (filter.components().stream().anyMatch(Component::confirmed)) {
                return sinceFirst;
            }
        }
        return 0;
    }

    private ObjectFilter settled(Timetable timetable) {
        ObjectFilter filter = new ObjectFilter(settings, scene.core(), scene.region().apronMetres());
        for (int scan = 0; scan < SETTLING_SCANS; scan++) {
            update(filter, timetable.next(filter), List.of(), timetable);
        }
        return filter;
    }

    private void update(ObjectFilter filter, SensorSettings sensor, List<Observation> seen, Timetable timetable) {
        long micros = Math.round(timetable.seconds * 1e6);
        filter.update(new Scan(sensor.name(), micros, scene.look(sensor), seen), micros);
    }

    private Observation observation(SensorSettings sensor, double east, double north, int index) {
        double[] sight = lineOfSight(sensor, east, north);
        PositionNoise noise = noise(sensor, east, north);
        double along = noise.alongSigmaMetres() * noise.alongSigmaMetres();
        double across = noise.acrossSigmaMetres() * noise.acrossSigmaMetres();
        PositionMeasurement measured = new PositionMeasurement(
                east,
                north,
                along * sight[0] * sight[0] + across * sight[1] * sight[1],
                (along - across) * sight[0] * sight[1],
                along * sight[1] * sight[1] + across * sight[0] * sight[0],
                0);
        return new Observation(measured, 0, index, null, null);
    }

    /** Of a place; what a polar sensor measures is taken as one, and without its range rate, which would only help. */
    private PositionNoise noise(SensorSettings sensor, double east, double north) {
        PlanePoint at = scene.positionOf(sensor);
        double e = east - at.eastMetres();
        double n = north - at.northMetres();
        return sensor.noiseAt(Math.sqrt(e * e + n * n));
    }

    /** The unit vector, east and north, from a sensor to a place; of the sensor's own place, north. */
    private double[] lineOfSight(SensorSettings sensor, double east, double north) {
        PlanePoint at = scene.positionOf(sensor);
        double e = east - at.eastMetres();
        double n = north - at.northMetres();
        double range = Math.sqrt(e * e + n * n);
        return range == 0 ? new double[] {0, 1} : new double[] {e / range, n / range};
    }

    /** Whose turn it is: every sensor at its usual interval. */
    private final class Timetable {
        private final PriorityQueue<double[]> due = new PriorityQueue<>(
                Comparator.<double[]>comparingDouble(d -> d[0]).thenComparingDouble(d -> d[1]));
        private double seconds;

        Timetable() {
            for (int i = 0; i < sensors.size(); i++) {
                due.add(new double[] {sensors.get(i).intervalSeconds(), i});
            }
        }

        /** The next sensor; the filter is predicted to its scan. */
        SensorSettings next(ObjectFilter filter) {
            double[] turn = due.remove();
            SensorSettings sensor = sensors.get((int) turn[1]);
            filter.predict(turn[0] - seconds);
            seconds = turn[0];
            due.add(new double[] {seconds + sensor.intervalSeconds(), turn[1]});
            return sensor;
        }

        Timetable copy() {
            Timetable copy = new Timetable();
            copy.due.clear();
            copy.due.addAll(due);
            copy.seconds = seconds;
            return copy;
        }
    }

    private static byte[] bytes(ObjectFilter filter) {
        try {
            ByteArrayOutputStream bytes = new ByteArrayOutputStream();
            filter.write(new DataOutputStream(bytes));
            return bytes.toByteArray();
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    private ObjectFilter read(byte[] bytes) {
        try {
            DataInputStream in = new DataInputStream(new ByteArrayInputStream(bytes));
            return ObjectFilter.read(in, settings, scene.core(), scene.region().apronMetres());
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    /** By counting the events of a unit-rate process (Knuth 1969, "Seminumerical Algorithms", 3.4.1, from memory). */
    private static int poisson(double mean, SplittableRandom random) {
        int events = -1;
        for (double left = mean; left >= 0; events++) {
            left += StrictMath.log(1 - random.nextDouble());
        }
        return events;
    }

    /** Box and Muller 1958. */
    private static double gaussian(SplittableRandom random) {
        double radius = Math.sqrt(-2 * StrictMath.log(1 - random.nextDouble()));
        return radius * StrictMath.cos(2 * StrictMath.PI * random.nextDouble());
    }
}
