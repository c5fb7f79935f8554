package org.sweeptally.filter.association;

import java.util.Arrays;

/**
 * One cluster with numbers of its own, scaled, and its answer: what the solvers work on.
 *
 * <p>Multiplying a row's weights and its missed weight by one factor, or a column's and its nobody's, leaves the
 * marginals as they are. Here every nobody's weight is 1, or 0 where it was, and the greatest weight of a row is 1;
 * the factors taken out stand in {@link #scale}, which a solver brings to the weight of all events. Pairs lie row by
 * row; {@link #pairOfColumn} lists them by column.
 */
final class Cluster {
    /** What takes the place of an impossible event's weight, beside a row's greatest weight of 1. */
    static final double FLOOR = 0x1p-60;

    /** Weights this far below the greatest of their row or column count as zero: their ratios would overflow. */
    private static final double NEGLIGIBLE = 0x1p-900;

    private static final double SMALL = 0x1p-300;
    private static final double LARGE = 0x1p300;

    final LogProduct scale = new LogProduct();
    int rows;
    int columns;
    int[] rowStart = new int[17];
    int[] column = new int[32];
    double[] weight = new double[32];
    double[] missedWeight = new double[16];
    double[] nobodyWeight = new double[16];
    int[] columnStart = new int[17];
    int[] pairOfColumn = new int[32];
    int[] rowOfPair = new int[32];

    double[] missed = new double[16];
    double[] nobody = new double[16];
    double[] pair = new double[32];

    private int[] problemRow = new int[16];
    private int[] problemColumn = new int[16];
    private int[] problemPair = new int[32];
    private int[] localColumn = new int[16];

    /** Takes cluster k of the problem, without its pairs of weight zero. */
    void load(AssociationProblem problem, Clusters clusters, int k) {
        int first = clusters.start(k);
        begin(clusters.start(k + 1) - first, problem.columns());
        for (int i = 0; i < rows; i++) {
            problemRow[i] = clusters.row(first + i);
            missedWeight[i] = problem.missedWeight(problemRow[i]);
            rowStart[i + 1] = rowStart[i];
            int end = problem.rowStart(problemRow[i] + 1);
            for (int p = problem.rowStart(problemRow[i]); p < end; p++) {
                if (problem.weight(p) > 0) {
                    loadPair(problem, p, i);
                }
            }
        }
        scale.clear();
        indexColumns();
        normalise();
    }

    /** Writes the answer to the problem's numbers. */
    void store(AssociationMarginals marginals) {
        for (int i = 0; i < rows; i++) {
            marginals.setMissed(problemRow[i], missed[i]);
        }
        for (int j = 0; j < columns; j++) {
            marginals.setNobody(problemColumn[j], nobody[j]);
        }
        for (int p = 0; p < pairs(); p++) {
            marginals.setPair(problemPair[p], pair[p]);
        }
    }

    /** Becomes the other cluster with the roles of rows and columns exchanged. */
    void turn(Cluster other) {
        rows = other.columns;
        columns = other.rows;
        reserve(rows, columns, other.pairs());
        for (int i = 0; i < rows; i++) {
            missedWeight[i] = other.nobodyWeight[i];
            rowStart[i + 1] = other.columnStart[i + 1];
        }
        rowStart[0] = 0;
        System.arraycopy(other.missedWeight, 0, nobodyWeight, 0, columns);
        for (int p = 0; p < pairs(); p++) {
            column[p] = other.rowOfPair[other.pairOfColumn[p]];
            weight[p] = other.weight[other.pairOfColumn[p]];
        }
        scale.set(other.scale);
        indexColumns();
        normalise();
    }

    /** Takes the answer of the cluster that was turned out of this one. */
    void takeTurned(Cluster turned) {
        System.arraycopy(turned.nobody, 0, missed, 0, rows);
        System.arraycopy(turned.missed, 0, nobody, 0, columns);
        for (int p = 0; p < pairs(); p++) {
            pair[pairOfColumn[p]] = turned.pair[p];
        }
        scale.set(turned.scale);
    }

    /** Replaces missed and nobody's weights of zero by {@link #FLOOR}; says whether there were any. */
    boolean floorZeros() {
        boolean any = false;
        for (int i = 0; i < rows; i++) {
            any |= missedWeight[i] == 0;
            missedWeight[i] = missedWeight[i] == 0 ? FLOOR : missedWeight[i];
        }
        for (int j = 0; j < columns; j++) {
            any |= nobodyWeight[j] == 0;
            nobodyWeight[j] = nobodyWeight[j] == 0 ? FLOOR : nobodyWeight[j];
        }
        return any;
    }

    int pairs() {
        return rowStart[rows];
    }

    int degreeOfColumn(int j) {
        return columnStart[j + 1] - columnStart[j];
    }

    private void begin(int rowCount, int problemColumns) {
        rows = rowCount;
        columns = 0;
        reserve(rows, 0, 0);
        if (localColumn.length < problemColumns) {
            localColumn = new int[Math.max(problemColumns, 2 * localColumn.length)];
        }
        rowStart[0] = 0;
    }

    private void loadPair(AssociationProblem problem, int p, int i) {
        int to = rowStart[i + 1]++;
        int j = problem.column(p);
        boolean known = localColumn[j] < columns && problemColumn[localColumn[j]] == j;
        reserve(rows, columns + 1, to + 1);
        if (!known) {
            localColumn[j] = columns;
            problemColumn[columns] = j;
            nobodyWeight[columns++] = problem.nobodyWeight(j);
        }
        column[to] = localColumn[j];
        weight[to] = problem.weight(p);
        problemPair[to] = p;
    }

    private void indexColumns() {
        Arrays.fill(columnStart, 0, columns + 1, 0);
        for (int p = 0; p < pairs(); p++) {
            columnStart[column[p] + 1]++;
        }
        for (int j = 0; j < columns; j++) {
            columnStart[j + 1] += columnStart[j];
        }
        for (int i = 0; i < rows; i++) {
            for (int p = rowStart[i]; p < rowStart[i + 1]; p++) {
                pairOfColumn[columnStart[column[p]]++] = p;
                rowOfPair[p] = i;
            }
        }
        for (int j = columns; j > 0; j--) {
            columnStart[j] = columnStart[j - 1];
        }
        columnStart[0] = 0;
    }

    /** Rows out of range first, so that ratios by column stay in it; then columns; then rows to their greatest. */
    private void normalise() {
        scaleRows(SMALL, LARGE);
        for (int j = 0; j < columns; j++) {
            double greatest = 0;
            for (int q = columnStart[j]; q < columnStart[j + 1]; q++) {
                greatest = Math.max(greatest, weight[pairOfColumn[q]]);
            }
            boolean possible = nobodyWeight[j] > greatest * NEGLIGIBLE;
            double factor = possible ? nobodyWeight[j] : greatest;
            nobodyWeight[j] = possible ? 1 : 0;
            if (factor == 0) {
                continue;
            }
            for (int q = columnStart[j]; q < columnStart[j + 1]; q++) {
                weight[pairOfColumn[q]] /= factor;
            }
            scale.times(factor);
        }
        scaleRows(1, 1);
    }

    /** Brings the rows whose greatest weight is outside the range to a greatest weight of 1. */
    private void scaleRows(double least, double most) {
        for (int i = 0; i < rows; i++) {
            double greatest = missedWeight[i];
            for (int p = rowStart[i]; p < rowStart[i + 1]; p++) {
                greatest = Math.max(greatest, weight[p]);
            }
            if (greatest == 0 || greatest >= least && greatest <= most) {
                continue;
            }
            for (int p = rowStart[i]; p < rowStart[i + 1]; p++) {
                weight[p] /= greatest;
            }
            missedWeight[i] = missedWeight[i] > greatest * NEGLIGIBLE ? missedWeight[i] / greatest : 0;
            scale.times(greatest);
        }
    }

    private void reserve(int rowCount, int columnCount, int pairCount) {
        if (missed.length < rowCount) {
            int length = Math.max(rowCount, 2 * missed.length);
            missed = new double[length];
            missedWeight = Arrays.copyOf(missedWeight, length);
            problemRow = Arrays.copyOf(problemRow, length);
            rowStart = Arrays.copyOf(rowStart, length + 1);
        }
        if (nobody.length < columnCount) {
            int length = Math.max(columnCount, 2 * nobody.length);
            nobody = new double[length];
            nobodyWeight = Arrays.copyOf(nobodyWeight, length);
            problemColumn = Arrays.copyOf(problemColumn, length);
            columnStart = new int[length + 1];
        }
        if (pair.length < pairCount) {
            int length = Math.max(pairCount, 2 * pair.length);
            pair = new double[length];
            weight = Arrays.copyOf(weight, length);
            column = Arrays.copyOf(column, length);
            problemPair = Arrays.copyOf(problemPair, length);
            pairOfColumn = new int[length];
            rowOfPair = new int[length];
        }
    }
}
