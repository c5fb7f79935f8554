package org.sweeptally.bench;

import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.DataInputStream;
import java.io.DataOutputStream;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.util.ArrayList;
import java.util.List;
import java.util.SplittableRandom;
import org.sweeptally.filter.Counters;
import org.sweeptally.filter.FilterScene;
import org.sweeptally.filter.FilterSettings;
import org.sweeptally.filter.ObjectFilter;
import org.sweeptally.filter.Observation;
import org.sweeptally.filter.Scan;
import org.sweeptally.model.Look;
import org.sweeptally.model.PositionMeasurement;

/**
 * Invented objects at the density of 20 on 16 square kilometres, as many false detections a scan as objects, and a filter
 * that has followed them for a while; and the next scan.
 */
final class ScanScene {

    static final double PERIOD_SECONDS = 2.5;

    private static final double SIGMA_METRES = 15;
    private static final double SPEED_SIGMA = 6;
    private static final double PROBABILITY_OF_DETECTION = 0.9;
    private static final int SETTLING_SCANS = 30;

    private final int objects;
    private final double half;
    private final FilterScene scene;
    private final FilterSettings settings;
    private final Look look;
    private final double[][] states;
    private final SplittableRandom random = new SplittableRandom(1);
    private final byte[] settled;
    private final Scan next;
    private final long gatedPairs;

    ScanScene(int objects) {
        this.objects = objects;
        double density = 20 / 16e6;
        double side = Math.sqrt(objects / density);
        half = side / 2;
        scene = new FilterScene(side, 0, 10 * side);
        look = scene.look(PROBABILITY_OF_DETECTION, density);
        settings = new FilterSettings(
                0.05, SPEED_SIGMA, 600, density / 600, density, density, 0.7, 0.3, 0.1, 5, Math.max(25, side / 48),
                200_000, 500_000, 1_000_000, 1000);
        states = new double[objects][];
        for (int i = 0; i < objects; i++) {
            states[i] = new double[] {
                between(-half, half), between(-half, half), SPEED_SIGMA * gaussian(), SPEED_SIGMA * gaussian()
            };
        }
        ObjectFilter filter = scene.filter(settings);
        for (int k = 0; k < SETTLING_SCANS; k++) {
            filter.predict(k == 0 ? 0 : PERIOD_SECONDS);
            filter.update(scan(k), k * 2_500_000L);
        }
        settled = bytes(filter);
        next = scan(SETTLING_SCANS);
        ObjectFilter after = restored();
        long before = pairs(after);
        step(after);
        gatedPairs = pairs(after) - before;
    }

    /** The filter before the next scan; each call gives another one, equal to the last bit. */
    ObjectFilter restored() {
        try {
            DataInputStream in = new DataInputStream(new ByteArrayInputStream(settled));
            return ObjectFilter.read(in, settings, scene.core(), scene.apronMetres());
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    /** What a region does with a scan: predict, update, count. Returns something of each, so that nothing is left out. */
    double step(ObjectFilter filter) {
        filter.predict(PERIOD_SECONDS);
        filter.update(next, SETTLING_SCANS * 2_500_000L);
        return filter.count().variance() + filter.expectedUnseen();
    }

    /** Pairs of an observation with a component or a term in whose gate it lies, in the next scan. */
    long gatedPairs() {
        return gatedPairs;
    }

    private static long pairs(ObjectFilter filter) {
        return filter.counters().get(Counters.Name.GATED_COMPONENT_PAIRS)
                + filter.counters().get(Counters.Name.GATED_TERM_PAIRS);
    }

    static byte[] bytes(ObjectFilter filter) {
        try {
            ByteArrayOutputStream bytes = new ByteArrayOutputStream();
            filter.write(new DataOutputStream(bytes));
            return bytes.toByteArray();
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    private Scan scan(int k) {
        List<Observation> observations = new ArrayList<>();
        for (double[] x : states) {
            x[0] += k == 0 ? 0 : PERIOD_SECONDS * x[2];
            x[1] += k == 0 ? 0 : PERIOD_SECONDS * x[3];
            boolean inside = Math.abs(x[0]) < half && Math.abs(x[1]) < half;
            if (inside && random.nextDouble() < PROBABILITY_OF_DETECTION) {
                observe(observations, x[0] + SIGMA_METRES * gaussian(), x[1] + SIGMA_METRES * gaussian());
            }
        }
        for (int i = 0; i < objects; i++) {
            observe(observations, between(-half, half), between(-half, half));
        }
        return new Scan("mast", k * 2_500_000L, look, observations);
    }

    private static void observe(List<Observation> observations, double east, double north) {
        PositionMeasurement z = PositionMeasurement.at(east, north, SIGMA_METRES);
        observations.add(new Observation(z, 0, observations.size(), null, null));
    }

    private double between(double least, double most) {
        return least + (most - least) * random.nextDouble();
    }

    private double gaussian() {
        double radius = Math.sqrt(-2 * StrictMath.log(1 - random.nextDouble()));
        return radius * StrictMath.cos(2 * StrictMath.PI * random.nextDouble());
    }
}
