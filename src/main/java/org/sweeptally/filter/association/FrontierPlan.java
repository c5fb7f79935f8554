package org.sweeptally.filter.association;

import java.util.Arrays;

/**
 * In which order the exact method takes the rows of a cluster, and what it will cost.
 *
 * <p>The frontier holds the columns that rows already taken share with rows to come; the exact method's tables have an
 * entry for each of its subsets. Finding the order that keeps it narrowest is hard, so it is chosen greedily: the
 * next row is the one that widens the frontier least (columns it opens less columns it closes), of equals the one
 * that opens fewest, then the lowest. It starts from the row of fewest shared columns, and where that is not cheap also
 * from the row farthest from it. Columns of a single row never enter the frontier.
 */
final class FrontierPlan {
    /** No solution touches more table entries than this, whatever is configured: 0.3 GiB of tables. */
    static final long LARGEST_COST = 1L << 26;

    /** Table entries that cost no more than looking for a better plan. */
    static final long CHEAP = 4096;

    static final long UNAFFORDABLE = Long.MAX_VALUE;

    private static final int WIDEST_FRONTIER = 26;

    int[] order = new int[16];
    long cost;
    int widest;

    private int[] trialOrder = new int[16];
    private int[] opens = new int[16];
    private int[] closes = new int[16];
    private int[] candidates = new int[16];
    private boolean[] listed = new boolean[16];
    private boolean[] taken = new boolean[16];
    private int[] rowsLeft = new int[16];
    private boolean[] open = new boolean[16];
    private int candidateCount;
    private int width;
    private int trialWidest;

    /** Finds an order that costs at most the limit; otherwise the cost is {@link #UNAFFORDABLE}. */
    void find(Cluster cluster, long limit) {
        reserve(cluster);
        cost = UNAFFORDABLE;
        long least = Math.min(limit, LARGEST_COST);
        int start = narrowestRow(cluster);
        least = attempt(cluster, start, least);
        if (cost > CHEAP && cluster.rows > 2) {
            attempt(cluster, farthestRow(cluster, start), least - 1);
        }
    }

    /** Keeps the order that begins with the row where it costs at most the limit; returns the least cost so far. */
    private long attempt(Cluster cluster, int start, long limit) {
        begin(cluster);
        long sum = 0;
        int next = start;
        for (int step = 0; step < cluster.rows; step++) {
            trialOrder[step] = next;
            sum += take(cluster, next);
            if (width > WIDEST_FRONTIER || sum > limit) {
                return limit;
            }
            next = leastWidening();
        }
        int[] replaced = order;
        order = trialOrder;
        trialOrder = replaced;
        cost = sum;
        widest = trialWidest;
        return sum;
    }

    /**
     * Table entries that one row's step touches: forward and backward over the subsets of the frontier before it, once
     * for the row alone and once for each column it may take; and over the subsets of the widened frontier, to clear,
     * narrow, widen again and sum.
     *
     * @param before columns open before the row
     * @param kept   of the row's columns, those open before
     * @param opened columns that the row opens
     * @param closed columns that the row closes
     */
    static long stepCost(int before, int kept, int opened, int closed) {
        long subsets = 1L << before;
        long widened = subsets << opened;
        return 2 * (subsets + kept * (subsets >> 1) + opened * subsets) + widened * (10 + closed) / 2;
    }

    private long take(Cluster cluster, int row) {
        int before = width;
        int kept = 0;
        int closed = 0;
        taken[row] = true;
        for (int p = cluster.rowStart[row]; p < cluster.rowStart[row + 1]; p++) {
            int j = cluster.column[p];
            if (cluster.degreeOfColumn(j) > 1) {
                if (open[j]) {
                    kept++;
                } else {
                    openColumn(cluster, j);
                }
                closed += countDown(cluster, j);
            }
        }
        int opened = opens[row];
        trialWidest = Math.max(trialWidest, before + opened);
        width = before + opened;
        if (width > WIDEST_FRONTIER) {
            return 0;
        }
        width -= closed;
        return stepCost(before, kept, opened, closed);
    }

    private void openColumn(Cluster cluster, int j) {
        open[j] = true;
        for (int q = cluster.columnStart[j]; q < cluster.columnStart[j + 1]; q++) {
            int i = cluster.rowOfPair[cluster.pairOfColumn[q]];
            if (!taken[i]) {
                opens[i]--;
                if (!listed[i]) {
                    listed[i] = true;
                    candidates[candidateCount++] = i;
                }
            }
        }
    }

    /** One row fewer needs the column; returns 1 where none is left. */
    private int countDown(Cluster cluster, int j) {
        rowsLeft[j]--;
        if (rowsLeft[j] == 1) {
            for (int q = cluster.columnStart[j]; q < cluster.columnStart[j + 1]; q++) {
                int i = cluster.rowOfPair[cluster.pairOfColumn[q]];
                if (!taken[i]) {
                    closes[i]++;
                }
            }
        }
        return rowsLeft[j] == 0 ? 1 : 0;
    }

    /** The cluster hangs together, so until its last row some row not taken shares an open column. */
    private int leastWidening() {
        int best = -1;
        int kept = 0;
        for (int at = 0; at < candidateCount; at++) {
            int i = candidates[at];
            if (!taken[i]) {
                candidates[kept++] = i;
                best = best < 0 || compare(i, best) < 0 ? i : best;
            }
        }
        candidateCount = kept;
        return best;
    }

    private int compare(int a, int b) {
        int byWidth = (opens[a] - closes[a]) - (opens[b] - closes[b]);
        if (byWidth != 0) {
            return byWidth;
        }
        return opens[a] != opens[b] ? opens[a] - opens[b] : a - b;
    }

    private void begin(Cluster cluster) {
        width = 0;
        trialWidest = 0;
        candidateCount = 0;
        for (int i = 0; i < cluster.rows; i++) {
            taken[i] = false;
            listed[i] = false;
            closes[i] = 0;
            opens[i] = sharedColumns(cluster, i);
        }
        for (int j = 0; j < cluster.columns; j++) {
            open[j] = false;
            rowsLeft[j] = cluster.degreeOfColumn(j);
        }
    }

    private static int narrowestRow(Cluster cluster) {
        int best = 0;
        for (int i = 1; i < cluster.rows; i++) {
            best = sharedColumns(cluster, i) < sharedColumns(cluster, best) ? i : best;
        }
        return best;
    }

    /** Breadth first from the row; the last row met. */
    private int farthestRow(Cluster cluster, int from) {
        Arrays.fill(listed, 0, cluster.rows, false);
        Arrays.fill(open, 0, cluster.columns, false);
        candidates[0] = from;
        listed[from] = true;
        int met = 1;
        for (int at = 0; at < met; at++) {
            int i = candidates[at];
            for (int p = cluster.rowStart[i]; p < cluster.rowStart[i + 1]; p++) {
                int j = cluster.column[p];
                for (int q = cluster.columnStart[j]; !open[j] && q < cluster.columnStart[j + 1]; q++) {
                    int other = cluster.rowOfPair[cluster.pairOfColumn[q]];
                    if (!listed[other]) {
                        listed[other] = true;
                        candidates[met++] = other;
                    }
                }
                open[j] = true;
            }
        }
        return candidates[met - 1];
    }

    private static int sharedColumns(Cluster cluster, int i) {
        int shared = 0;
        for (int p = cluster.rowStart[i]; p < cluster.rowStart[i + 1]; p++) {
            shared += cluster.degreeOfColumn(cluster.column[p]) > 1 ? 1 : 0;
        }
        return shared;
    }

    private void reserve(Cluster cluster) {
        if (order.length < cluster.rows) {
            int length = Math.max(cluster.rows, 2 * order.length);
            order = new int[length];
            trialOrder = new int[length];
            opens = new int[length];
            closes = new int[length];
            candidates = new int[length];
            listed = new boolean[length];
            taken = new boolean[length];
        }
        if (open.length < cluster.columns) {
            int length = Math.max(cluster.columns, 2 * open.length);
            open = new boolean[length];
            rowsLeft = new int[length];
        }
    }
}
