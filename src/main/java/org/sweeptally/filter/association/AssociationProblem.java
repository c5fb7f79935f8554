package org.sweeptally.filter.association;

import java.util.Arrays;

/**
 * Which detection of one scan came from which component: the weights of the question, sparse.
 *
 * <p>A row is a component, a column a detection. An event pairs rows with columns, one to one, and leaves some of each
 * alone; its weight is the product of the weights of its pairs, of the missed weights of the rows left alone and of
 * the nobody's weights of the columns left alone. Each weight is finite and not negative; zeros are allowed (a
 * certain object that is always detected has no missed weight; a place without clutter has no nobody's weight).
 *
 * <p>Filled in order: every column, then row after row, each followed by its pairs. Kept as compressed rows in arrays
 * that only grow, so that one object serves scan after scan without garbage.
 */
public final class AssociationProblem {
    private int rows;
    private int columns;
    private int[] rowStart = new int[65];
    private double[] missedWeight = new double[64];
    private double[] nobodyWeight = new double[64];
    private int[] lastRowOfColumn = new int[64];
    private int[] pairColumn = new int[256];
    private double[] pairWeight = new double[256];

    /** Forgets everything and keeps the storage. */
    public void clear() {
        rows = 0;
        columns = 0;
        rowStart[0] = 0;
    }

    /**
     * Adds a detection; all of them come before the first row.
     *
     * @param nobodyWeight weight of its being no component's: intensity of clutter and of new objects there
     * @return the column's number, from 0
     */
    public int addColumn(double nobodyWeight) {
        if (rows > 0) {
            throw new IllegalStateException("column added after row " + (rows - 1) + "; columns come first");
        }
        requireWeight(nobodyWeight, "nobody's weight of column", columns);
        if (columns == this.nobodyWeight.length) {
            this.nobodyWeight = Arrays.copyOf(this.nobodyWeight, 2 * columns);
            lastRowOfColumn = Arrays.copyOf(lastRowOfColumn, 2 * columns);
        }
        this.nobodyWeight[columns] = nobodyWeight;
        lastRowOfColumn[columns] = -1;
        return columns++;
    }

    /**
     * Adds a component without pairs.
     *
     * @param missedWeight weight of its having no detection: 1 - existence * probability of detection
     * @return the row's number, from 0
     */
    public int addRow(double missedWeight) {
        requireWeight(missedWeight, "missed weight of row", rows);
        if (rows == this.missedWeight.length) {
            this.missedWeight = Arrays.copyOf(this.missedWeight, 2 * rows);
            rowStart = Arrays.copyOf(rowStart, 2 * rows + 1);
        }
        this.missedWeight[rows] = missedWeight;
        rowStart[rows + 1] = rowStart[rows];
        return rows++;
    }

    /**
     * Adds a pair to the row added last.
     *
     * @param weight existence * probability of detection * likelihood of the detection
     * @return the pair's number, from 0 over all rows
     */
    public int addPair(int column, double weight) {
        int row = rows - 1;
        if (row < 0 || column < 0 || column >= columns) {
            throw new IllegalArgumentException(
                    "pair (" + row + ", " + column + ") outside " + rows + " rows and " + columns + " columns");
        }
        if (lastRowOfColumn[column] == row) {
            throw new IllegalArgumentException("pair (" + row + ", " + column + ") added twice");
        }
        requireWeight(weight, "weight of a pair with column", column);
        int pair = rowStart[rows];
        if (pair == pairWeight.length) {
            pairWeight = Arrays.copyOf(pairWeight, 2 * pair);
            pairColumn = Arrays.copyOf(pairColumn, 2 * pair);
        }
        pairColumn[pair] = column;
        pairWeight[pair] = weight;
        lastRowOfColumn[column] = row;
        rowStart[rows] = pair + 1;
        return pair;
    }

    public int rows() {
        return rows;
    }

    public int columns() {
        return columns;
    }

    public int pairs() {
        return rowStart[rows];
    }

    /** First pair of a row; {@code rowStart(row + 1)} is one past its last. */
    public int rowStart(int row) {
        return rowStart[row];
    }

    public int column(int pair) {
        return pairColumn[pair];
    }

    public double weight(int pair) {
        return pairWeight[pair];
    }

    public double missedWeight(int row) {
        return missedWeight[row];
    }

    public double nobodyWeight(int column) {
        return nobodyWeight[column];
    }

    private static void requireWeight(double weight, String what, int index) {
        if (!(weight >= 0) || weight == Double.POSITIVE_INFINITY) {
            throw new IllegalArgumentException(what + " " + index + " is " + weight + "; finite and at least 0 needed");
        }
    }
}
