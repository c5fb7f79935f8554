package org.sweeptally.filter;

import org.ejml.data.DMatrix4;
import org.sweeptally.model.Gaussian;

/**
 * What is known of one object, if it exists: for each {@linkplain Modes way of moving} its probability and a Gaussian
 * over [east, north, east velocity, north velocity], as interacting multiple models keep it (Blom and Bar-Shalom 1988,
 * "The interacting multiple model algorithm for systems with Markovian switching coefficients", IEEE TAC
 * 33(8):780-783).
 */
final class Bank {

    /** Probabilities of the modes; they sum to 1. */
    final double[] weights;

    /** By mode; null where the probability is 0. */
    final Gaussian[] densities;

    private final Mixture mixture;
    private Gaussian overall;

    Bank(double[] weights, Gaussian[] densities) {
        this.weights = weights;
        this.densities = densities;
        this.mixture = weights.length == 1 ? null : new Mixture();
    }

    /** The only mode there is. */
    static Bank of(Gaussian density) {
        return new Bank(new double[] {1}, new Gaussian[] {density});
    }

    int modes() {
        return weights.length;
    }

    /** The Gaussian with the mean and the covariance of all modes together. */
    Gaussian overall() {
        if (weights.length == 1) {
            return densities[0];
        }
        if (overall == null) {
            overall = matched();
        }
        return overall;
    }

    private Gaussian matched() {
        DMatrix4 about = densities[likeliest()].mean;
        mixture.reset(about.a1, about.a2, about.a3, about.a4);
        for (int m = 0; m < weights.length; m++) {
            if (weights[m] > 0) {
                mixture.add(weights[m], densities[m]);
            }
        }
        return mixture.matched();
    }

    private int likeliest() {
        int best = 0;
        for (int m = 1; m < weights.length; m++) {
            best = weights[m] > weights[best] ? m : best;
        }
        return best;
    }

    /** To be called by whoever changed the modes in place. */
    void changed() {
        overall = null;
    }
}
