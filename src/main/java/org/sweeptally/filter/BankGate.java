package org.sweeptally.filter;

import java.util.Arrays;
import org.sweeptally.model.Measurement;
import org.sweeptally.model.MeasurementUpdate;

/** Which observations of a scan lie in a bank's gate, and how likely each is under each of the bank's modes. */
final class BankGate {

    private final MeasurementUpdate update = new MeasurementUpdate();
    private int count;
    private int[] observations = new int[16];
    private double[] likelihoods = new double[16];

    /** Weight of a mode times likelihood under it; modes of one observation side by side. */
    private double[] byMode = new double[16];

    private int modes;

    /** Looks for the observations in the gate of a bank: those in the gate of any of its modes. */
    void open(Bank bank, Scan scan, DetectionIndex index, double gateSigmas, Counters counters) {
        modes = bank.modes();
        count = index.query(bank, gateSigmas);
        reserve();
        Arrays.fill(byMode, 0, count * modes, 0);
        for (int m = 0; m < modes; m++) {
            double weight = bank.weights[m];
            if (weight == 0) {
                continue;
            }
            update.prior(bank.densities[m]);
            for (int c = 0; c < count; c++) {
                Measurement z = scan.observations().get(index.found(c)).measurement();
                if (!update.measure(z)) {
                    counters.add(Counters.Name.INNOVATIONS_NOT_POSITIVE, 1);
                    byMode[c * modes + m] = Double.NaN;
                } else if (update.isWithin(gateSigmas)) {
                    byMode[c * modes + m] = weight * update.likelihood();
                } else {
                    byMode[c * modes + m] = Double.NaN;
                }
            }
        }
        keepGated(index);
    }

    private void reserve() {
        if (count > observations.length) {
            observations = new int[2 * count];
            likelihoods = new double[2 * count];
        }
        if (count * modes > byMode.length) {
            byMode = new double[2 * count * modes];
        }
    }

    /** Moves the observations that are in some mode's gate together. */
    private void keepGated(DetectionIndex index) {
        int kept = 0;
        for (int c = 0; c < count; c++) {
            double sum = 0;
            boolean gated = false;
            for (int m = 0; m < modes; m++) {
                double value = byMode[c * modes + m];
                if (Double.isNaN(value)) {
                    value = 0;
                } else if (value > 0) {
                    gated = true;
                }
                byMode[kept * modes + m] = value;
                sum += value;
            }
            if (gated) {
                observations[kept] = index.found(c);
                likelihoods[kept] = sum;
                kept++;
            }
        }
        count = kept;
    }

    int count() {
        return count;
    }

    int observation(int i) {
        return observations[i];
    }

    /** Density of the observation under the bank, per square metre. */
    double likelihood(int i) {
        return likelihoods[i];
    }

    /** Copies the probabilities of the modes, given that the object caused the observation; they sum to 1. */
    void modeShares(int i, double[] into, int at) {
        for (int m = 0; m < modes; m++) {
            into[at + m] = byMode[i * modes + m] / likelihoods[i];
        }
    }
}
