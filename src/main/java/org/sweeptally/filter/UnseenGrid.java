package org.sweeptally.filter;

import java.io.DataInput;
import java.io.DataOutput;
import java.io.IOException;
import java.util.Arrays;
import java.util.SortedMap;
import java.util.TreeMap;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.model.Look;
import org.sweeptally.model.MotionProfile;

/**
 * Expected number of objects of one kind never detected so far, cell by cell, over a region's core and apron. Their
 * velocity has mean 0 and the standard deviation of the settings along each axis.
 *
 * <p>Between scans a cell's mass m obeys
 *
 * <pre>
 *   dm/dt = a (sum of its four neighbours' m  -  4 m)  -  m / lifetime  +  births,      a = speedSigma / (sqrt(2 pi)
 * side)
 * </pre>
 *
 * since the flux of a Gaussian velocity through a side is density times speedSigma / sqrt(2 pi). Across an open border
 * the neighbour is the outside, whose density never changes. The equation is linear, so that its exact solution over
 * any time step exists, and predicting over 3 s is predicting over 1 s and then over 2 s. It is computed by
 * uniformisation (Jensen 1953, "Markoff chains as an aid in the study of Markoff processes"): all terms are positive,
 * nothing cancels, and the series ends where what is left is below the rounding of a double.
 */
final class UnseenGrid {

    /** What the series may leave out, as a share. */
    private static final double SERIES_REST = 1e-17;

    /** Expected events of the uniformised process in one piece of a long gap. */
    private static final double PIECE_EVENTS = 100;

    /**
     * After so many pieces a gap has no more effect: with cells of 100 m and a speed sigma of 6 m/s they are a day, in
     * which whoever was unseen has died, left or spread. It bounds what one odd scan time can cost.
     */
    private static final int MOST_PIECES = 100;

    /** Sub-points along a side of a cell for shares of its area. */
    private static final int SUBPOINTS = 4;

    /** Of a cell, as a multiple of its side. */
    private static final double HALF_DIAGONAL = Math.sqrt(0.5);

    private final double west;
    private final double south;
    private final double side;
    private final int columns;
    private final int rows;

    /** Cells lie in a raster with a margin of one cell all around, row by row from the south. */
    private final int stride;

    private final boolean[] inside;
    private final double[] shareInCore;
    private final int[] openSides;
    private final double[] mass;

    /** By sensor: the last look that looked everywhere, and the probability of detection by cell that it had. */
    private final SortedMap<String, Seen> seen = new TreeMap<>();

    private record Seen(Look look, double[] probability) {}

    UnseenGrid(FilterSettings settings, PlaneArea core, double apronMetres) {
        side = settings.unseenCellMetres();
        west = core.minEast() - apronMetres;
        south = core.minNorth() - apronMetres;
        columns = (int) Math.ceil((core.maxEast() + apronMetres - west) / side);
        rows = (int) Math.ceil((core.maxNorth() + apronMetres - south) / side);
        stride = columns + 2;
        int cells = stride * (rows + 2);
        inside = new boolean[cells];
        shareInCore = new double[cells];
        openSides = new int[cells];
        mass = new double[cells];
        for (int row = 0; row < rows; row++) {
            for (int column = 0; column < columns; column++) {
                int cell = cell(row, column);
                inside[cell] = touches(core, apronMetres, row, column);
                shareInCore[cell] = inside[cell] ? shareIn(core, row, column) : 0;
            }
        }
        for (int cell = stride; cell < cells - stride; cell++) {
            if (inside[cell]) {
                openSides[cell] = open(cell - 1) + open(cell + 1) + open(cell - stride) + open(cell + stride);
            }
        }
    }

    /** Fills every cell with the same density, objects per square metre. */
    void fill(double perSquareMetre) {
        for (int cell = 0; cell < mass.length; cell++) {
            mass[cell] = inside[cell] ? perSquareMetre * side * side : 0;
        }
    }

    /** Ages the grid by a number of seconds: deaths, births, movement, inflow. */
    void predict(FilterSettings settings, MotionProfile profile, double seconds) {
        if (seconds <= 0) {
            return;
        }
        double exchange = profile.speedSigma() / (Math.sqrt(2 * StrictMath.PI) * side);
        double rate = 4 * exchange + 1 / profile.lifetimeSeconds();
        double[] source = new double[mass.length];
        for (int cell = 0; cell < mass.length; cell++) {
            if (inside[cell]) {
                source[cell] = profile.share() * side * side
                        * (settings.birthsPerSquareMetrePerSecond()
                                + exchange * openSides[cell] * settings.outsidePerSquareMetre());
            }
        }
        // Long gaps in pieces, so that the Poisson weights below do not underflow.
        double pieces = 1 + Math.floor(rate * seconds / PIECE_EVENTS);
        for (int piece = 0; piece < Math.min(pieces, MOST_PIECES); piece++) {
            solve(exchange / rate, rate * seconds / pieces, source, 1 / rate);
        }
    }

    /**
     * m(t) = sum over k of B^k (P(N = k) m + P(N &gt; k) source / rate), with N Poisson of the given mean and B the
     * exchange divided by the rate; evaluated from the innermost term outwards (Horner).
     */
    private void solve(double share, double mean, double[] source, double perRate) {
        double[] equal = poisson(mean);
        int last = equal.length - 1;
        double[] greater = new double[equal.length];
        for (int k = last - 1; k >= 0; k--) {
            greater[k] = greater[k + 1] + equal[k + 1];
        }
        double[] inner = new double[mass.length];
        double[] outer = new double[mass.length];
        for (int k = last; k >= 0; k--) {
            double ofMass = equal[k];
            double ofSource = greater[k] * perRate;
            for (int row = 1; row <= rows; row++) {
                for (int cell = row * stride + 1; cell <= row * stride + columns; cell++) {
                    if (inside[cell]) {
                        outer[cell] = ofMass * mass[cell] + ofSource * source[cell]
                                + share * (inner[cell - 1] + inner[cell + 1] + inner[cell - stride] + inner[cell + stride]);
                    }
                }
            }
            double[] swap = inner;
            inner = outer;
            outer = swap;
        }
        System.arraycopy(inner, 0, mass, 0, mass.length);
    }

    /** P(N = 0), P(N = 1), ... until the rest is below {@link #SERIES_REST}. */
    private static double[] poisson(double mean) {
        double[] probabilities = new double[16];
        double term = StrictMath.exp(-mean);
        int k = 0;
        while (true) {
            if (k == probabilities.length) {
                probabilities = Arrays.copyOf(probabilities, 2 * k);
            }
            probabilities[k] = term;
            k++;
            term *= mean / k;
            if (k > mean && term < SERIES_REST) {
                return Arrays.copyOf(probabilities, k);
            }
        }
    }

    /** Thins the grid by a look that could have detected what is in it with these probabilities, by cell. */
    void missed(double[] probability) {
        for (int cell = 0; cell < mass.length; cell++) {
            mass[cell] *= 1 - probability[cell];
        }
    }

    /**
     * Probability of detection by cell, kept for as long as looks of the sensor see the same; it is that of every grid
     * of the same raster.
     */
    double[] probabilityByCell(Look look) {
        Seen before = seen.get(look.sensor().name());
        if (before != null && look.seesAs(before.look())) {
            return before.probability();
        }
        double[] probability = new double[mass.length];
        for (int row = 0; row < rows; row++) {
            for (int column = 0; column < columns; column++) {
                int cell = cell(row, column);
                if (inside[cell]) {
                    probability[cell] = averageProbability(look, row, column);
                }
            }
        }
        seen.put(look.sensor().name(), new Seen(look, probability));
        return probability;
    }

    /** Over the cell: where an edge of what is seen crosses it, the mean over points spread evenly in it. */
    private double averageProbability(Look look, int row, int column) {
        double constant = look.constantWithin(
                west + (column + 0.5) * side, south + (row + 0.5) * side, side * HALF_DIAGONAL);
        if (!Double.isNaN(constant)) {
            return constant;
        }
        double sum = 0;
        for (int i = 0; i < SUBPOINTS; i++) {
            for (int j = 0; j < SUBPOINTS; j++) {
                sum += look.probabilityOfDetection(
                        west + (column + (i + 0.5) / SUBPOINTS) * side, south + (row + (j + 0.5) / SUBPOINTS) * side);
            }
        }
        return sum / (SUBPOINTS * SUBPOINTS);
    }

    /** Objects per square metre at a place, linear between the centres of cells; 0 outside the grid. */
    double density(double east, double north) {
        int own = cellAt(east, north);
        if (own < 0) {
            return 0;
        }
        double x = (east - west) / side - 0.5;
        double y = (north - south) / side - 0.5;
        int column = (int) Math.floor(x);
        int row = (int) Math.floor(y);
        double u = x - column;
        double v = y - row;
        double mixed = (1 - u) * (1 - v) * massOr(own, row, column)
                + u * (1 - v) * massOr(own, row, column + 1)
                + (1 - u) * v * massOr(own, row + 1, column)
                + u * v * massOr(own, row + 1, column + 1);
        return mixed / (side * side);
    }

    /** Puts mass into the cell of a place; false where the place is outside the grid. */
    boolean deposit(double east, double north, double amount) {
        int cell = cellAt(east, north);
        if (cell < 0) {
            return false;
        }
        mass[cell] += amount;
        return true;
    }

    /** Adds another grid of the same raster. */
    void add(UnseenGrid other) {
        for (int cell = 0; cell < mass.length; cell++) {
            mass[cell] += other.mass[cell];
        }
    }

    /** Expected number of objects in the grid. */
    double total() {
        double sum = 0;
        for (double m : mass) {
            sum += m;
        }
        return sum;
    }

    /** Expected number of objects in the region's core. */
    double inCore() {
        double sum = 0;
        for (int cell = 0; cell < mass.length; cell++) {
            sum += shareInCore[cell] * mass[cell];
        }
        return sum;
    }

    /**
     * Takes over a share of another grid's density wherever the other has one; elsewhere this grid keeps its own. A
     * cell takes the mean over points spread evenly in it.
     */
    void takeFrom(UnseenGrid other, double share) {
        for (int row = 0; row < rows; row++) {
            for (int column = 0; column < columns; column++) {
                int cell = cell(row, column);
                if (inside[cell]) {
                    mass[cell] = meanMass(other, share, row, column);
                }
            }
        }
    }

    private double meanMass(UnseenGrid other, double share, int row, int column) {
        double perCell = share * side * side / (other.side * other.side);
        double sum = 0;
        for (int i = 0; i < SUBPOINTS; i++) {
            for (int j = 0; j < SUBPOINTS; j++) {
                int there = other.cellAt(
                        west + (column + (i + 0.5) / SUBPOINTS) * side, south + (row + (j + 0.5) / SUBPOINTS) * side);
                sum += there >= 0 ? perCell * other.mass[there] : mass[cell(row, column)];
            }
        }
        return sum / (SUBPOINTS * SUBPOINTS);
    }

    void write(DataOutput out) throws IOException {
        out.writeInt(mass.length);
        for (double m : mass) {
            out.writeDouble(m);
        }
    }

    void read(DataInput in) throws IOException {
        int cells = in.readInt();
        if (cells != mass.length) {
            throw new IOException("the grid of unseen objects has " + mass.length + " cells, the snapshot's " + cells);
        }
        for (int cell = 0; cell < cells; cell++) {
            mass[cell] = in.readDouble();
        }
    }

    private int cell(int row, int column) {
        return (row + 1) * stride + column + 1;
    }

    private int cellAt(double east, double north) {
        double column = Math.floor((east - west) / side);
        double row = Math.floor((north - south) / side);
        if (!(column >= 0 && column < columns && row >= 0 && row < rows)) {
            return -1;
        }
        int cell = cell((int) row, (int) column);
        return inside[cell] ? cell : -1;
    }

    private double massOr(int own, int row, int column) {
        if (row < 0 || row >= rows || column < 0 || column >= columns) {
            return mass[own];
        }
        int cell = cell(row, column);
        return mass[inside[cell] ? cell : own];
    }

    private int open(int neighbour) {
        return inside[neighbour] ? 0 : 1;
    }

    private boolean touches(PlaneArea core, double apronMetres, int row, int column) {
        for (int i = 0; i <= 2; i++) {
            for (int j = 0; j <= 2; j++) {
                if (core.signedDistanceMetres(west + (column + 0.5 * i) * side, south + (row + 0.5 * j) * side)
                        >= -apronMetres) {
                    return true;
                }
            }
        }
        return false;
    }

    private double shareIn(PlaneArea core, int row, int column) {
        double centre = core.signedDistanceMetres(west + (column + 0.5) * side, south + (row + 0.5) * side);
        if (Math.abs(centre) > side) {
            return centre > 0 ? 1 : 0;
        }
        int hits = 0;
        for (int i = 0; i < SUBPOINTS; i++) {
            for (int j = 0; j < SUBPOINTS; j++) {
                if (core.contains(
                        west + (column + (i + 0.5) / SUBPOINTS) * side, south + (row + (j + 0.5) / SUBPOINTS) * side)) {
                    hits++;
                }
            }
        }
        return (double) hits / (SUBPOINTS * SUBPOINTS);
    }
}
