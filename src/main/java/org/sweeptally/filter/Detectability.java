package org.sweeptally.filter;

import java.util.Arrays;
import org.sweeptally.model.MissRuns;

/**
 * How probable it is that an object is detectable, sensor by sensor, given that it exists: a hidden state with two
 * values, of which only looks tell. For a sensor that has not looked yet it is the stationary share. Never changed.
 *
 * <p>With share s of time detectable and mean time h hidden, detectable times last h s / (1 - s) on average, and what
 * was known at one time is forgotten exponentially with the time constant h s: the two-state Markov chain (Gilbert
 * 1960, "Capacity of a burst-noise channel", from memory).
 */
final class Detectability {

    /** Of an object at which no sensor with runs of misses has looked. */
    static final Detectability UNKNOWN = new Detectability(new String[0], new double[0], new long[0]);

    private final String[] sensors;
    private final double[] probabilities;
    private final long[] timesMicros;

    private Detectability(String[] sensors, double[] probabilities, long[] timesMicros) {
        this.sensors = sensors;
        this.probabilities = probabilities;
        this.timesMicros = timesMicros;
    }

    /** The share of time that an object is detectable where the probability of detection is so. */
    static double share(MissRuns runs, double probabilityOfDetection) {
        return probabilityOfDetection / whenDetectable(runs, probabilityOfDetection);
    }

    /** Probability that a look detects a detectable object. */
    static double whenDetectable(MissRuns runs, double probabilityOfDetection) {
        return Math.max(runs.detectableProbability(), probabilityOfDetection);
    }

    /** Probability that the object is detectable for a sensor at a time; the share must be more than 0. */
    double at(String sensor, long timeMicros, double share, MissRuns runs) {
        int i = indexOf(sensor);
        if (i < 0) {
            return share;
        }
        double seconds = (timeMicros - timesMicros[i]) / 1e6;
        return share + (probabilities[i] - share) * StrictMath.exp(-seconds / (runs.hiddenSeconds() * share));
    }

    /** After a look of a sensor. */
    Detectability with(String sensor, double probability, long timeMicros) {
        int i = indexOf(sensor);
        int at = i < 0 ? sensors.length : i;
        int length = Math.max(sensors.length, at + 1);
        String[] names = i < 0 ? Arrays.copyOf(sensors, length) : sensors;
        double[] values = Arrays.copyOf(probabilities, length);
        long[] times = Arrays.copyOf(timesMicros, length);
        names[at] = sensor;
        values[at] = probability;
        times[at] = timeMicros;
        return new Detectability(names, values, times);
    }

    private int indexOf(String sensor) {
        for (int i = 0; i < sensors.length; i++) {
            if (sensors[i].equals(sensor)) {
                return i;
            }
        }
        return -1;
    }

    int size() {
        return sensors.length;
    }

    String sensor(int i) {
        return sensors[i];
    }

    double probability(int i) {
        return probabilities[i];
    }

    long timeMicros(int i) {
        return timesMicros[i];
    }
}
