package org.sweeptally.filter.association;

import java.util.Arrays;

/**
 * Splits the rows of a problem into clusters that share no column through a pair of positive weight: the events of
 * different clusters are independent. Disjoint sets (Tarjan 1975, Journal of the ACM 22:215, from memory) whose root
 * is the least row; clusters come by their least row, and rows within one ascending, so the order depends on the
 * input alone.
 */
final class Clusters {
    private int[] parent = new int[64];
    private int[] firstRowOfColumn = new int[64];
    private int[] clusterOfRow = new int[64];
    private int[] start = new int[65];
    private int[] row = new int[64];
    private int count;

    void split(AssociationProblem problem) {
        reserve(problem.rows(), problem.columns());
        join(problem);
        number(problem.rows());
        list(problem.rows());
    }

    int count() {
        return count;
    }

    /** Rows of cluster k stand at start(k) to start(k + 1), exclusive. */
    int start(int k) {
        return start[k];
    }

    int row(int position) {
        return row[position];
    }

    /** Whether any pair of positive weight has the column. */
    boolean hasPair(int column) {
        return firstRowOfColumn[column] >= 0;
    }

    private void join(AssociationProblem problem) {
        Arrays.fill(firstRowOfColumn, 0, problem.columns(), -1);
        for (int i = 0; i < problem.rows(); i++) {
            parent[i] = i;
            for (int p = problem.rowStart(i); p < problem.rowStart(i + 1); p++) {
                if (problem.weight(p) > 0) {
                    int column = problem.column(p);
                    if (firstRowOfColumn[column] < 0) {
                        firstRowOfColumn[column] = i;
                    } else {
                        union(firstRowOfColumn[column], i);
                    }
                }
            }
        }
    }

    private void union(int a, int b) {
        int rootA = root(a);
        int rootB = root(b);
        parent[Math.max(rootA, rootB)] = Math.min(rootA, rootB);
    }

    private int root(int i) {
        int at = i;
        while (parent[at] != at) {
            parent[at] = parent[parent[at]];
            at = parent[at];
        }
        return at;
    }

    private void number(int rows) {
        count = 0;
        Arrays.fill(start, 0, rows + 1, 0);
        for (int i = 0; i < rows; i++) {
            int root = root(i);
            clusterOfRow[i] = root == i ? count++ : clusterOfRow[root];
            start[clusterOfRow[i] + 1]++;
        }
    }

    private void list(int rows) {
        for (int k = 0; k < count; k++) {
            start[k + 1] += start[k];
        }
        for (int i = 0; i < rows; i++) {
            row[start[clusterOfRow[i]]++] = i;
        }
        for (int k = count; k > 0; k--) {
            start[k] = start[k - 1];
        }
        start[0] = 0;
    }

    private void reserve(int rows, int columns) {
        if (parent.length < rows) {
            int length = Math.max(rows, 2 * parent.length);
            parent = new int[length];
            clusterOfRow = new int[length];
            row = new int[length];
            start = new int[length + 1];
        }
        if (firstRowOfColumn.length < columns) {
            firstRowOfColumn = new int[Math.max(columns, 2 * firstRowOfColumn.length)];
        }
    }
}
