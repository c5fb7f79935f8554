package org.sweeptally.geo;

import java.util.Arrays;

/**
 * Bounds on the distance from a polygon's nearest edge without looking at its edges: the signed distance at the centres
 * of a raster over the polygon and a little beyond. Distance changes by at most a metre a metre, so that a point's
 * differs from its cell's centre's by at most the way between them. Most questions of "far enough inside?" end here, at
 * the cost of one look-up, however many edges the polygon has; the others look only at the edges that may be nearest to
 * some point of the cell.
 */
final class DistanceRaster {

    /**
     * What is as near as this to the distance asked for is left to the edges, so that rounding decides nothing here.
     */
    static final double ROUNDING_METRES = 1e-3;

    static final int CELLS = 128;

    /** How far the raster goes beyond the polygon's box, as a share of its sides: around a region there is an apron. */
    private static final double BEYOND = 0.125;

    private final double west;
    private final double south;
    private final double perEast;
    private final double perNorth;
    private final double cellEast;
    private final double cellNorth;
    private final double halfDiagonal;
    private final PlaneArea area;
    private final double[] atCentre = new double[CELLS * CELLS];

    /** By cell: the pieces of edge that may be nearest to a point in it; found when first asked for. */
    private final int[][] near = new int[CELLS * CELLS][];

    DistanceRaster(PlaneArea area) {
        this.area = area;
        double beyondEast = BEYOND * (area.maxEast() - area.minEast());
        double beyondNorth = BEYOND * (area.maxNorth() - area.minNorth());
        west = area.minEast() - beyondEast;
        south = area.minNorth() - beyondNorth;
        double width = (area.maxEast() + beyondEast - west) / CELLS;
        double height = (area.maxNorth() + beyondNorth - south) / CELLS;
        perEast = 1 / width;
        perNorth = 1 / height;
        cellEast = width;
        cellNorth = height;
        halfDiagonal = 0.5 * Math.sqrt(width * width + height * height);
        for (int row = 0; row < CELLS; row++) {
            for (int column = 0; column < CELLS; column++) {
                atCentre[row * CELLS + column] =
                        area.signedDistanceMetres(west + (column + 0.5) * width, south + (row + 0.5) * height);
            }
        }
    }

    /** Whether the signed distance at a point is at least so much, as the edges themselves would say. */
    boolean isAtLeast(double metres, double east, double north) {
        double column = (east - west) * perEast;
        double row = (north - south) * perNorth;
        if (!(column >= 0 && column < CELLS && row >= 0 && row < CELLS)) {
            return area.signedDistanceMetres(east, north) >= metres;
        }
        int cell = (int) row * CELLS + (int) column;
        double offEast = (column - (int) column - 0.5) * cellEast;
        double offNorth = (row - (int) row - 0.5) * cellNorth;
        double beyond = atCentre[cell] - metres;
        double sure = Math.abs(beyond) - ROUNDING_METRES;
        if (sure > 0 && sure * sure > offEast * offEast + offNorth * offNorth) {
            return beyond > 0;
        }
        return signedDistance(cell, east, north) >= metres;
    }

    /** 1 where a point is inside, -1 where it is outside, 0 where only the edges can tell. */
    int side(double east, double north) {
        double column = (east - west) * perEast;
        double row = (north - south) * perNorth;
        if (!(column >= 0 && column < CELLS && row >= 0 && row < CELLS)) {
            return 0;
        }
        double centre = atCentre[(int) row * CELLS + (int) column];
        return Math.abs(centre) <= halfDiagonal + ROUNDING_METRES ? 0 : centre > 0 ? 1 : -1;
    }

    /** Of a point in a cell: only edges that are near enough to its centre can be the nearest. */
    private double signedDistance(int cell, double east, double north) {
        double least = Double.POSITIVE_INFINITY;
        for (int piece : near(cell)) {
            least = Math.min(least, area.squareFromPiece(piece, east, north));
        }
        boolean oneSide = Math.abs(atCentre[cell]) > halfDiagonal + ROUNDING_METRES;
        boolean inside = oneSide ? atCentre[cell] > 0 : area.contains(east, north);
        return inside ? Math.sqrt(least) : -Math.sqrt(least);
    }

    private int[] near(int cell) {
        if (near[cell] == null) {
            double east = west + (cell % CELLS + 0.5) * cellEast;
            double north = south + (cell / CELLS + 0.5) * cellNorth;
            double reach = Math.abs(atCentre[cell]) + 2 * halfDiagonal + ROUNDING_METRES;
            int[] found = new int[area.pieces()];
            int count = 0;
            for (int piece = 0; piece < found.length; piece++) {
                if (area.squareFromPiece(piece, east, north) <= reach * reach) {
                    found[count++] = piece;
                }
            }
            near[cell] = Arrays.copyOf(found, count);
        }
        return near[cell];
    }
}
