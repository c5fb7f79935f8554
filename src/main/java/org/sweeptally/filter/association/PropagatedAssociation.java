package org.sweeptally.filter.association;

/**
 * Marginals of a cluster by loopy belief propagation (Williams and Lau 2014, IEEE Transactions on Aerospace and
 * Electronic Systems 50(4):2942-2959).
 *
 * <p>With W = w / (d c), each pair (i, j) has a message mu from its row and nu from its column:
 *
 * <pre>
 *   mu_ij = W_ij / (1 + sum over k != j of W_ik nu_ik)        nu_ij = 1 / (1 + sum over k != i of mu_kj)
 * </pre>
 *
 * <p>from nu = 1 until no message changes by more than {@link #TOLERANCE}, relatively. Here w, d and c enter apart: mu
 * is held divided by c and nu by c, so that nothing is divided by d; a d or c of zero is raised to
 * {@link Cluster#FLOOR}.
 *
 * <p><b>Convergence.</b> With M the greatest row sum and C the greatest column sum of W, the greatest change of a
 * logarithm of nu shrinks by at least the factor rho = M / (1 + M) * C / (1 + C) &lt; 1 a sweep (derived from the
 * two formulas; the paper has a bound of its own). So the last messages are within TOLERANCE * rho / (1 - rho) of the
 * limit, and ln(TOLERANCE / first change) / ln rho sweeps are enough.
 *
 * <p><b>Error.</b> The limit is exact where the pairs form a forest. With loops it overstates missed and nobody's
 * probabilities: two rows and two columns with all W equal are missed with 1 / sqrt(1 + 4 W) in place of
 * (1 + 2 W) / (1 + 4 W + 2 W^2), at W = 100 five times too much. Hence the exact method wherever it can be paid for.
 */
final class PropagatedAssociation {
    /** Greatest relative change of a message at which propagation stops. */
    static final double TOLERANCE = 1e-9;

    /** Messages that one cluster may send, however many sweeps are allowed: some seconds of work. */
    static final long MOST_MESSAGES = 500_000_000L;

    private final double tolerance;
    private double[] rowMessage = new double[32];
    private double[] columnMessage = new double[32];
    private double[] before = new double[32];
    private final LogProduct overlap = new LogProduct();
    private int sweeps;
    private boolean settled;

    PropagatedAssociation(double tolerance) {
        this.tolerance = tolerance;
    }

    /** Writes the answer into the cluster, whose zeros it floors, with the Bethe value for its weight. */
    void solve(Cluster cluster, int mostSweeps) {
        cluster.floorZeros();
        begin(cluster);
        settled = false;
        long affordable = Math.max(1, MOST_MESSAGES / (2L * Math.max(1, cluster.pairs())));
        for (sweeps = 0; sweeps < Math.min(mostSweeps, affordable) && !settled; sweeps++) {
            for (int i = 0; i < cluster.rows; i++) {
                sendRow(cluster, i);
            }
            double change = 0;
            for (int j = 0; j < cluster.columns; j++) {
                change = Math.max(change, sendColumn(cluster, j));
            }
            settled = change <= tolerance;
        }
        believe(cluster);
    }

    /** Sweeps of the last solution. */
    int sweeps() {
        return sweeps;
    }

    /** Whether the messages of the last solution settled. */
    boolean settled() {
        return settled;
    }

    /** Sums of all but one are taken from both ends: a difference would lose what is small beside the one. */
    private void sendRow(Cluster cluster, int i) {
        int first = cluster.rowStart[i];
        int end = cluster.rowStart[i + 1];
        double sum = cluster.missedWeight[i];
        for (int p = first; p < end; p++) {
            before[p - first] = sum;
            sum += cluster.weight[p] * columnMessage[p];
        }
        double after = 0;
        for (int p = end - 1; p >= first; p--) {
            rowMessage[p] = cluster.weight[p] / (before[p - first] + after);
            after += cluster.weight[p] * columnMessage[p];
        }
    }

    private double sendColumn(Cluster cluster, int j) {
        int first = cluster.columnStart[j];
        int end = cluster.columnStart[j + 1];
        double sum = cluster.nobodyWeight[j];
        for (int q = first; q < end; q++) {
            before[q - first] = sum;
            sum += rowMessage[cluster.pairOfColumn[q]];
        }
        double after = 0;
        double change = 0;
        for (int q = end - 1; q >= first; q--) {
            int p = cluster.pairOfColumn[q];
            double message = 1 / (before[q - first] + after);
            double old = columnMessage[p];
            change = Math.max(change, Math.abs(message - old) / Math.min(message, old));
            columnMessage[p] = message;
            after += rowMessage[p];
        }
        return change;
    }

    /**
     * Marginals from the messages, each row and column brought to a sum of one, and the Bethe value of the weight
     * (never above the true one: Ruozzi 2012, from memory).
     */
    private void believe(Cluster cluster) {
        overlap.clear();
        for (int i = 0; i < cluster.rows; i++) {
            double sum = cluster.missedWeight[i];
            for (int p = cluster.rowStart[i]; p < cluster.rowStart[i + 1]; p++) {
                cluster.pair[p] = cluster.weight[p] * columnMessage[p];
                sum += cluster.pair[p];
                overlap.times(1 + rowMessage[p] * columnMessage[p]);
            }
            cluster.missed[i] = cluster.missedWeight[i] / sum;
            for (int p = cluster.rowStart[i]; p < cluster.rowStart[i + 1]; p++) {
                cluster.pair[p] /= sum;
            }
            cluster.scale.times(sum);
        }
        for (int j = 0; j < cluster.columns; j++) {
            double sum = cluster.nobodyWeight[j];
            for (int q = cluster.columnStart[j]; q < cluster.columnStart[j + 1]; q++) {
                sum += rowMessage[cluster.pairOfColumn[q]];
            }
            cluster.nobody[j] = cluster.nobodyWeight[j] / sum;
            cluster.scale.times(sum);
        }
        cluster.scale.over(overlap);
    }

    private void begin(Cluster cluster) {
        if (rowMessage.length < cluster.pairs()) {
            int length = Math.max(cluster.pairs(), 2 * rowMessage.length);
            rowMessage = new double[length];
            columnMessage = new double[length];
            before = new double[length];
        }
        for (int p = 0; p < cluster.pairs(); p++) {
            columnMessage[p] = 1 / cluster.nobodyWeight[cluster.column[p]];
        }
    }
}
