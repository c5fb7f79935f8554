package org.sweeptally.filter.association;

import java.util.Arrays;

/**
 * A {@link FrontierPlan} spelled out: for each row in its order, which bit of a table's index stands for which of its
 * columns, and which bits go afterwards.
 *
 * <p>Open columns hold the bits 0, 1, ... in the order in which they were opened; a column that closes leaves, and
 * those above move down.
 */
final class FrontierSteps {
    /** Columns open before the step. */
    int[] before = new int[16];
    /** Columns open during the step. */
    int[] during = new int[16];
    /** Bit of each pair's column during its row's step; -1 for a column of this row alone. */
    int[] bit = new int[32];
    /** Closing columns of step s stand at closingStart[s] to closingStart[s + 1], exclusive, highest bit first. */
    int[] closingStart = new int[17];
    int[] closingColumn = new int[16];
    int[] closingBit = new int[16];

    private int[] rowsLeft = new int[16];
    private int[] openColumn = new int[32];
    private int openCount;

    void spell(Cluster cluster, int[] order) {
        reserve(cluster);
        openCount = 0;
        closingStart[0] = 0;
        for (int j = 0; j < cluster.columns; j++) {
            rowsLeft[j] = cluster.degreeOfColumn(j);
        }
        for (int step = 0; step < cluster.rows; step++) {
            before[step] = openCount;
            assignBits(cluster, order[step]);
            during[step] = openCount;
            close(step);
        }
    }

    private void assignBits(Cluster cluster, int row) {
        for (int p = cluster.rowStart[row]; p < cluster.rowStart[row + 1]; p++) {
            int j = cluster.column[p];
            if (cluster.degreeOfColumn(j) == 1) {
                bit[p] = -1;
                continue;
            }
            if (rowsLeft[j] == cluster.degreeOfColumn(j)) {
                openColumn[openCount++] = j;
            }
            rowsLeft[j]--;
            bit[p] = bitOf(j);
        }
    }

    private int bitOf(int j) {
        int at = 0;
        while (openColumn[at] != j) {
            at++;
        }
        return at;
    }

    private void close(int step) {
        int end = closingStart[step];
        for (int at = openCount - 1; at >= 0; at--) {
            if (rowsLeft[openColumn[at]] == 0) {
                closingColumn[end] = openColumn[at];
                closingBit[end++] = at;
                System.arraycopy(openColumn, at + 1, openColumn, at, openCount - at - 1);
                openCount--;
            }
        }
        closingStart[step + 1] = end;
    }

    private void reserve(Cluster cluster) {
        if (before.length < cluster.rows) {
            int length = Math.max(cluster.rows, 2 * before.length);
            before = new int[length];
            during = new int[length];
            closingStart = new int[length + 1];
        }
        if (rowsLeft.length < cluster.columns) {
            int length = Math.max(cluster.columns, 2 * rowsLeft.length);
            rowsLeft = new int[length];
            openColumn = new int[length];
            closingColumn = new int[length];
            closingBit = new int[length];
        }
        if (bit.length < cluster.pairs()) {
            bit = Arrays.copyOf(bit, Math.max(cluster.pairs(), 2 * bit.length));
        }
    }
}
