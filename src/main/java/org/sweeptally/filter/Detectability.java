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

    /**
     * What a look may find of an object.
     *
     * @param detectable     probability that the object is detectable
     * @param whenDetectable probability that the look detects it then
     * @param times          how many times as probable as on average detection is
     */
    record Prospect(double detectable, double whenDetectable, double times) {

        /** Of a look that tells nothing of detectability: its misses have no runs, or it cannot see the object. */
        static final Prospect AS_USUAL = new Prospect(Double.NaN, Double.NaN, 1);

        boolean tells() {
            return !Double.isNaN(detectable);
        }

        /** Probability that the object is detectable, if it exists and the look missed it. */
        double thoughMissed() {
            double missed = 1 - detectable * whenDetectable;
            return missed > 0 ? detectable * (1 - whenDetectable) / missed : 0;
        }
    }

    /** @param onAverage probability that the look detects an object of which nothing else is known, at its place */
    Prospect prospect(Scan scan, long timeMicros, double onAverage) {
        MissRuns runs = scan.look().sensor().misses();
        if (runs.hiddenSeconds() == 0 || onAverage == 0) {
            return Prospect.AS_USUAL;
        }
        double whenDetectable = Math.max(runs.detectableProbability(), onAverage);
        double share = onAverage / whenDetectable;
        double detectable = at(scan.sensor(), timeMicros, share, runs);
        return new Prospect(detectable, whenDetectable, detectable / share);
    }

    private double at(String sensor, long timeMicros, double share, MissRuns runs) {
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
