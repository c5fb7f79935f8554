package org.sweeptally.region;

import java.util.ArrayList;
import java.util.List;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.geo.PlanePoint;

/** Least distance between two polygons in a plane. */
final class PolygonDistance {

    private PolygonDistance() {}

    /**
     * Metres between two polygons, 0 where they meet. Of two polygons whose edges do not cross, the least distance is
     * that of a corner of one from the other. Cost: edges times edges.
     *
     * @param oneArea   the first polygon in the plane
     * @param otherArea the second polygon in the plane
     */
    static double between(
            GeoPolygon one, PlaneArea oneArea, GeoPolygon other, PlaneArea otherArea, LocalPlane plane) {
        List<List<PlanePoint>> oneRings = rings(one, plane);
        List<List<PlanePoint>> otherRings = rings(other, plane);
        if (anyCross(oneRings, otherRings)) {
            return 0;
        }
        return Math.min(leastOfCorners(oneRings, otherArea), leastOfCorners(otherRings, oneArea));
    }

    private static List<List<PlanePoint>> rings(GeoPolygon polygon, LocalPlane plane) {
        List<List<LatLon>> all = new ArrayList<>();
        all.add(polygon.outer());
        all.addAll(polygon.holes());
        return all.stream().map(ring -> ring.stream().map(plane::toPlane).toList()).toList();
    }

    private static double leastOfCorners(List<List<PlanePoint>> rings, PlaneArea area) {
        double least = Double.POSITIVE_INFINITY;
        for (List<PlanePoint> ring : rings) {
            for (PlanePoint corner : ring) {
                double inside = area.signedDistanceMetres(corner.eastMetres(), corner.northMetres());
                least = Math.min(least, Math.max(0, -inside));
            }
        }
        return least;
    }

    private static boolean anyCross(List<List<PlanePoint>> one, List<List<PlanePoint>> other) {
        for (List<PlanePoint> ring : one) {
            for (List<PlanePoint> otherRing : other) {
                if (ringsCross(ring, otherRing)) {
                    return true;
                }
            }
        }
        return false;
    }

    private static boolean ringsCross(List<PlanePoint> one, List<PlanePoint> other) {
        for (int i = 0; i < one.size(); i++) {
            PlanePoint a = one.get(i);
            PlanePoint b = one.get((i + 1) % one.size());
            for (int j = 0; j < other.size(); j++) {
                if (edgesCross(a, b, other.get(j), other.get((j + 1) % other.size()))) {
                    return true;
                }
            }
        }
        return false;
    }

    /** Whether each edge has its ends on different sides of the other. */
    private static boolean edgesCross(PlanePoint a, PlanePoint b, PlanePoint c, PlanePoint d) {
        return side(a, b, c) * side(a, b, d) < 0 && side(c, d, a) * side(c, d, b) < 0;
    }

    private static double side(PlanePoint from, PlanePoint to, PlanePoint point) {
        return (to.eastMetres() - from.eastMetres()) * (point.northMetres() - from.northMetres())
                - (to.northMetres() - from.northMetres()) * (point.eastMetres() - from.eastMetres());
    }
}
