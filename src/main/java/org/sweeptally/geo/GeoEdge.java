package org.sweeptally.geo;

import java.math.BigDecimal;

/**
 * An edge from its southern to its northern end, straight in longitude and latitude. Each longitude comes with whole
 * turns of 360 degrees, so that an edge across the antimeridian is one piece.
 */
record GeoEdge(
        double southLatitude,
        double southLongitude,
        int southTurns,
        double northLatitude,
        double northLongitude,
        int northTurns) {

    /** Adding a turn of 360 degrees rounds a longitude by at most half a unit in the last place of 512 to 1024. */
    private static final double LONGITUDE_ERROR = StrictMath.ulp(512.0);

    private static final double ROUNDING = StrictMath.ulp(1.0);

    static GeoEdge between(LatLon a, int aTurns, LatLon b, int bTurns) {
        boolean upwards = a.latitude() < b.latitude();
        return upwards
                ? new GeoEdge(a.latitude(), a.longitude(), aTurns, b.latitude(), b.longitude(), bTurns)
                : new GeoEdge(b.latitude(), b.longitude(), bTurns, a.latitude(), a.longitude(), aTurns);
    }

    /** Whether the edge meets the parallel, its northern end left out; so an edge along a parallel meets none. */
    boolean spans(double latitude) {
        return southLatitude <= latitude && latitude < northLatitude;
    }

    /**
     * Whether the edge passes east of a place whose parallel it meets; on the edge is not. Exact: where rounding could
     * matter, it is computed again without.
     *
     * @param turns whole turns to add to the longitude
     */
    boolean isEastOf(double latitude, double longitude, int turns) {
        double height = northLatitude - southLatitude;
        double up = latitude - southLatitude;
        double width = (northLongitude + 360.0 * northTurns) - (southLongitude + 360.0 * southTurns);
        double right = (longitude + 360.0 * turns) - (southLongitude + 360.0 * southTurns);
        double reached = width * up;
        double needed = right * height;
        double doubt = 4 * LONGITUDE_ERROR * (up + height) + 4 * ROUNDING * (Math.abs(reached) + Math.abs(needed));
        double ahead = reached - needed;
        return Math.abs(ahead) > doubt ? ahead > 0 : isExactlyEastOf(latitude, longitude, turns);
    }

    private boolean isExactlyEastOf(double latitude, double longitude, int turns) {
        BigDecimal south = new BigDecimal(southLatitude);
        BigDecimal start = turned(southLongitude, southTurns);
        BigDecimal reached =
                turned(northLongitude, northTurns).subtract(start).multiply(new BigDecimal(latitude).subtract(south));
        BigDecimal needed =
                turned(longitude, turns).subtract(start).multiply(new BigDecimal(northLatitude).subtract(south));
        return reached.compareTo(needed) > 0;
    }

    double west() {
        return Math.min(southLongitude + 360.0 * southTurns, northLongitude + 360.0 * northTurns);
    }

    double east() {
        return Math.max(southLongitude + 360.0 * southTurns, northLongitude + 360.0 * northTurns);
    }

    private static BigDecimal turned(double longitude, int turns) {
        return new BigDecimal(longitude).add(BigDecimal.valueOf(360L * turns));
    }
}
