package org.sweeptally.geo;

/**
 * The ellipsoid of the World Geodetic System 1984 (NIMA TR8350.2; EPSG 7030) and the conversion between geographic and
 * geocentric coordinates.
 */
public final class Wgs84 {

    public static final double SEMI_MAJOR_AXIS_METRES = 6378137;
    public static final double INVERSE_FLATTENING = 298.257223563;
    public static final double FLATTENING = 1 / INVERSE_FLATTENING;
    public static final double SEMI_MINOR_AXIS_METRES = SEMI_MAJOR_AXIS_METRES * (1 - FLATTENING);

    /** First eccentricity squared. */
    public static final double ECCENTRICITY_SQUARED = FLATTENING * (2 - FLATTENING);

    /** Second eccentricity squared. */
    public static final double SECOND_ECCENTRICITY_SQUARED = ECCENTRICITY_SQUARED / (1 - ECCENTRICITY_SQUARED);

    /**
     * Rounds of Bowring's correction; from 10 km below the surface to 10,000 km above it the second changes nothing.
     */
    private static final int BOWRING_ROUNDS = 2;

    private Wgs84() {}

    /**
     * Geocentric coordinates of a place at a height above the ellipsoid, metres (EPSG method 9602).
     *
     * @param place degrees
     */
    public static GeocentricPoint toGeocentric(LatLon place, double heightMetres) {
        double latitude = StrictMath.toRadians(place.latitude());
        double longitude = StrictMath.toRadians(place.longitude());
        double sin = StrictMath.sin(latitude);
        double cos = StrictMath.cos(latitude);
        double normal = primeVerticalRadiusMetres(sin);
        double fromAxis = (normal + heightMetres) * cos;
        return new GeocentricPoint(
                fromAxis * StrictMath.cos(longitude),
                fromAxis * StrictMath.sin(longitude),
                (normal * (1 - ECCENTRICITY_SQUARED) + heightMetres) * sin);
    }

    /**
     * The place on the ellipsoid below or above a point, by Bowring (1976, "Transformation from spatial to geographical
     * coordinates", Survey Review 23: 323-327), repeated. Good to 1e-11 degrees at heights from -10 km to 10,000 km;
     * not meant for points near the earth's centre.
     */
    public static LatLon toPlace(GeocentricPoint point) {
        double fromAxis = fromAxis(point);
        double a = SEMI_MAJOR_AXIS_METRES;
        double b = SEMI_MINOR_AXIS_METRES;
        double sin = point.zMetres() * a;
        double cos = fromAxis * b;
        double up = 0;
        double out = 0;
        for (int round = 0; round < BOWRING_ROUNDS; round++) {
            double length = Math.sqrt(sin * sin + cos * cos);
            sin /= length;
            cos /= length;
            up = point.zMetres() + SECOND_ECCENTRICITY_SQUARED * b * sin * sin * sin;
            out = fromAxis - ECCENTRICITY_SQUARED * a * cos * cos * cos;
            // Tangent of the parametric latitude of what has been found, for the next round.
            sin = (1 - FLATTENING) * up;
            cos = out;
        }
        return new LatLon(
                StrictMath.toDegrees(StrictMath.atan2(up, out)),
                StrictMath.toDegrees(StrictMath.atan2(point.yMetres(), point.xMetres())));
    }

    /** Height above the ellipsoid, metres, of a point whose place is known from {@link #toPlace}. */
    public static double heightMetres(GeocentricPoint point, LatLon place) {
        double latitude = StrictMath.toRadians(place.latitude());
        double sin = StrictMath.sin(latitude);
        // This form has no pole at the poles, unlike distance from the axis over cosine.
        return fromAxis(point) * StrictMath.cos(latitude)
                + point.zMetres() * sin
                - SEMI_MAJOR_AXIS_METRES * Math.sqrt(1 - ECCENTRICITY_SQUARED * sin * sin);
    }

    /** Radius of curvature in the prime vertical, metres, by the sine of the latitude. */
    static double primeVerticalRadiusMetres(double sinLatitude) {
        return SEMI_MAJOR_AXIS_METRES / Math.sqrt(1 - ECCENTRICITY_SQUARED * sinLatitude * sinLatitude);
    }

    private static double fromAxis(GeocentricPoint point) {
        return Math.sqrt(point.xMetres() * point.xMetres() + point.yMetres() * point.yMetres());
    }
}
