package org.sweeptally.filter;

import java.io.DataInput;
import java.io.DataOutput;
import java.io.IOException;
import java.util.Arrays;
import java.util.SortedMap;
import java.util.TreeMap;
import java.util.function.IntToDoubleFunction;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.model.ClutterLearning;
import org.sweeptally.model.Look;

/**
 * How dense the false detections of each sensor are, by area. What is configured stands everywhere until something else
 * is learned, which only sensors do whose settings ask for it.
 *
 * <p>In a cell the configured density is multiplied by a ratio of unknown size, the same for long: a Gamma variable of
 * mean 1, of which Poisson counts tell more, and which is forgotten exponentially (Harvey and Fernandes 1989, "Time
 * series models for count or qualitative observations", JBES 7(4):407-417, from memory). A detection counts with the
 * probability that it is false: that no component caused it, nor an object of the unseen part. Its mean is
 *
 * <pre>
 *   (shape + detections counted) / (shape + detections expected as configured)
 * </pre>
 *
 * with both sums shrinking e-fold in the time that the settings give, and it never leaves a quarter to four times.
 */
final class ClutterMap {

    /** What the configured density is worth, in detections. */
    private static final double SHAPE = 4;

    private static final double LEAST_RATIO = 0.25;
    private static final double GREATEST_RATIO = 4;

    /** Points along a side of a cell for the share of it that is seen. */
    private static final int SUBPOINTS = 4;

    private static final double HALF_DIAGONAL = Math.sqrt(0.5);

    private final PlaneArea core;
    private double apronMetres;
    private final SortedMap<String, Cells> bySensor = new TreeMap<>();

    ClutterMap(PlaneArea core, double apronMetres) {
        this.core = core;
        this.apronMetres = apronMetres;
    }

    /** Goes on with another apron; with another than before, what was learned is forgotten. */
    void apron(double changedMetres) {
        if (changedMetres != apronMetres) {
            apronMetres = changedMetres;
            bySensor.clear();
        }
    }

    /** Expected false detections per square metre at the place of each observation of a scan. */
    double[] clutterOf(Scan scan) {
        double[] clutter = new double[scan.observations().size()];
        Arrays.fill(clutter, scan.look().clutterPerSquareMetre());
        Cells cells = cells(scan);
        if (cells != null) {
            for (int j = 0; j < clutter.length; j++) {
                clutter[j] *= cells.ratio(cells.at(scan, j));
            }
        }
        return clutter;
    }

    /** What has been learned at a place, as a multiple of what is configured; 1 where nothing is. */
    double ratio(String sensor, double east, double north) {
        Cells cells = bySensor.get(sensor);
        return cells == null ? 1 : cells.ratio(cells.at(east, north));
    }

    /**
     * Learns from a scan.
     *
     * @param falsehood     probability of each observation, by its place in the scan, that it is false
     * @param logTimeMicros of the scan; a sensor's scans come in order of it
     */
    void learn(Scan scan, IntToDoubleFunction falsehood, long logTimeMicros) {
        Cells cells = cells(scan);
        if (cells == null) {
            return;
        }
        cells.forget(logTimeMicros);
        cells.expect(scan.look());
        for (int j = 0; j < scan.observations().size(); j++) {
            int cell = cells.at(scan, j);
            if (cell >= 0) {
                cells.counted[cell] += falsehood.applyAsDouble(j);
            }
        }
    }

    /** The cells of the scan's sensor, new ones if its settings are; null if it does not learn. */
    private Cells cells(Scan scan) {
        String sensor = scan.look().sensor().name();
        ClutterLearning learning = scan.look().sensor().learning();
        if (!learning.isOn()) {
            bySensor.remove(sensor);
            return null;
        }
        Cells cells = bySensor.get(sensor);
        double perScan = scan.look().sensor().clutterPerScan();
        if (cells == null || !cells.learning.equals(learning) || cells.clutterPerScan != perScan) {
            cells = new Cells(learning, perScan);
            bySensor.put(sensor, cells);
        }
        return cells;
    }

    void write(DataOutput out) throws IOException {
        out.writeInt(bySensor.size());
        for (var entry : bySensor.entrySet()) {
            Cells cells = entry.getValue();
            out.writeUTF(entry.getKey());
            out.writeDouble(cells.learning.seconds());
            out.writeDouble(cells.learning.cellMetres());
            out.writeDouble(cells.clutterPerScan);
            out.writeLong(cells.lastMicros);
            out.writeInt(cells.counted.length);
            for (int cell = 0; cell < cells.counted.length; cell++) {
                out.writeDouble(cells.counted[cell]);
                out.writeDouble(cells.expected[cell]);
            }
        }
    }

    void read(DataInput in) throws IOException {
        bySensor.clear();
        for (int left = in.readInt(); left > 0; left--) {
            String sensor = in.readUTF();
            Cells cells = new Cells(new ClutterLearning(in.readDouble(), in.readDouble()), in.readDouble());
            cells.lastMicros = in.readLong();
            int size = in.readInt();
            if (size != cells.counted.length) {
                throw new IOException("the clutter map of " + sensor + " has " + cells.counted.length
                        + " cells, the snapshot's " + size);
            }
            for (int cell = 0; cell < size; cell++) {
                cells.counted[cell] = in.readDouble();
                cells.expected[cell] = in.readDouble();
            }
            bySensor.put(sensor, cells);
        }
    }

    /** One sensor's cells over the core and its apron, row by row from the south. */
    private final class Cells {
        final ClutterLearning learning;
        final double clutterPerScan;
        final double side;
        final double west;
        final double south;
        final int columns;
        final int rows;
        final double[] counted;
        final double[] expected;
        long lastMicros = Long.MIN_VALUE;

        private Look lastLook;
        private double[] lastSeen;

        Cells(ClutterLearning learning, double clutterPerScan) {
            this.learning = learning;
            this.clutterPerScan = clutterPerScan;
            side = learning.cellMetres();
            west = core.minEast() - apronMetres;
            south = core.minNorth() - apronMetres;
            columns = (int) Math.ceil((core.maxEast() + apronMetres - west) / side);
            rows = (int) Math.ceil((core.maxNorth() + apronMetres - south) / side);
            counted = new double[columns * rows];
            expected = new double[columns * rows];
        }

        int at(Scan scan, int observation) {
            var place = scan.observations().get(observation).measurement();
            return at(place.east(), place.north());
        }

        /** The cell of a place, -1 outside. */
        int at(double east, double north) {
            double column = Math.floor((east - west) / side);
            double row = Math.floor((north - south) / side);
            boolean inside = column >= 0 && column < columns && row >= 0 && row < rows;
            return inside ? (int) row * columns + (int) column : -1;
        }

        double ratio(int cell) {
            if (cell < 0) {
                return 1;
            }
            double mean = (SHAPE + counted[cell]) / (SHAPE + expected[cell]);
            return Math.min(GREATEST_RATIO, Math.max(LEAST_RATIO, mean));
        }

        void forget(long logTimeMicros) {
            if (lastMicros != Long.MIN_VALUE && logTimeMicros > lastMicros) {
                double kept = StrictMath.exp(-(logTimeMicros - lastMicros) / 1e6 / learning.seconds());
                for (int cell = 0; cell < counted.length; cell++) {
                    counted[cell] *= kept;
                    expected[cell] *= kept;
                }
            }
            lastMicros = Math.max(lastMicros, logTimeMicros);
        }

        void expect(Look look) {
            double[] seen = seen(look);
            double perCell = look.clutterPerSquareMetre() * side * side;
            for (int cell = 0; cell < expected.length; cell++) {
                expected[cell] += perCell * seen[cell];
            }
        }

        /** Share of each cell in which the look can detect anything, kept for as long as looks see the same. */
        private double[] seen(Look look) {
            if (lastLook != null && look.seesAs(lastLook)) {
                return lastSeen;
            }
            lastSeen = new double[counted.length];
            for (int row = 0; row < rows; row++) {
                for (int column = 0; column < columns; column++) {
                    lastSeen[row * columns + column] = seen(look, row, column);
                }
            }
            lastLook = look;
            return lastSeen;
        }

        private double seen(Look look, int row, int column) {
            double all = look.constantWithin(
                    west + (column + 0.5) * side, south + (row + 0.5) * side, side * HALF_DIAGONAL);
            if (!Double.isNaN(all)) {
                return all > 0 ? 1 : 0;
            }
            int hits = 0;
            for (int i = 0; i < SUBPOINTS; i++) {
                for (int j = 0; j < SUBPOINTS; j++) {
                    double east = west + (column + (i + 0.5) / SUBPOINTS) * side;
                    double north = south + (row + (j + 0.5) / SUBPOINTS) * side;
                    hits += look.probabilityOfDetection(east, north) > 0 ? 1 : 0;
                }
            }
            return (double) hits / (SUBPOINTS * SUBPOINTS);
        }
    }
}
