package org.sweeptally.filter.association;

import java.util.Arrays;

/**
 * Exact marginals of a cluster by dynamic programming over its frontier, forwards and backwards (the forward-backward
 * scheme of Baum et al. 1970, Annals of Mathematical Statistics 41:164, from memory, with subsets as its states).
 *
 * <p>Rows are taken one at a time. The state between two rows is the subset of the open columns that are used already;
 * the table <em>past</em> has for each subset the summed weight of all ways to have come there. A row takes one of its
 * unused columns or none; a column that closes unused then brings its nobody's weight. The table <em>future</em>
 * has for each subset the summed weight of all ways to go on. A marginal is a sum of past times choice times
 * future over the subsets that allow it, over the sum of all choices: sums of products of what is not negative, so
 * the relative error stays within a few roundings a row, however small the probability.
 *
 * <p>Zeros need no care, as nothing is divided by a missed or a nobody's weight. Tables are scaled by powers
 * of two after every row; an entry 1e-308 below the greatest of its table is lost.
 */
final class FrontierAssociation {
    private static final double SMALL = 0x1p-100;
    private static final double LARGE = 0x1p100;

    private final FrontierSteps steps = new FrontierSteps();
    private double[] past = new double[256];
    private int[] pastStart = new int[16];
    private int[] widenedStart = new int[16];
    private double[] future = new double[64];
    private double[] widened = new double[64];
    private double[] alone = new double[16];
    private double[] share = new double[16];
    /** The past after the last row is scaled by two to this power. */
    private long power;

    /** Writes the answer into the cluster; false, the answer undefined, where all events sum to zero in doubles. */
    boolean solve(Cluster cluster, int[] order) {
        steps.spell(cluster, order);
        layTables(cluster);
        double total = forward(cluster, order);
        if (total == 0 || !backward(cluster, order)) {
            return false;
        }
        cluster.scale.times(total);
        cluster.scale.timesPowerOfTwo(-power);
        return true;
    }

    /** The past before each row, and the past after its choice, while the columns that it closes are still open. */
    private double forward(Cluster cluster, int[] order) {
        past[0] = 1;
        power = 0;
        for (int step = 0; step < cluster.rows; step++) {
            choose(cluster, order[step], step);
            int size = close(cluster, step);
            power += bringToRange(widened, size);
            if (step + 1 < cluster.rows) {
                System.arraycopy(widened, 0, past, pastStart[step + 1], size);
            }
        }
        return widened[0];
    }

    /** Spreads the past over the row's choices. */
    private void choose(Cluster cluster, int row, int step) {
        int from = pastStart[step];
        int to = widenedStart[step];
        int size = 1 << steps.before[step];
        double none = aloneWeight(cluster, row);
        alone[row] = none;
        Arrays.fill(past, to + size, to + (1 << steps.during[step]), 0);
        for (int subset = 0; subset < size; subset++) {
            past[to + subset] = none * past[from + subset];
        }
        for (int p = cluster.rowStart[row]; p < cluster.rowStart[row + 1]; p++) {
            if (steps.bit[p] >= 0) {
                int use = 1 << steps.bit[p];
                int block = Math.min(use, size);
                double weight = cluster.pair[p];
                for (int base = 0; base < size; base += 2 * use) {
                    for (int subset = base; subset < base + block; subset++) {
                        past[to + subset + use] += weight * past[from + subset];
                    }
                }
            }
        }
    }

    /**
     * Weight of the row's taking no shared column: it is missed or takes a column of its own. Sets, in
     * {@code cluster.pair}, the weight of each choice relative to all columns of its own being nobody's; where one
     * of these cannot be nobody's, the row must take it, and with two nothing is possible.
     */
    private static double aloneWeight(Cluster cluster, int row) {
        double sum = cluster.missedWeight[row];
        double forcedWeight = 0;
        int forced = 0;
        for (int p = cluster.rowStart[row]; p < cluster.rowStart[row + 1]; p++) {
            int j = cluster.column[p];
            cluster.pair[p] = cluster.weight[p];
            if (cluster.degreeOfColumn(j) == 1) {
                if (cluster.nobodyWeight[j] == 0) {
                    forced++;
                    forcedWeight = cluster.weight[p];
                } else {
                    cluster.pair[p] /= cluster.nobodyWeight[j];
                    sum += cluster.pair[p];
                }
            }
        }
        if (forced == 0) {
            return sum;
        }
        for (int p = cluster.rowStart[row]; p < cluster.rowStart[row + 1]; p++) {
            int j = cluster.column[p];
            boolean must = cluster.degreeOfColumn(j) == 1 && cluster.nobodyWeight[j] == 0;
            cluster.pair[p] = must && forced == 1 ? cluster.pair[p] : 0;
        }
        return forced == 1 ? forcedWeight : 0;
    }

    /** Takes the closing columns out of the table after the choice, into {@code widened}; returns the size left. */
    private int close(Cluster cluster, int step) {
        int size = 1 << steps.during[step];
        System.arraycopy(past, widenedStart[step], widened, 0, size);
        for (int at = steps.closingStart[step]; at < steps.closingStart[step + 1]; at++) {
            int use = 1 << steps.closingBit[at];
            double nobody = cluster.nobodyWeight[steps.closingColumn[at]];
            int to = 0;
            for (int base = 0; base < size; base += 2 * use) {
                for (int subset = base; subset < base + use; subset++) {
                    widened[to++] = nobody * widened[subset] + widened[subset + use];
                }
            }
            size >>= 1;
        }
        return size;
    }

    private boolean backward(Cluster cluster, int[] order) {
        future[0] = 1;
        for (int step = cluster.rows - 1; step >= 0; step--) {
            reopen(cluster, step);
            double total = weighChoices(cluster, order[step], step);
            if (!(total > 0) || total == Double.POSITIVE_INFINITY) {
                return false;
            }
            answerClosing(cluster, step, total);
            bringToRange(future, 1 << steps.before[step]);
        }
        return true;
    }

    /** The future as it was while the columns that close after the row were still open, into {@code widened}. */
    private void reopen(Cluster cluster, int step) {
        int first = steps.closingStart[step];
        int end = steps.closingStart[step + 1];
        int size = 1 << (steps.during[step] - (end - first));
        System.arraycopy(future, 0, widened, 0, size);
        for (int at = end - 1; at >= first; at--) {
            int use = 1 << steps.closingBit[at];
            double nobody = cluster.nobodyWeight[steps.closingColumn[at]];
            int from = size;
            size <<= 1;
            for (int base = size - 2 * use; base >= 0; base -= 2 * use) {
                for (int subset = base + use - 1; subset >= base; subset--) {
                    double value = widened[--from];
                    widened[subset + use] = value;
                    widened[subset] = nobody * value;
                }
            }
        }
    }

    /** Sets the row's marginals and the future before the row; returns the weight of all events, as scaled here. */
    private double weighChoices(Cluster cluster, int row, int step) {
        int from = pastStart[step];
        int size = 1 << steps.before[step];
        double none = alone[row];
        double noneSum = 0;
        for (int subset = 0; subset < size; subset++) {
            future[subset] = none * widened[subset];
            noneSum += past[from + subset] * future[subset];
        }
        double total = noneSum;
        for (int p = cluster.rowStart[row]; p < cluster.rowStart[row + 1]; p++) {
            if (steps.bit[p] >= 0) {
                share[p - cluster.rowStart[row]] = weighPair(cluster.pair[p], 1 << steps.bit[p], from, size);
                total += share[p - cluster.rowStart[row]];
            }
        }
        divide(cluster, row, noneSum, total);
        return total;
    }

    private double weighPair(double weight, int use, int from, int size) {
        double sum = 0;
        int block = Math.min(use, size);
        for (int base = 0; base < size; base += 2 * use) {
            for (int subset = base; subset < base + block; subset++) {
                double value = weight * widened[subset + use];
                future[subset] += value;
                sum += past[from + subset] * value;
            }
        }
        return sum;
    }

    /** Turns sums into probabilities; that of taking no shared column is divided between its ways. */
    private void divide(Cluster cluster, int row, double noneSum, double total) {
        int first = cluster.rowStart[row];
        double none = noneSum / total;
        double ways = alone[row] == 0 ? 1 : alone[row];
        boolean forced = false;
        for (int p = first; p < cluster.rowStart[row + 1]; p++) {
            if (steps.bit[p] < 0) {
                forced |= cluster.nobodyWeight[cluster.column[p]] == 0;
                share[p - first] = none * (cluster.pair[p] / ways);
                cluster.nobody[cluster.column[p]] = 0;
            } else {
                share[p - first] /= total;
            }
        }
        cluster.missed[row] = forced ? 0 : none * (cluster.missedWeight[row] / ways);
        answerOwn(cluster, row);
        System.arraycopy(share, 0, cluster.pair, first, cluster.rowStart[row + 1] - first);
    }

    /** A column of the row alone is nobody's in every other choice: summed from both ends, without a difference. */
    private void answerOwn(Cluster cluster, int row) {
        int first = cluster.rowStart[row];
        double before = cluster.missed[row];
        for (int p = first; p < cluster.rowStart[row + 1]; p++) {
            if (steps.bit[p] < 0) {
                cluster.nobody[cluster.column[p]] += before;
            }
            before += share[p - first];
        }
        double after = 0;
        for (int p = cluster.rowStart[row + 1] - 1; p >= first; p--) {
            if (steps.bit[p] < 0) {
                cluster.nobody[cluster.column[p]] += after;
            }
            after += share[p - first];
        }
    }

    /** A column that closes here is nobody's in the subsets without it. */
    private void answerClosing(Cluster cluster, int step, double total) {
        int from = widenedStart[step];
        int size = 1 << steps.during[step];
        for (int at = steps.closingStart[step]; at < steps.closingStart[step + 1]; at++) {
            int use = 1 << steps.closingBit[at];
            double sum = 0;
            for (int base = 0; base < size; base += 2 * use) {
                for (int subset = base; subset < base + use; subset++) {
                    sum += past[from + subset] * widened[subset];
                }
            }
            cluster.nobody[steps.closingColumn[at]] = sum / total;
        }
    }

    /** Multiplies a table by a power of two where its greatest entry has left the range; returns the power. */
    private static int bringToRange(double[] table, int size) {
        double greatest = 0;
        for (int subset = 0; subset < size; subset++) {
            greatest = Math.max(greatest, table[subset]);
        }
        if (greatest == 0 || greatest >= SMALL && greatest <= LARGE) {
            return 0;
        }
        int power = -Math.getExponent(greatest);
        for (int subset = 0; subset < size; subset++) {
            table[subset] = Math.scalb(table[subset], power);
        }
        return power;
    }

    private void layTables(Cluster cluster) {
        if (pastStart.length < cluster.rows) {
            int length = Math.max(cluster.rows, 2 * pastStart.length);
            pastStart = new int[length];
            widenedStart = new int[length];
            alone = new double[length];
        }
        int end = 0;
        int widest = 0;
        int longestRow = 0;
        for (int step = 0; step < cluster.rows; step++) {
            pastStart[step] = end;
            widenedStart[step] = end + (1 << steps.before[step]);
            end = widenedStart[step] + (1 << steps.during[step]);
            widest = Math.max(widest, steps.during[step]);
            longestRow = Math.max(longestRow, cluster.rowStart[step + 1] - cluster.rowStart[step]);
        }
        past = atLeast(past, end);
        widened = atLeast(widened, 1 << widest);
        future = atLeast(future, 1 << widest);
        share = atLeast(share, longestRow);
    }

    private static double[] atLeast(double[] array, int length) {
        return array.length >= length ? array : new double[Math.max(length, 2 * array.length)];
    }
}
