package org.sweeptally.geo;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Optional;

/**
 * Polygons in a plane that no line of sight enters. What they leave visible from a point is a polygon, exact but for
 * rounding.
 *
 * <p>A line of sight ends where it enters an obstacle: at the nearest edge that it crosses from the outside. An
 * obstacle in which the eye itself stands is seen over up to its outline, as from a mast on a headland, and hides what
 * a line enters again behind it. Between two neighbouring directions in which corners or crossings of edges lie, the
 * nearest such edge is the same in all directions, so it is found once for each, in the direction between them. Cost:
 * directions times edges within reach.
 */
public final class Obstacles {

    /** The visible polygon ends at a square around the eye, whose sides are this many reaches away. */
    private static final double SQUARE_REACHES = 1.1;

    /** An edge [from east, from north, to east, to north] with the obstacle on its left. */
    private final List<double[]> edges = new ArrayList<>();

    /** Where edges of different obstacles cross, [east, north]. */
    private final List<double[]> crossings = new ArrayList<>();

    /** @param obstacles each by its rings, as from {@link PlaneArea#rings} */
    public Obstacles(List<List<List<PlanePoint>>> obstacles) {
        for (List<List<PlanePoint>> rings : obstacles) {
            int before = edges.size();
            for (int i = 0; i < rings.size(); i++) {
                addRing(rings.get(i), i == 0);
            }
            for (int k = before; k < edges.size(); k++) {
                for (int l = 0; l < before; l++) {
                    addCrossing(edges.get(k), edges.get(l));
                }
            }
        }
    }

    private void addRing(List<PlanePoint> ring, boolean outline) {
        double twice = 0;
        for (int i = 0; i < ring.size(); i++) {
            double[] e = edge(ring.get(i), ring.get((i + 1) % ring.size()));
            double[] o = edge(ring.get(0), ring.get(i));
            twice += cross(o[2] - o[0], o[3] - o[1], e[2] - e[0], e[3] - e[1]);
        }
        boolean leftIsInside = twice > 0 == outline;
        for (int i = 0; i < ring.size(); i++) {
            PlanePoint a = ring.get(i);
            PlanePoint b = ring.get((i + 1) % ring.size());
            edges.add(leftIsInside ? edge(a, b) : edge(b, a));
        }
    }

    private void addCrossing(double[] one, double[] other) {
        double alongEast = one[2] - one[0];
        double alongNorth = one[3] - one[1];
        double otherEast = other[2] - other[0];
        double otherNorth = other[3] - other[1];
        double sine = cross(alongEast, alongNorth, otherEast, otherNorth);
        if (sine == 0) {
            return;
        }
        double share = cross(other[0] - one[0], other[1] - one[1], otherEast, otherNorth) / sine;
        double otherShare = cross(other[0] - one[0], other[1] - one[1], alongEast, alongNorth) / sine;
        if (share >= 0 && share <= 1 && otherShare >= 0 && otherShare <= 1) {
            crossings.add(new double[] {one[0] + share * alongEast, one[1] + share * alongNorth});
        }
    }

    /**
     * What is visible from a point: a polygon around it that goes beyond the reach where nothing hides; empty where
     * nothing within reach hides anything.
     */
    public Optional<PlaneArea> visibleFrom(PlanePoint eye, double reachMetres) {
        List<double[]> facing = facing(eye, reachMetres);
        if (facing.isEmpty()) {
            return Optional.empty();
        }
        List<double[]> directions = directions(eye, facing, SQUARE_REACHES * reachMetres);
        addSquare(facing, SQUARE_REACHES * reachMetres);
        List<PlanePoint> ring = new ArrayList<>();
        double[] last = null;
        for (int i = 0; i < directions.size(); i++) {
            double[] from = directions.get(i);
            double[] to = directions.get((i + 1) % directions.size());
            double[] nearest = nearest(facing, middle(from, to));
            if (nearest == last) {
                ring.remove(ring.size() - 1);
            } else {
                ring.add(on(nearest, from, eye));
            }
            ring.add(on(nearest, to, eye));
            last = nearest;
        }
        return Optional.of(PlaneArea.ofRings(List.of(ring)));
    }

    /** The edges within reach whose outside the eye sees, relative to the eye. */
    private List<double[]> facing(PlanePoint eye, double reachMetres) {
        List<double[]> facing = new ArrayList<>();
        for (double[] edge : edges) {
            double[] e = {
                edge[0] - eye.eastMetres(),
                edge[1] - eye.northMetres(),
                edge[2] - eye.eastMetres(),
                edge[3] - eye.northMetres()
            };
            if (cross(e[0], e[1], e[2] - e[0], e[3] - e[1]) < 0 && squareOfDistance(e) <= reachMetres * reachMetres) {
                facing.add(e);
            }
        }
        return facing;
    }

    /** Directions in which the nearest edge may change, in order, none twice; corners of the square among them. */
    private List<double[]> directions(PlanePoint eye, List<double[]> facing, double half) {
        List<double[]> all = new ArrayList<>();
        for (double[] e : facing) {
            all.add(new double[] {e[0], e[1]});
            all.add(new double[] {e[2], e[3]});
        }
        for (double[] c : crossings) {
            all.add(new double[] {c[0] - eye.eastMetres(), c[1] - eye.northMetres()});
        }
        for (double[] c : new double[][] {{-half, -half}, {half, -half}, {half, half}, {-half, half}}) {
            all.add(c);
        }
        List<double[]> byAngle = new ArrayList<>();
        for (double[] d : all) {
            if (d[0] != 0 || d[1] != 0) {
                byAngle.add(new double[] {d[0], d[1], StrictMath.atan2(d[1], d[0])});
            }
        }
        byAngle.sort(Comparator.comparingDouble(d -> d[2]));
        List<double[]> distinct = new ArrayList<>();
        for (double[] d : byAngle) {
            if (distinct.isEmpty() || distinct.get(distinct.size() - 1)[2] != d[2]) {
                distinct.add(d);
            }
        }
        return distinct;
    }

    private static void addSquare(List<double[]> facing, double half) {
        facing.add(new double[] {-half, -half, half, -half});
        facing.add(new double[] {half, -half, half, half});
        facing.add(new double[] {half, half, -half, half});
        facing.add(new double[] {-half, half, -half, -half});
    }

    /** Between two directions that are less than half a turn apart. */
    private static double[] middle(double[] from, double[] to) {
        double perFrom = 1 / Math.sqrt(from[0] * from[0] + from[1] * from[1]);
        double perTo = 1 / Math.sqrt(to[0] * to[0] + to[1] * to[1]);
        return new double[] {from[0] * perFrom + to[0] * perTo, from[1] * perFrom + to[1] * perTo};
    }

    /** The edge that a ray from the eye meets first; there is one, since the square is all around. */
    private static double[] nearest(List<double[]> edges, double[] ray) {
        double[] nearest = null;
        double least = Double.POSITIVE_INFINITY;
        for (double[] e : edges) {
            double alongEast = e[2] - e[0];
            double alongNorth = e[3] - e[1];
            boolean crossed = cross(ray[0], ray[1], e[0], e[1]) <= 0 != cross(ray[0], ray[1], e[2], e[3]) <= 0;
            double way = crossed
                    ? cross(e[0], e[1], alongEast, alongNorth) / cross(ray[0], ray[1], alongEast, alongNorth)
                    : 0;
            if (way > 0 && way < least) {
                least = way;
                nearest = e;
            }
        }
        return nearest;
    }

    /** Where a direction meets an edge's line, in the plane; an end of the edge exactly, and never beyond its ends. */
    private static PlanePoint on(double[] e, double[] direction, PlanePoint eye) {
        double alongEast = e[2] - e[0];
        double alongNorth = e[3] - e[1];
        double share = -cross(direction[0], direction[1], e[0], e[1])
                / cross(direction[0], direction[1], alongEast, alongNorth);
        double clipped = share > 0 ? Math.min(1, share) : 0;
        return new PlanePoint(
                eye.eastMetres() + e[0] + clipped * alongEast, eye.northMetres() + e[1] + clipped * alongNorth);
    }

    private static double squareOfDistance(double[] e) {
        double alongEast = e[2] - e[0];
        double alongNorth = e[3] - e[1];
        double square = alongEast * alongEast + alongNorth * alongNorth;
        double share = square > 0 ? -(e[0] * alongEast + e[1] * alongNorth) / square : 0;
        share = Math.min(1, Math.max(0, share));
        double east = e[0] + share * alongEast;
        double north = e[1] + share * alongNorth;
        return east * east + north * north;
    }

    private static double[] edge(PlanePoint a, PlanePoint b) {
        return new double[] {a.eastMetres(), a.northMetres(), b.eastMetres(), b.northMetres()};
    }

    private static double cross(double aEast, double aNorth, double bEast, double bNorth) {
        return aEast * bNorth - aNorth * bEast;
    }
}
