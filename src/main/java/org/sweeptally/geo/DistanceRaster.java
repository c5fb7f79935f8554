package org.sweeptally.geo;

/**
 * Bounds on the distance from a polygon's nearest edge without looking at its edges: the signed distance at the centres
 * of a raster over the polygon and a little beyond. Distance changes by at most a metre a metre, so that a point's
 * differs from its cell's centre's by at most the way between them. Most questions of "far enough inside?" end here, at
 * the cost of one look-up, however many edges the polygon has.
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
    private final double[] atCentre = new double[CELLS * CELLS];

    DistanceRaster(PlaneArea area) {
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
        for (int row = 0; row < CELLS; row++) {
            for (int column = 0; column < CELLS; column++) {
                atCentre[row * CELLS + column] =
                        area.signedDistanceMetres(west + (column + 0.5) * width, south + (row + 0.5) * height);
            }
        }
    }

    /**
     * Whether the signed distance at a point is at least so much: 1 for yes, -1 for no, 0 where only the edges can
     * tell.
     */
    int isAtLeast(double metres, double east, double north) {
        double column = (east - west) * perEast;
        double row = (north - south) * perNorth;
        if (!(column >= 0 && column < CELLS && row >= 0 && row < CELLS)) {
            return 0;
        }
        double offEast = (column - (int) column - 0.5) * cellEast;
        double offNorth = (row - (int) row - 0.5) * cellNorth;
        double beyond = atCentre[(int) row * CELLS + (int) column] - metres;
        double sure = Math.abs(beyond) - ROUNDING_METRES;
        if (!(sure > 0 && sure * sure > offEast * offEast + offNorth * offNorth)) {
            return 0;
        }
        return beyond > 0 ? 1 : -1;
    }
}
