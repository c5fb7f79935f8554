package org.sweeptally.model;

/**
 * A sector around a sensor, in a plane: all directions clockwise from one to another. Its edges are kept as unit
 * vectors [east, north], so that no question about it needs an angle.
 *
 * @param widthRadians clockwise from the first edge to the last, more than 0 and less than 2 pi
 */
public record Sector(double firstEast, double firstNorth, double lastEast, double lastNorth, double widthRadians) {

    /**
     * @param fromRadians  azimuth of the first edge, clockwise from the plane's north
     * @param widthRadians more than 0 and less than 2 pi
     */
    public static Sector of(double fromRadians, double widthRadians) {
        double toRadians = fromRadians + widthRadians;
        return new Sector(
                StrictMath.sin(fromRadians),
                StrictMath.cos(fromRadians),
                StrictMath.sin(toRadians),
                StrictMath.cos(toRadians),
                widthRadians);
    }

    /** Whether a place, given by its offset from the sensor, is in the sector, its edges included. */
    boolean contains(double east, double north) {
        double pastFirst = east * firstNorth - north * firstEast;
        double pastLast = east * lastNorth - north * lastEast;
        return widthRadians <= StrictMath.PI ? pastFirst >= 0 && pastLast <= 0 : pastFirst >= 0 || pastLast <= 0;
    }

    /** Distance of a place from the nearer edge, metres; positive inside, negative outside. */
    double signedDistanceMetres(double east, double north) {
        double range = Math.sqrt(east * east + north * north);
        double first = edgeDistance(east, north, firstEast, firstNorth, range);
        double last = edgeDistance(east, north, lastEast, lastNorth, range);
        double distance = Math.min(first, last);
        return contains(east, north) ? distance : -distance;
    }

    private static double edgeDistance(double east, double north, double edgeEast, double edgeNorth, double range) {
        boolean ahead = east * edgeEast + north * edgeNorth >= 0;
        return ahead ? Math.abs(east * edgeNorth - north * edgeEast) : range;
    }
}
