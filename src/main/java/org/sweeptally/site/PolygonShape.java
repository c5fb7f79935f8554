package org.sweeptally.site;

import java.util.List;
import java.util.Locale;
import java.util.Optional;
import org.locationtech.jts.geom.Coordinate;
import org.locationtech.jts.geom.GeometryFactory;
import org.locationtech.jts.geom.LinearRing;
import org.locationtech.jts.geom.Polygon;
import org.locationtech.jts.operation.overlayng.OverlayNG;
import org.locationtech.jts.operation.overlayng.OverlayNGRobust;
import org.locationtech.jts.operation.valid.IsValidOp;
import org.locationtech.jts.operation.valid.TopologyValidationError;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.Wgs84;

/**
 * A polygon for questions of shape: longitude and latitude scaled to metres at a middle, so that edges that are
 * straight there stay straight, and corners that are shared stay shared. Lengths are good to a few per cent over 100
 * km. Nothing that the picture is computed from comes from here.
 */
final class PolygonShape {

    private static final GeometryFactory FACTORY = new GeometryFactory();

    private final Polygon polygon;

    PolygonShape(GeoPolygon polygon, LatLon middle) {
        LinearRing[] holes = polygon.holes().stream().map(hole -> ring(hole, middle)).toArray(LinearRing[]::new);
        this.polygon = FACTORY.createPolygon(ring(polygon.outer(), middle), holes);
    }

    /** What makes a polygon of complete rings unusable, as a sentence; empty for a good one. */
    static Optional<String> faultOf(GeoPolygon polygon) {
        LatLon middle = polygon.outer().get(0);
        TopologyValidationError error = new IsValidOp(new PolygonShape(polygon, middle).polygon).getValidationError();
        if (error == null) {
            return Optional.empty();
        }
        String where = error.getCoordinate() == null ? "" : " near " + at(error.getCoordinate(), middle);
        return Optional.of(
                switch (error.getErrorType()) {
                    case TopologyValidationError.SELF_INTERSECTION, TopologyValidationError.RING_SELF_INTERSECTION ->
                            "the outline crosses or touches itself" + where + ", must not";
                    case TopologyValidationError.TOO_FEW_POINTS ->
                            "the ring has too few different corners" + where + ", must have at least 3";
                    case TopologyValidationError.HOLE_OUTSIDE_SHELL ->
                            "a hole is outside the outline" + where + ", must be inside";
                    case TopologyValidationError.NESTED_HOLES -> "a hole is inside another" + where + ", must not be";
                    case TopologyValidationError.DISCONNECTED_INTERIOR ->
                            "holes cut it into pieces" + where + ", must be one piece";
                    default -> "must be a polygon: " + error.getMessage() + where;
                });
    }

    double areaSquareMetres() {
        return polygon.getArea();
    }

    /** Mean width of something long and narrow. */
    double meanWidthMetres() {
        return 2 * polygon.getArea() / polygon.getLength();
    }

    double overlapSquareMetres(PolygonShape other) {
        return OverlayNGRobust.overlay(polygon, other.polygon, OverlayNG.INTERSECTION).getArea();
    }

    double distanceMetres(PolygonShape other) {
        return polygon.distance(other.polygon);
    }

    /** Greatest straight distance between two corners, through the earth: 100 km is shortened by 1 m. */
    static double acrossMetres(GeoPolygon polygon) {
        LatLon middle = polygon.outer().get(0);
        Coordinate[] hull = new PolygonShape(polygon, middle).polygon.convexHull().getCoordinates();
        double greatest = 0;
        for (int i = 0; i < hull.length; i++) {
            Coordinate a = geocentric(place(hull[i], middle));
            for (int j = 0; j < i; j++) {
                greatest = Math.max(greatest, a.distance3D(geocentric(place(hull[j], middle))));
            }
        }
        return greatest;
    }

    private static Coordinate geocentric(LatLon place) {
        var point = Wgs84.toGeocentric(place, 0);
        return new Coordinate(point.xMetres(), point.yMetres(), point.zMetres());
    }

    private static LinearRing ring(List<LatLon> corners, LatLon middle) {
        Coordinate[] coordinates = new Coordinate[corners.size() + 1];
        for (int i = 0; i <= corners.size(); i++) {
            LatLon corner = corners.get(i % corners.size());
            coordinates[i] = new Coordinate(
                    Math.IEEEremainder(corner.longitude() - middle.longitude(), 360) * metresPerDegreeEast(middle),
                    (corner.latitude() - middle.latitude()) * metresPerDegree());
        }
        return FACTORY.createLinearRing(coordinates);
    }

    private static LatLon place(Coordinate coordinate, LatLon middle) {
        return new LatLon(
                middle.latitude() + coordinate.y / metresPerDegree(),
                Math.IEEEremainder(middle.longitude() + coordinate.x / metresPerDegreeEast(middle), 360));
    }

    private static String at(Coordinate coordinate, LatLon middle) {
        LatLon place = place(coordinate, middle);
        return String.format(Locale.ROOT, "longitude %.6f, latitude %.6f", place.longitude(), place.latitude());
    }

    private static double metresPerDegree() {
        return StrictMath.toRadians(1) * Wgs84.SEMI_MAJOR_AXIS_METRES;
    }

    /** Of a pole too, so that a polygon there does not collapse before its latitude is refused. */
    private static double metresPerDegreeEast(LatLon middle) {
        return metresPerDegree() * Math.max(1e-3, StrictMath.cos(StrictMath.toRadians(middle.latitude())));
    }
}
