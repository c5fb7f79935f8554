package org.sweeptally.filter;

import org.sweeptally.model.Measurement;
import org.sweeptally.model.MeasurementUpdate;
import org.sweeptally.model.PolarMeasurement;

/**
 * The bank of an object that an observation shows for the first time: what the unseen part holds there, updated by it.
 * One observation after the other: {@link #begin}, then whatever it may come from, then {@link #bank}.
 */
final class FirstSight {

    private final Modes modes;
    private final BankSum sum;
    private final MeasurementUpdate update = new MeasurementUpdate();
    private final Term term = new Term();
    private Measurement z;

    FirstSight(Modes modes) {
        this.modes = modes;
        this.sum = new BankSum(modes);
        this.term.likelihoods = new double[modes.count()];
    }

    void begin(Measurement observed) {
        z = observed;
        sum.reset(observed);
    }

    /** Adds objects of a profile's grid; a range rate says how probable it is under each of the profile's modes. */
    void addGrid(double weight, int profile) {
        double ratio = weight > 0 ? gridRatio(z, profile) : 1;
        for (int m = modes.firstOf(profile); weight > 0 && m < modes.endOf(profile); m++) {
            double speedSigma = speedSigma(profile, m);
            double times = hasRangeRate(z) ? MeasurementUpdate.firstSeenRatio(z, speedSigma) / ratio : 1;
            if (times > 0) {
                sum.add(weight * modes.shareInProfile(m) * times, MeasurementUpdate.firstSeen(z, speedSigma), m);
            }
        }
    }

    /** What a range rate says for unseen objects of a profile, against a false detection; 1 where there is none. */
    double gridRatio(Measurement observed, int profile) {
        if (!hasRangeRate(observed)) {
            return 1;
        }
        double ratio = 0;
        for (int m = modes.firstOf(profile); m < modes.endOf(profile); m++) {
            ratio += modes.shareInProfile(m) * MeasurementUpdate.firstSeenRatio(observed, speedSigma(profile, m));
        }
        return ratio;
    }

    private double speedSigma(int profile, int mode) {
        return modes.moves(mode) ? modes.profiles().get(profile).speedSigma() : 0;
    }

    private static boolean hasRangeRate(Measurement z) {
        return z instanceof PolarMeasurement polar && polar.hasRangeRate();
    }

    /** Adds a term's bank updated by the observation. */
    void addTerm(double weight, Bank prior) {
        term.weight = weight;
        term.total = 0;
        for (int m = 0; m < term.likelihoods.length; m++) {
            term.likelihoods[m] = 0;
            if (prior.weights[m] > 0) {
                update.prior(prior.densities[m]);
                term.likelihoods[m] = update.measure(z) ? prior.weights[m] * update.likelihood() : 0;
                term.total += term.likelihoods[m];
            }
        }
        sum.add(prior, term);
    }

    /** How much has been added. */
    double weight() {
        return sum.weight();
    }

    /** All of it; something must have been added. */
    Bank bank() {
        return sum.matched();
    }

    /** The one observation, with each mode as probable as it makes it. */
    private final class Term implements BankSum.Pairs {

        private double[] likelihoods;
        private double total;
        private double weight;

        @Override
        public int count() {
            return 1;
        }

        @Override
        public double weight(int i, int mode) {
            return total > 0 ? weight * (likelihoods[mode] / total) : 0;
        }

        @Override
        public Measurement measurement(int i) {
            return z;
        }
    }
}
