package org.sweeptally.filter;

import org.ejml.data.DMatrix4;
import org.sweeptally.model.Gaussian;
import org.sweeptally.model.Measurement;
import org.sweeptally.model.MeasurementUpdate;

/** Sums up what may have become of banks in a scan, mode by mode, and gives the one bank with the moments of it all. */
final class BankSum {

    private final Modes modes;
    private final Mixture[] mixtures;
    private final MeasurementUpdate update = new MeasurementUpdate();
    private final double[] step = new double[4];

    BankSum(Modes modes) {
        this.modes = modes;
        mixtures = new Mixture[modes.count()];
        for (int m = 0; m < mixtures.length; m++) {
            mixtures[m] = new Mixture();
        }
    }

    /** Begins anew, about the means of a bank that is near all that will be added. */
    void reset(Bank about) {
        for (int m = 0; m < mixtures.length; m++) {
            DMatrix4 mean = (about.densities[m] == null ? about.overall() : about.densities[m]).mean;
            mixtures[m].reset(mean.a1, mean.a2, mean.a3, mean.a4);
        }
    }

    /** Begins anew about an observed place. */
    void reset(Measurement z) {
        for (Mixture mixture : mixtures) {
            mixture.reset(z.east(), z.north(), 0, 0);
        }
    }

    /** Adds a bank as it is. */
    void add(double weight, Bank bank) {
        for (int m = 0; m < mixtures.length; m++) {
            if (bank.weights[m] > 0) {
                mixtures[m].add(weight * bank.weights[m], bank.densities[m]);
            }
        }
    }

    /** Adds a density to one mode. */
    void add(double weight, Gaussian density, int mode) {
        mixtures[mode].add(weight, density);
    }

    /**
     * Adds a bank updated by observations, each with a weight of its own.
     *
     * @param pairs   which observations with which weights
     */
    void add(Bank prior, Pairs pairs) {
        for (int m = 0; m < mixtures.length; m++) {
            if (prior.weights[m] == 0) {
                continue;
            }
            DMatrix4 mean = prior.densities[m].mean;
            Mixture mixture = mixtures[m];
            boolean begun = false;
            for (int i = 0; i < pairs.count(); i++) {
                double weight = pairs.weight(i, m);
                if (weight > 0) {
                    if (!begun) {
                        update.prior(prior.densities[m]);
                        begun = true;
                    }
                    if (update.measure(pairs.measurement(i))) {
                        update.step(step, 0);
                        mixture.add(weight, mean, step, update.updatedCovariance());
                    }
                }
            }
        }
    }

    /** Observations that may have updated a bank. */
    interface Pairs {

        int count();

        /** Weight of the i-th with the object in a mode. */
        double weight(int i, int mode);

        Measurement measurement(int i);
    }

    double weight() {
        double sum = 0;
        for (Mixture mixture : mixtures) {
            sum += mixture.weight();
        }
        return sum;
    }

    /** The bank with the sum's moments; its weight must be more than 0. */
    Bank matched() {
        double sum = weight();
        double[] weights = new double[mixtures.length];
        Gaussian[] densities = new Gaussian[mixtures.length];
        for (int m = 0; m < mixtures.length; m++) {
            weights[m] = mixtures[m].weight() / sum;
            densities[m] = weights[m] > 0 ? mixtures[m].matched() : null;
        }
        modes.settle(weights, densities);
        return new Bank(weights, densities);
    }
}
