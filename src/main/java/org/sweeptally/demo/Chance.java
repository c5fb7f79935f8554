package org.sweeptally.demo;

import java.util.SplittableRandom;

/**
 * Random numbers that are the same on any machine: the generator's bits are specified, and StrictMath does the rest.
 */
public final class Chance {

    private final SplittableRandom random;
    private double spare = Double.NaN;

    public Chance(SplittableRandom random) {
        this.random = random;
    }

    /** Uniform between two numbers. */
    public double between(double from, double to) {
        return from + (to - from) * random.nextDouble();
    }

    public boolean happens(double probability) {
        return random.nextDouble() < probability;
    }

    public int below(int bound) {
        return random.nextInt(bound);
    }

    /** Mean 0, variance 1 (Box and Muller 1958). */
    public double gaussian() {
        if (!Double.isNaN(spare)) {
            double value = spare;
            spare = Double.NaN;
            return value;
        }
        double radius = Math.sqrt(-2 * StrictMath.log(1 - random.nextDouble()));
        double angle = 2 * StrictMath.PI * random.nextDouble();
        spare = radius * StrictMath.sin(angle);
        return radius * StrictMath.cos(angle);
    }

    /** A Poisson number, by counting arrivals of rate 1 until the mean is used up. */
    public int poisson(double mean) {
        int arrivals = 0;
        double time = -StrictMath.log(1 - random.nextDouble());
        while (time < mean) {
            arrivals++;
            time -= StrictMath.log(1 - random.nextDouble());
        }
        return arrivals;
    }
}
