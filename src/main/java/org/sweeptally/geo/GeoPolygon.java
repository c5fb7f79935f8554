package org.sweeptally.geo;

import java.util.ArrayList;
import java.util.List;

/**
 * A polygon whose edges are straight in longitude and latitude (RFC 7946), with holes. A step of more than 180 degrees
 * of longitude from one corner to the next is a step across the antimeridian; no pole is inside.
 *
 * <p>Of polygons that share edges, corner for corner, every place belongs to exactly one: an edge holds the places
 * from its southern end up to, not including, its northern end, a place on it belongs to the polygon to the east, and
 * the side of an edge on which a place lies is decided exactly ({@link GeoEdge}), the same for both of its polygons.
 */
public final class GeoPolygon {

    private final List<LatLon> outer;
    private final List<List<LatLon>> holes;
    private final GeoEdge[] edges;
    private final double south;
    private final double north;
    private final double west;
    private final double east;

    /**
     * @param outer corners in either order; a last corner that repeats the first is left out
     * @param holes the same, each inside the outer ring; what is in a hole is not in the polygon
     * @throws IllegalArgumentException for a ring of fewer than three corners, or one out of range
     */
    public GeoPolygon(List<LatLon> outer, List<List<LatLon>> holes) {
        this.outer = ring(outer);
        this.holes = holes.stream().map(GeoPolygon::ring).toList();
        List<GeoEdge> all = new ArrayList<>();
        double start = this.outer.get(0).longitude();
        addEdges(this.outer, start, all);
        double[] box = box(all);
        south = box[0];
        north = box[1];
        west = box[2];
        east = box[3];
        for (List<LatLon> hole : this.holes) {
            addEdges(hole, (west + east) / 2, all);
        }
        edges = all.toArray(new GeoEdge[0]);
    }

    public List<LatLon> outer() {
        return outer;
    }

    public List<List<LatLon>> holes() {
        return holes;
    }

    /** Whether a place belongs to the polygon; false for one that is not a number. */
    public boolean contains(LatLon place) {
        double latitude = place.latitude();
        if (!(latitude >= south && latitude < north)) {
            return false;
        }
        for (int turns = -1; turns <= 1; turns++) {
            double longitude = place.longitude() + 360.0 * turns;
            // Rounding keeps order, so that this never turns a place away that is inside.
            if (longitude >= west && longitude <= east) {
                return isInside(latitude, place.longitude(), turns);
            }
        }
        return false;
    }

    /** Crossings of the parallel from the place eastwards; an odd number means inside. */
    private boolean isInside(double latitude, double longitude, int turns) {
        boolean odd = false;
        for (GeoEdge edge : edges) {
            if (edge.spans(latitude) && edge.isEastOf(latitude, longitude, turns)) {
                odd = !odd;
            }
        }
        return odd;
    }

    /**
     * Centroid of the outer ring in longitude and latitude. Of a ring that bends around, it can be outside the polygon.
     */
    public LatLon middle() {
        LatLon first = outer.get(0);
        double twice = 0;
        double longitude = 0;
        double latitude = 0;
        for (int i = 0; i < outer.size(); i++) {
            LatLon a = outer.get(i);
            LatLon b = outer.get((i + 1) % outer.size());
            double ax = Math.IEEEremainder(a.longitude() - first.longitude(), 360);
            double ay = a.latitude() - first.latitude();
            double bx = Math.IEEEremainder(b.longitude() - first.longitude(), 360);
            double by = b.latitude() - first.latitude();
            double cross = ax * by - bx * ay;
            twice += cross;
            longitude += (ax + bx) * cross;
            latitude += (ay + by) * cross;
        }
        if (twice == 0) {
            return first;
        }
        return new LatLon(
                first.latitude() + latitude / (3 * twice),
                Math.IEEEremainder(first.longitude() + longitude / (3 * twice), 360));
    }

    private static List<LatLon> ring(List<LatLon> corners) {
        int last = corners.size() - 1;
        boolean closed = last > 0 && corners.get(0).equals(corners.get(last));
        List<LatLon> ring = List.copyOf(closed ? corners.subList(0, last) : corners);
        if (ring.size() < 3) {
            throw new IllegalArgumentException("a ring needs three corners, this one has " + ring);
        }
        for (LatLon corner : ring) {
            if (!(Math.abs(corner.latitude()) <= 90 && Math.abs(corner.longitude()) <= 180)) {
                throw new IllegalArgumentException("a corner at " + corner + " is outside +-90 and +-180 degrees");
            }
        }
        return ring;
    }

    /** The ring's edges, its first corner in that turn of longitude which is nearest to a given one. */
    private static void addEdges(List<LatLon> ring, double near, List<GeoEdge> edges) {
        int turns = (int) StrictMath.rint((near - ring.get(0).longitude()) / 360);
        for (int i = 0; i < ring.size(); i++) {
            LatLon a = ring.get(i);
            LatLon b = ring.get((i + 1) % ring.size());
            double step = b.longitude() - a.longitude();
            int next = turns + (step > 180 ? -1 : step < -180 ? 1 : 0);
            edges.add(GeoEdge.between(a, turns, b, next));
            turns = next;
        }
    }

    private static double[] box(List<GeoEdge> edges) {
        double[] box = {
            Double.POSITIVE_INFINITY, Double.NEGATIVE_INFINITY, Double.POSITIVE_INFINITY, Double.NEGATIVE_INFINITY
        };
        for (GeoEdge edge : edges) {
            box[0] = Math.min(box[0], edge.southLatitude());
            box[1] = Math.max(box[1], edge.northLatitude());
            box[2] = Math.min(box[2], edge.west());
            box[3] = Math.max(box[3], edge.east());
        }
        return box;
    }

    @Override
    public boolean equals(Object other) {
        return other instanceof GeoPolygon polygon && outer.equals(polygon.outer) && holes.equals(polygon.holes);
    }

    @Override
    public int hashCode() {
        return 31 * outer.hashCode() + holes.hashCode();
    }

    @Override
    public String toString() {
        return "GeoPolygon" + outer + (holes.isEmpty() ? "" : " without " + holes);
    }
}
