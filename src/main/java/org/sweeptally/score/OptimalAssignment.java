package org.sweeptally.score;

import java.util.Arrays;

/**
 * The one-to-one assignment of rows to columns with the least total cost. Shortest augmenting paths with dual prices
 * (Jonker and Volgenant 1987, "A shortest augmenting path algorithm for dense and sparse linear assignment problems",
 * Computing 38:325-340, without its initialisation; Kuhn 1955 is the idea). Cost: O(rows^2 columns).
 */
public final class OptimalAssignment {

    private OptimalAssignment() {}

    /**
     * Assigns every row.
     *
     * @param cost finite; at most as many rows as columns, all rows equally long
     * @return for each row its column
     */
    public static int[] of(double[][] cost) {
        int rows = cost.length;
        int columns = rows == 0 ? 0 : cost[0].length;
        if (rows > columns) {
            throw new IllegalArgumentException(rows + " rows, but only " + columns + " columns to assign them to");
        }
        // Columns are numbered from 1; column 0 stands for the row that is looking for one.
        double[] rowPrice = new double[rows];
        double[] columnPrice = new double[columns + 1];
        int[] rowOf = new int[columns + 1];
        Arrays.fill(rowOf, -1);
        for (int row = 0; row < rows; row++) {
            rowOf[0] = row;
            augment(cost, rowPrice, columnPrice, rowOf);
        }
        int[] columnOf = new int[rows];
        for (int column = 1; column <= columns; column++) {
            if (rowOf[column] >= 0) {
                columnOf[rowOf[column]] = column - 1;
            }
        }
        return columnOf;
    }

    /** Finds the cheapest path from the row at column 0 to a free column, and moves the rows along it. */
    private static void augment(double[][] cost, double[] rowPrice, double[] columnPrice, int[] rowOf) {
        int columns = rowOf.length - 1;
        double[] distance = new double[columns + 1];
        int[] previous = new int[columns + 1];
        boolean[] reached = new boolean[columns + 1];
        Arrays.fill(distance, Double.POSITIVE_INFINITY);
        int at = 0;
        while (rowOf[at] >= 0) {
            reached[at] = true;
            int row = rowOf[at];
            double step = Double.POSITIVE_INFINITY;
            int next = -1;
            for (int column = 1; column <= columns; column++) {
                if (reached[column]) {
                    continue;
                }
                double reduced = cost[row][column - 1] - rowPrice[row] - columnPrice[column];
                if (reduced < distance[column]) {
                    distance[column] = reduced;
                    previous[column] = at;
                }
                if (distance[column] < step) {
                    step = distance[column];
                    next = column;
                }
            }
            if (next < 0) {
                throw new IllegalArgumentException("the costs of row " + row + " are not finite");
            }
            for (int column = 0; column <= columns; column++) {
                if (reached[column]) {
                    rowPrice[rowOf[column]] += step;
                    columnPrice[column] -= step;
                } else {
                    distance[column] -= step;
                }
            }
            at = next;
        }
        while (at != 0) {
            rowOf[at] = rowOf[previous[at]];
            at = previous[at];
        }
    }
}
