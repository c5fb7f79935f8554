package org.sweeptally.model;

import java.util.List;
import java.util.Optional;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.geo.PlanePoint;

/**
 * What a sensor can see from where it is, in a region's plane: a ring, of it the sectors, and of these what no obstacle
 * hides and no shadow covers. In it there may be areas with a probability of detection of their own; the first in the
 * list that holds a place decides for it.
 */
public final class FieldOfView {

    /** A raster over the disc of the reach, by which the seen part of it is measured: rings of equal area. */
    private static final int RINGS = 32;

    private static final int SPOKES = 180;

    /** Side of an edge on which a neighbourhood lies: all of it seen, none of it, or some. */
    static final int SEEN = 1;

    static final int UNSEEN = -1;
    static final int MIXED = 0;

    private final PlanePoint position;
    private final double leastRangeMetres;
    private final double reachMetres;
    private final List<Sector> sectors;
    private final List<PlaneArea> shadows;
    private final Optional<PlaneArea> open;
    private final List<DetectionArea> areas;
    private double seenSquareMetres = Double.NaN;

    /**
     * @param position         of the sensor; not a number where it is beyond the plane's horizon, and then it sees
     *                         nothing
     * @param leastRangeMetres nearer than this it sees nothing
     * @param reachMetres      nor farther
     * @param sectors          that it looks into, in the plane; none for all around
     * @param shadows          in which it sees nothing
     * @param open             what obstacles leave visible, empty for all
     * @param areas            with a probability of detection of their own
     */
    public FieldOfView(
            PlanePoint position,
            double leastRangeMetres,
            double reachMetres,
            List<Sector> sectors,
            List<PlaneArea> shadows,
            Optional<PlaneArea> open,
            List<DetectionArea> areas) {
        this.position = position;
        this.leastRangeMetres = leastRangeMetres;
        this.reachMetres = reachMetres;
        this.sectors = List.copyOf(sectors);
        this.shadows = List.copyOf(shadows);
        this.open = open;
        this.areas = List.copyOf(areas);
    }

    /** All around up to a reach, with nothing in the way. */
    public static FieldOfView disc(PlanePoint position, double reachMetres) {
        return new FieldOfView(position, 0, reachMetres, List.of(), List.of(), Optional.empty(), List.of());
    }

    public PlanePoint position() {
        return position;
    }

    /** Whether another field of view is the same in every place. */
    boolean isSameAs(FieldOfView other) {
        return this == other
                || position.equals(other.position)
                        && leastRangeMetres == other.leastRangeMetres
                        && reachMetres == other.reachMetres
                        && sectors.equals(other.sectors)
                        && shadows.equals(other.shadows)
                        && open.equals(other.open)
                        && areas.equals(other.areas);
    }

    double rangeMetres(double east, double north) {
        double offsetEast = east - position.eastMetres();
        double offsetNorth = north - position.northMetres();
        return Math.sqrt(offsetEast * offsetEast + offsetNorth * offsetNorth);
    }

    /** Whether a place is in the ring and the sectors, be it hidden or not. */
    public boolean looksAt(double east, double north) {
        double range = rangeMetres(east, north);
        return range >= leastRangeMetres && range <= reachMetres && isInSectors(east, north);
    }

    /** Whether the sensor sees a place. */
    public boolean sees(double east, double north) {
        if (!looksAt(east, north) || open.isPresent() && !open.get().contains(east, north)) {
            return false;
        }
        for (PlaneArea shadow : shadows) {
            if (shadow.contains(east, north)) {
                return false;
            }
        }
        return true;
    }

    private boolean isInSectors(double east, double north) {
        if (sectors.isEmpty()) {
            return true;
        }
        for (Sector sector : sectors) {
            if (sector.contains(east - position.eastMetres(), north - position.northMetres())) {
                return true;
            }
        }
        return false;
    }

    /** Whether all places within a distance of one are seen, none is, or perhaps some are. */
    int side(double east, double north, double metres) {
        double range = rangeMetres(east, north);
        if (!(range - metres <= reachMetres) || range + metres < leastRangeMetres) {
            return UNSEEN;
        }
        boolean mixed = range + metres > reachMetres || range - metres < leastRangeMetres && leastRangeMetres > 0;
        if (!sectors.isEmpty()) {
            double inside = insideSectors(east - position.eastMetres(), north - position.northMetres());
            if (inside < -metres) {
                return UNSEEN;
            }
            mixed |= inside < metres;
        }
        if (open.isPresent() && !open.get().isAtLeast(metres, east, north)) {
            if (!open.get().isAtLeast(-metres, east, north)) {
                return UNSEEN;
            }
            mixed = true;
        }
        for (PlaneArea shadow : shadows) {
            if (shadow.isAtLeast(-metres, east, north)) {
                if (shadow.isAtLeast(metres, east, north)) {
                    return UNSEEN;
                }
                mixed = true;
            }
        }
        return mixed ? MIXED : SEEN;
    }

    private double insideSectors(double offsetEast, double offsetNorth) {
        double greatest = Double.NEGATIVE_INFINITY;
        for (Sector sector : sectors) {
            greatest = Math.max(greatest, sector.signedDistanceMetres(offsetEast, offsetNorth));
        }
        return greatest;
    }

    /** Probability of detection at a place that is seen. */
    double probability(DetectionProfile profile, double east, double north) {
        for (DetectionArea area : areas) {
            if (area.area().contains(east, north)) {
                return area.probability(profile.at(rangeMetres(east, north)));
            }
        }
        return profile.at(rangeMetres(east, north));
    }

    /**
     * The same for all places within a distance of one, which are all seen; NaN where they differ by more than allowed.
     */
    double probabilityWithin(DetectionProfile profile, double east, double north, double metres, double allowed) {
        for (DetectionArea area : areas) {
            if (area.area().isAtLeast(metres, east, north)) {
                return area.isFactor()
                        ? area.probability(byRangeWithin(profile, east, north, metres, allowed))
                        : area.value();
            }
            if (area.area().isAtLeast(-metres, east, north)) {
                return Double.NaN;
            }
        }
        return byRangeWithin(profile, east, north, metres, allowed);
    }

    private double byRangeWithin(
            DetectionProfile profile, double east, double north, double metres, double allowed) {
        double range = rangeMetres(east, north);
        return profile.spread(range - metres, range + metres) <= allowed ? profile.at(range) : Double.NaN;
    }

    /**
     * Square metres that the sensor sees, wherever the region may be: exact for ring and sectors; of what lies in
     * shadow or behind obstacles the share of {@link #RINGS} times {@link #SPOKES} points, spread evenly.
     */
    double seenSquareMetres() {
        if (Double.isNaN(seenSquareMetres)) {
            seenSquareMetres = lookedAtSquareMetres() * (isHiddenSomewhere() ? seenShare() : 1);
        }
        return seenSquareMetres;
    }

    private double lookedAtSquareMetres() {
        double area = StrictMath.PI * reachMetres * reachMetres;
        if (leastRangeMetres > 0) {
            area -= StrictMath.PI * leastRangeMetres * leastRangeMetres;
        }
        if (!sectors.isEmpty()) {
            double width = 0;
            for (Sector sector : sectors) {
                width += sector.widthRadians();
            }
            area *= width / (2 * StrictMath.PI);
        }
        return area;
    }

    private boolean isHiddenSomewhere() {
        boolean hidden = open.isPresent();
        for (PlaneArea shadow : shadows) {
            hidden |= shadow.isAtLeast(-reachMetres, position.eastMetres(), position.northMetres());
        }
        return hidden;
    }

    /**
     * Of what the sensor looks at; at least one point's, so that a sensor that is wrongly said to see nothing has
     * clutter.
     */
    private double seenShare() {
        int looked = 0;
        int seen = 0;
        double least = leastRangeMetres * leastRangeMetres;
        for (int ring = 0; ring < RINGS; ring++) {
            double range = Math.sqrt(least + (reachMetres * reachMetres - least) * (ring + 0.5) / RINGS);
            for (int spoke = 0; spoke < SPOKES; spoke++) {
                double azimuth = 2 * StrictMath.PI * (spoke + 0.5) / SPOKES;
                double east = position.eastMetres() + range * StrictMath.sin(azimuth);
                double north = position.northMetres() + range * StrictMath.cos(azimuth);
                if (isInSectors(east, north)) {
                    looked++;
                    seen += sees(east, north) ? 1 : 0;
                }
            }
        }
        return Math.max(seen, 1) / (double) Math.max(looked, 1);
    }
}
