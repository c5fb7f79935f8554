package org.sweeptally.harbour;

/**
 * The recordings' own metres, east and north of their origin, by WGS84 radii there: good to a centimetre in the
 * harbour.
 */
final class HarbourPlane {

    private static final double LATITUDE = 63.4389029083;
    private static final double LONGITUDE = 10.39908278;

    /** Metres a radian, northward and eastward. */
    private static final double NORTHWARD;
    private static final double EASTWARD;

    static {
        double semiMajor = 6378137.0;
        double flattening = 1 / 298.257223563;
        double squaredEccentricity = flattening * (2 - flattening);
        double sine = StrictMath.sin(StrictMath.toRadians(LATITUDE));
        double w = 1 - squaredEccentricity * sine * sine;
        NORTHWARD = semiMajor * (1 - squaredEccentricity) / (w * Math.sqrt(w));
        EASTWARD = semiMajor / Math.sqrt(w) * StrictMath.cos(StrictMath.toRadians(LATITUDE));
    }

    private HarbourPlane() {}

    static double latitude(double north) {
        return LATITUDE + StrictMath.toDegrees(north / NORTHWARD);
    }

    static double longitude(double east) {
        return LONGITUDE + StrictMath.toDegrees(east / EASTWARD);
    }

    static double east(double longitude) {
        return StrictMath.toRadians(longitude - LONGITUDE) * EASTWARD;
    }

    static double north(double latitude) {
        return StrictMath.toRadians(latitude - LATITUDE) * NORTHWARD;
    }
}
