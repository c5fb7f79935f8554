package org.sweeptally.geo;

/**
 * The plane that touches the WGS84 ellipsoid at an origin. A place's coordinates are the east and north of its
 * topocentric coordinates (EPSG methods 9836 and 9837), height 0: the ellipsoid is projected along the origin's normal.
 *
 * <p>Horizontal lengths differ from geodesics by about d^3 / (6 R^2), d the distance from the origin, R the earth's
 * radius: 0.5 mm at 5 km, 0.5 m at 50 km.
 *
 * <p>Only the hemisphere that faces the plane is in it: a place beyond would fold back into the plane next to places
 * that are half the earth away. Such a place's coordinates are NaN, and so is the place of a point that lies over no
 * place, both of which every polygon says are outside.
 */
public final class LocalPlane {

    private final LatLon origin;
    private final TopocentricFrame frame;
    private final double normalRadius;

    public LocalPlane(LatLon origin) {
        this.origin = origin;
        this.frame = new TopocentricFrame(origin, 0);
        this.normalRadius = Wgs84.primeVerticalRadiusMetres(frame.sinLatitude);
    }

    public LatLon origin() {
        return origin;
    }

    /** Coordinates of a place on the ellipsoid; NaN where the ellipsoid does not face the plane. */
    public PlanePoint toPlane(LatLon place) {
        GeocentricPoint point = Wgs84.toGeocentric(place, 0);
        return isFacing(point)
                ? new PlanePoint(frame.east(point), frame.north(point))
                : new PlanePoint(Double.NaN, Double.NaN);
    }

    /** Whether the ellipsoid's normal at a point of it, (x, y, (1 + e'^2) z) but for its length, has a part along U. */
    private boolean isFacing(GeocentricPoint p) {
        double outwards = p.xMetres() * frame.cosLongitude + p.yMetres() * frame.sinLongitude;
        double upwards = (1 + Wgs84.SECOND_ECCENTRICITY_SQUARED) * p.zMetres();
        return outwards * frame.cosLatitude + upwards * frame.sinLatitude > 0;
    }

    /**
     * The place on the ellipsoid that has these coordinates, longitude from -180 to 180; NaN where there is none, from
     * 6357 km on. In closed form, so that the only error is that of rounding: its coordinates come back within 1e-8 m
     * over 1000 km.
     *
     * <p>A point O + T + u U, with O the origin, T in the plane and U its normal, is on the ellipsoid if
     * <pre>
     *   K(U, U) u^2 + 2 (nu + K(T, U)) u + K(T, T) = 0,     K(v, w) = v . w + e'^2 v_z w_z
     * </pre>
     * where nu is the radius of curvature in the prime vertical at O and e'^2 the second eccentricity squared, since
     * K(O, T) = nu U . T = 0. The upper of the two roots is the near side.
     */
    public LatLon toGeodetic(PlanePoint point) {
        double e = point.eastMetres();
        double n = point.northMetres();
        double tz = n * frame.cosLatitude;
        double uz = frame.sinLatitude;
        double ktt = e * e + n * n + Wgs84.SECOND_ECCENTRICITY_SQUARED * tz * tz;
        double ktu = Wgs84.SECOND_ECCENTRICITY_SQUARED * tz * uz;
        double kuu = 1 + Wgs84.SECOND_ECCENTRICITY_SQUARED * uz * uz;
        double half = normalRadius + ktu;
        double up = -ktt / (half + Math.sqrt(half * half - kuu * ktt));
        return surfacePlace(frame.toGeocentric(e, n, up));
    }

    /** On the surface the geodetic latitude follows without iteration. */
    private static LatLon surfacePlace(GeocentricPoint p) {
        double fromAxis = Math.sqrt(p.xMetres() * p.xMetres() + p.yMetres() * p.yMetres());
        return new LatLon(
                StrictMath.toDegrees(StrictMath.atan2(p.zMetres(), (1 - Wgs84.ECCENTRICITY_SQUARED) * fromAxis)),
                StrictMath.toDegrees(StrictMath.atan2(p.yMetres(), p.xMetres())));
    }

    /**
     * The angle by which true north at a place is turned counter-clockwise from the plane's north axis. An offset
     * (east, north) at the place, turned counter-clockwise by it, is an offset in the plane.
     */
    public double convergenceRadians(LatLon at) {
        double latitude = StrictMath.toRadians(at.latitude());
        double turn = StrictMath.toRadians(at.longitude() - origin.longitude());
        double sin = StrictMath.sin(latitude);
        double westwards = sin * StrictMath.sin(turn);
        double northwards =
                StrictMath.cos(latitude) * frame.cosLatitude + sin * frame.sinLatitude * StrictMath.cos(turn);
        return StrictMath.atan2(westwards, northwards);
    }
}
