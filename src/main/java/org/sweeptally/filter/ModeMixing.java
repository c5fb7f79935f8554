package org.sweeptally.filter;

import java.util.Arrays;
import org.ejml.data.DMatrix4;
import org.sweeptally.model.Gaussian;

/**
 * The mixing step of interacting multiple models: between two scans an object may have changed its way of moving, so
 * what each mode begins with is a mixture over the modes before, kept as the one Gaussian with its moments.
 *
 * <pre>
 *   c_j = sum_i w_i p_ij        w_i|j = w_i p_ij / c_j
 *   m_j = sum_i w_i|j m_i       P_j = sum_i w_i|j (P_i + (m_i - m_j)(m_i - m_j)')
 * </pre>
 *
 * Blom and Bar-Shalom 1988, "The interacting multiple model algorithm for systems with Markovian switching
 * coefficients", IEEE Transactions on Automatic Control 33(8):780-783. Modes that come from one mode only take its
 * density over bit for bit, so that a single mode, or modes that never change, are plain filters.
 */
final class ModeMixing {

    private final Mixture mixture = new Mixture();
    private final double[] step = new double[4];
    private double[] mixedWeights = new double[0];
    private Gaussian[] mixedDensities = new Gaussian[0];

    /**
     * Replaces weights and densities, as they were after the last scan, by those with which the modes are predicted.
     * The Gaussians handed in are not changed; no two modes share one afterwards. A mode of weight 0 keeps its density.
     *
     * @param weights    of the modes, 0 or more; their sum stays
     * @param densities  one a mode
     * @param transition probability that an object in the mode of the row is in the mode of the column by now
     */
    void mix(double[] weights, Gaussian[] densities, double[][] transition) {
        int modes = weights.length;
        if (modes == 1) {
            return;
        }
        if (mixedWeights.length < modes) {
            mixedWeights = new double[modes];
            mixedDensities = new Gaussian[modes];
        }
        for (int to = 0; to < modes; to++) {
            mixInto(to, weights, densities, transition);
        }
        System.arraycopy(mixedWeights, 0, weights, 0, modes);
        System.arraycopy(mixedDensities, 0, densities, 0, modes);
        Arrays.fill(mixedDensities, null);
    }

    private void mixInto(int to, double[] weights, Gaussian[] densities, double[][] transition) {
        int sources = 0;
        int source = to;
        double weight = 0;
        for (int from = 0; from < weights.length; from++) {
            double part = weights[from] * transition[from][to];
            if (part > 0) {
                sources++;
                source = from;
                weight += part;
            }
        }
        mixedWeights[to] = weight;
        if (sources > 1) {
            mixedDensities[to] = matched(to, weights, densities, transition);
        } else {
            mixedDensities[to] = source == to ? densities[to] : densities[source].copy();
        }
    }

    private Gaussian matched(int to, double[] weights, Gaussian[] densities, double[][] transition) {
        DMatrix4 reference = densities[to].mean;
        mixture.reset(reference.a1, reference.a2, reference.a3, reference.a4);
        for (int from = 0; from < weights.length; from++) {
            double part = weights[from] * transition[from][to];
            if (part > 0) {
                DMatrix4 mean = densities[from].mean;
                step[0] = mean.a1 - reference.a1;
                step[1] = mean.a2 - reference.a2;
                step[2] = mean.a3 - reference.a3;
                step[3] = mean.a4 - reference.a4;
                mixture.add(part, step, 0, densities[from].covariance);
            }
        }
        return mixture.matched();
    }
}
