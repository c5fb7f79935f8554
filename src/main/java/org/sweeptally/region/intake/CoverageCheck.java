package org.sweeptally.region.intake;

import java.util.List;
import org.locationtech.jts.geom.Coordinate;
import org.locationtech.jts.geom.GeometryFactory;
import org.locationtech.jts.operation.valid.IsValidOp;
import org.sweeptally.event.Coverage;
import org.sweeptally.event.GeoPoint;

/** Checks where a look says that it looked. */
final class CoverageCheck {

    /** Every object is tested against the area at every look. */
    static final int MOST_CORNERS = 1000;

    private CoverageCheck() {}

    /** Whether the coverage can be used; what is wrong goes to the sink. */
    static boolean check(FaultSink sink, Coverage coverage) {
        boolean sound = distances(sink, coverage.getFromMetres(), coverage.getToMetres());
        sound &= sector(sink, coverage.getFromAzimuthDegrees(), coverage.getToAzimuthDegrees());
        return sound & (coverage.getArea() == null || area(sink, coverage.getArea()));
    }

    private static boolean distances(FaultSink sink, Double from, Double to) {
        boolean sound = distance(sink, "coverage.fromMetres", from);
        sound &= distance(sink, "coverage.toMetres", to);
        double least = from == null ? 0 : from;
        if (!sound || to == null || to > least) {
            return sound;
        }
        sink.add("coverage.toMetres", () -> "coverage.toMetres is " + Shown.number(to)
                + ": more than coverage.fromMetres is allowed, which is " + Shown.number(least));
        return false;
    }

    private static boolean distance(FaultSink sink, String field, Double metresOrNull) {
        return metresOrNull == null || FieldCheck.within(sink, field, metresOrNull, 0, Double.MAX_VALUE,
                "metres from the sensor, 0 or more, are allowed");
    }

    private static boolean sector(FaultSink sink, Double from, Double to) {
        if (from == null ^ to == null) {
            String given = from == null ? "coverage.toAzimuthDegrees" : "coverage.fromAzimuthDegrees";
            String missing = from == null ? "coverage.fromAzimuthDegrees" : "coverage.toAzimuthDegrees";
            sink.add(missing, () -> missing + " is missing: a sector is given by its start and its end, and "
                    + given + " is there");
            return false;
        }
        boolean sound = FieldCheck.azimuth(sink, "coverage.fromAzimuthDegrees", from);
        sound &= FieldCheck.azimuth(sink, "coverage.toAzimuthDegrees", to);
        if (!sound || from == null || from.doubleValue() != to.doubleValue()) {
            return sound;
        }
        sink.add("coverage.toAzimuthDegrees", () -> "coverage.toAzimuthDegrees is " + Shown.number(to)
                + " as coverage.fromAzimuthDegrees is: a sector has a width; all around is no sector, or 0 to 360");
        return false;
    }

    private static boolean area(FaultSink sink, List<GeoPoint> corners) {
        if (corners.size() < 3 || corners.size() > MOST_CORNERS) {
            sink.add("coverage.area", () -> "coverage.area has " + corners.size() + " corners: 3 to " + MOST_CORNERS
                    + " are allowed");
            return false;
        }
        boolean sound = true;
        for (int i = 0; i < corners.size(); i++) {
            String corner = "coverage.area[" + i + "].";
            sound &= FieldCheck.latitude(sink, corner + "latitude", corners.get(i).getLatitude());
            sound &= FieldCheck.longitude(sink, corner + "longitude", corners.get(i).getLongitude());
            sound &= FieldCheck.finite(sink, corner + "heightMetres", corners.get(i).getHeightMetres());
            if (!sound) {
                return false;
            }
        }
        return closesItself(sink, corners) && simple(sink, corners);
    }

    private static boolean closesItself(FaultSink sink, List<GeoPoint> corners) {
        GeoPoint first = corners.get(0);
        GeoPoint last = corners.get(corners.size() - 1);
        if (first.getLatitude() != last.getLatitude() || first.getLongitude() != last.getLongitude()) {
            return true;
        }
        sink.add("coverage.area", () -> "coverage.area ends with its first corner: the first corner is not repeated");
        return false;
    }

    private static boolean simple(FaultSink sink, List<GeoPoint> corners) {
        Coordinate[] ring = new Coordinate[corners.size() + 1];
        for (int i = 0; i < ring.length; i++) {
            GeoPoint corner = corners.get(i % corners.size());
            ring[i] = new Coordinate(corner.getLongitude(), corner.getLatitude());
        }
        if (new IsValidOp(new GeometryFactory().createPolygon(ring)).isValid()) {
            return true;
        }
        sink.add("coverage.area", () -> "coverage.area with " + corners.size()
                + " corners crosses or touches itself: the corners of a simple polygon are expected, in order");
        return false;
    }
}
