package org.sweeptally.geo;

import java.util.ArrayList;
import java.util.Collections;
import java.util.List;

/**
 * A polygon in a {@link LocalPlane}, in metres. Its edges are straight pieces that follow the edges of the polygon it
 * was made from, which are straight in longitude and latitude, within {@link #EDGE_TOLERANCE_METRES}; two polygons
 * that share an edge share its pieces.
 */
public final class PlaneArea {

    /** Distance that a piece may keep from the edge that it stands for: far below what any sensor measures. */
    public static final double EDGE_TOLERANCE_METRES = 0.5;

    /** Halvings of an edge, for edges so long that the tolerance cannot be had. */
    private static final int HALVINGS = 12;

    /** So many questions cost as much without a raster as making it does: whoever asks less has no use for it. */
    private static final int ASKED_BEFORE_RASTER = DistanceRaster.CELLS * DistanceRaster.CELLS;

    // Piece k runs from its southern end (fromEast, fromNorth) by (alongEast, alongNorth), up to toNorth.
    private final double[] fromEast;
    private final double[] fromNorth;
    private final double[] toNorth;
    private final double[] alongEast;
    private final double[] alongNorth;
    private final double[] inverseSquare;
    private final double minEast;
    private final double maxEast;
    private final double minNorth;
    private final double maxNorth;
    private final double areaSquareMetres;

    /** Made when asked for often enough to be worth it: what is seen in one look has no use for it. */
    private DistanceRaster raster;

    private int asked;

    /**
     * The polygon in the plane.
     *
     * @throws IllegalArgumentException if a corner does not face the plane
     */
    public static PlaneArea of(GeoPolygon polygon, LocalPlane plane) {
        return ofRings(rings(polygon, plane));
    }

    /** The polygon whose rings are given by their corners in the plane: the outline, then the holes. */
    public static PlaneArea ofRings(List<List<PlanePoint>> rings) {
        List<PlanePoint[]> pieces = new ArrayList<>();
        double area = Math.abs(addRing(rings.get(0), pieces));
        int outerPieces = pieces.size();
        for (List<PlanePoint> hole : rings.subList(1, rings.size())) {
            area -= Math.abs(addRing(hole, pieces));
        }
        return new PlaneArea(pieces, outerPieces, area);
    }

    /**
     * The rings of a polygon in the plane, the outline first: its corners, and points between them that follow its
     * edges.
     *
     * @throws IllegalArgumentException if a corner does not face the plane
     */
    public static List<List<PlanePoint>> rings(GeoPolygon polygon, LocalPlane plane) {
        List<List<PlanePoint>> rings = new ArrayList<>();
        rings.add(ring(polygon.outer(), plane));
        polygon.holes().forEach(hole -> rings.add(ring(hole, plane)));
        return rings;
    }

    private PlaneArea(List<PlanePoint[]> pieces, int outerPieces, double areaSquareMetres) {
        int n = pieces.size();
        fromEast = new double[n];
        fromNorth = new double[n];
        toNorth = new double[n];
        alongEast = new double[n];
        alongNorth = new double[n];
        inverseSquare = new double[n];
        double[] box = {
            Double.POSITIVE_INFINITY, Double.NEGATIVE_INFINITY, Double.POSITIVE_INFINITY, Double.NEGATIVE_INFINITY
        };
        for (int k = 0; k < n; k++) {
            PlanePoint a = pieces.get(k)[0];
            PlanePoint b = pieces.get(k)[1];
            setPiece(k, a.northMetres() < b.northMetres() ? a : b, a.northMetres() < b.northMetres() ? b : a);
            if (k < outerPieces) {
                box[0] = Math.min(box[0], a.eastMetres());
                box[1] = Math.max(box[1], a.eastMetres());
                box[2] = Math.min(box[2], a.northMetres());
                box[3] = Math.max(box[3], a.northMetres());
            }
        }
        minEast = box[0];
        maxEast = box[1];
        minNorth = box[2];
        maxNorth = box[3];
        this.areaSquareMetres = areaSquareMetres;
    }

    private void setPiece(int k, PlanePoint from, PlanePoint to) {
        fromEast[k] = from.eastMetres();
        fromNorth[k] = from.northMetres();
        toNorth[k] = to.northMetres();
        alongEast[k] = to.eastMetres() - from.eastMetres();
        alongNorth[k] = to.northMetres() - from.northMetres();
        double square = alongEast[k] * alongEast[k] + alongNorth[k] * alongNorth[k];
        inverseSquare[k] = square > 0 ? 1 / square : 0;
    }

    /** Whether a point is inside; a point on an edge belongs to the polygon to the east or north. */
    public boolean contains(double east, double north) {
        if (!(east >= minEast && east <= maxEast && north >= minNorth && north <= maxNorth)) {
            return false;
        }
        int known = raster == null ? 0 : raster.side(east, north);
        return known == 0 ? isInside(east, north) : known > 0;
    }

    private boolean isInside(double east, double north) {
        boolean odd = false;
        for (int k = 0; k < fromEast.length; k++) {
            odd ^= isCrossed(k, east, north);
        }
        return odd;
    }

    /**
     * Distance from the nearest edge, metres; positive inside, negative outside, NaN for a point that is not a number.
     * Cost: one pass over the pieces.
     */
    public double signedDistanceMetres(double east, double north) {
        boolean odd = false;
        double least = Double.POSITIVE_INFINITY;
        for (int k = 0; k < fromEast.length; k++) {
            odd ^= isCrossed(k, east, north);
            // Math.min, unlike a comparison, lets NaN through.
            least = Math.min(least, squareFromPiece(k, east, north));
        }
        double distance = Math.sqrt(least);
        return odd ? distance : -distance;
    }

    /** Square of a point's distance from a piece. */
    double squareFromPiece(int k, double east, double north) {
        double right = east - fromEast[k];
        double up = north - fromNorth[k];
        double share = (right * alongEast[k] + up * alongNorth[k]) * inverseSquare[k];
        share = Math.min(1, Math.max(0, share));
        double offEast = right - share * alongEast[k];
        double offNorth = up - share * alongNorth[k];
        return offEast * offEast + offNorth * offNorth;
    }

    int pieces() {
        return fromEast.length;
    }

    /**
     * Whether the signed distance of a point is at least so much, metres. The same answer as from
     * {@link #signedDistanceMetres}, but for points well inside or far outside without a pass over the pieces.
     */
    public boolean isAtLeast(double metres, double east, double north) {
        if (isFarther(-metres, east, north)) {
            return false;
        }
        if (raster == null) {
            if (asked < ASKED_BEFORE_RASTER) {
                asked++;
                return signedDistanceMetres(east, north) >= metres;
            }
            raster = new DistanceRaster(this);
        }
        return raster.isAtLeast(metres, east, north);
    }

    /** Whether a point is outside the box around the polygon, by more than so many metres and a rounding. */
    private boolean isFarther(double metres, double east, double north) {
        double beyondEast = Math.max(minEast - east, east - maxEast);
        double beyondNorth = Math.max(minNorth - north, north - maxNorth);
        double beyond = Math.max(beyondEast, beyondNorth);
        return beyond > 0 && beyond > metres + DistanceRaster.ROUNDING_METRES;
    }

    /**
     * Whether a line from a point eastwards crosses a piece. Ends are compared as they are, since differences round,
     * and a point level with the end of two pieces must cross exactly one of them.
     */
    private boolean isCrossed(int k, double east, double north) {
        return north >= fromNorth[k]
                && north < toNorth[k]
                && (east - fromEast[k]) * alongNorth[k] < alongEast[k] * (north - fromNorth[k]);
    }

    public double minEast() {
        return minEast;
    }

    public double maxEast() {
        return maxEast;
    }

    public double minNorth() {
        return minNorth;
    }

    public double maxNorth() {
        return maxNorth;
    }

    /** Area without the holes, in the plane. */
    public double areaSquareMetres() {
        return areaSquareMetres;
    }

    /** Adds a ring's pieces; returns its area, positive for a ring that runs counter-clockwise. */
    private static double addRing(List<PlanePoint> ring, List<PlanePoint[]> pieces) {
        double twice = 0;
        PlanePoint first = ring.get(0);
        for (int i = 0; i < ring.size(); i++) {
            PlanePoint a = ring.get(i);
            PlanePoint b = ring.get((i + 1) % ring.size());
            pieces.add(new PlanePoint[] {a, b});
            twice += (a.eastMetres() - first.eastMetres()) * (b.northMetres() - first.northMetres())
                    - (b.eastMetres() - first.eastMetres()) * (a.northMetres() - first.northMetres());
        }
        return twice / 2;
    }

    private static List<PlanePoint> ring(List<LatLon> corners, LocalPlane plane) {
        List<PlanePoint> ring = new ArrayList<>();
        for (int i = 0; i < corners.size(); i++) {
            List<PlanePoint> points = followed(corners.get(i), corners.get((i + 1) % corners.size()), plane);
            ring.addAll(points.subList(0, points.size() - 1));
        }
        return ring;
    }

    /** Points from a to b along their edge, computed in one direction whichever way the ring runs. */
    private static List<PlanePoint> followed(LatLon a, LatLon b, LocalPlane plane) {
        boolean turned = a.latitude() > b.latitude()
                || (a.latitude() == b.latitude() && a.longitude() > b.longitude());
        LatLon from = turned ? b : a;
        LatLon to = turned ? a : b;
        List<PlanePoint> points = new ArrayList<>();
        points.add(onPlane(from, plane));
        follow(from, points.get(0), to, onPlane(to, plane), plane, HALVINGS, points);
        if (turned) {
            Collections.reverse(points);
        }
        return points;
    }

    private static void follow(
            LatLon from,
            PlanePoint start,
            LatLon to,
            PlanePoint end,
            LocalPlane plane,
            int halvings,
            List<PlanePoint> points) {
        LatLon middle = between(from, to);
        PlanePoint half = onPlane(middle, plane);
        double offEast = half.eastMetres() - (start.eastMetres() + end.eastMetres()) / 2;
        double offNorth = half.northMetres() - (start.northMetres() + end.northMetres()) / 2;
        boolean near = offEast * offEast + offNorth * offNorth <= EDGE_TOLERANCE_METRES * EDGE_TOLERANCE_METRES;
        if (near || halvings == 0) {
            points.add(end);
        } else {
            follow(from, start, middle, half, plane, halvings - 1, points);
            follow(middle, half, to, end, plane, halvings - 1, points);
        }
    }

    private static LatLon between(LatLon a, LatLon b) {
        double step = Math.IEEEremainder(b.longitude() - a.longitude(), 360);
        double longitude = Math.IEEEremainder(a.longitude() + step / 2, 360);
        return new LatLon((a.latitude() + b.latitude()) / 2, longitude);
    }

    private static PlanePoint onPlane(LatLon place, LocalPlane plane) {
        PlanePoint point = plane.toPlane(place);
        if (Double.isNaN(point.eastMetres())) {
            throw new IllegalArgumentException(place + " does not face the plane at " + plane.origin());
        }
        return point;
    }
}
