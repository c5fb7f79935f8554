package org.sweeptally.geo;

/**
 * Axes east, north and up at an origin (IOGP Guidance Note 373-7-2, EPSG methods 9836 and 9837): up is the normal of
 * the ellipsoid there.
 */
final class TopocentricFrame {

    private final GeocentricPoint origin;
    final double sinLatitude;
    final double cosLatitude;
    final double sinLongitude;
    final double cosLongitude;

    TopocentricFrame(LatLon place, double heightMetres) {
        origin = Wgs84.toGeocentric(place, heightMetres);
        double latitude = StrictMath.toRadians(place.latitude());
        double longitude = StrictMath.toRadians(place.longitude());
        sinLatitude = StrictMath.sin(latitude);
        cosLatitude = StrictMath.cos(latitude);
        sinLongitude = StrictMath.sin(longitude);
        cosLongitude = StrictMath.cos(longitude);
    }

    double east(GeocentricPoint point) {
        double x = point.xMetres() - origin.xMetres();
        double y = point.yMetres() - origin.yMetres();
        return y * cosLongitude - x * sinLongitude;
    }

    double north(GeocentricPoint point) {
        return (point.zMetres() - origin.zMetres()) * cosLatitude - outwards(point) * sinLatitude;
    }

    double up(GeocentricPoint point) {
        return (point.zMetres() - origin.zMetres()) * sinLatitude + outwards(point) * cosLatitude;
    }

    GeocentricPoint toGeocentric(double east, double north, double up) {
        double outwards = up * cosLatitude - north * sinLatitude;
        return new GeocentricPoint(
                origin.xMetres() + outwards * cosLongitude - east * sinLongitude,
                origin.yMetres() + outwards * sinLongitude + east * cosLongitude,
                origin.zMetres() + north * cosLatitude + up * sinLatitude);
    }

    /** Away from the earth's axis, in the origin's meridian. */
    private double outwards(GeocentricPoint point) {
        double x = point.xMetres() - origin.xMetres();
        double y = point.yMetres() - origin.yMetres();
        return x * cosLongitude + y * sinLongitude;
    }
}
