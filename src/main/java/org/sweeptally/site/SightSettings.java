package org.sweeptally.site;

import java.util.List;
import org.sweeptally.geo.GeoPolygon;

/**
 * What a sensor can see within its reach.
 *
 * @param leastRangeMetres   nearer than this it sees nothing
 * @param sectors            that it looks into; none for all around
 * @param sectorsFromHeading whether their azimuths count from where the platform points, where a part says so, rather
 *                           than from true north
 * @param shadows            in which it sees nothing, wherever it is
 * @param obstacles          that hide what lies behind them, seen from where it is, and themselves
 * @param areas              in which its probability of detection is another; the first that holds a place decides
 */
public record SightSettings(
        double leastRangeMetres,
        List<SectorSettings> sectors,
        boolean sectorsFromHeading,
        List<GeoPolygon> shadows,
        List<GeoPolygon> obstacles,
        List<AreaSettings> areas) {

    /** Everything within reach. */
    public static final SightSettings ALL =
            new SightSettings(0, List.of(), false, List.of(), List.of(), List.of());

    public SightSettings {
        sectors = List.copyOf(sectors);
        shadows = List.copyOf(shadows);
        obstacles = List.copyOf(obstacles);
        areas = List.copyOf(areas);
    }

    /** All azimuths clockwise from one to another, degrees. */
    public record SectorSettings(double fromAzimuthDegrees, double toAzimuthDegrees) {

        /** Degrees, more than 0, less than 360. */
        double widthDegrees() {
            double width = toAzimuthDegrees - fromAzimuthDegrees;
            return width - 360 * Math.floor(width / 360);
        }

        /** Whether another sector begins inside this one, or this one inside the other. */
        boolean overlaps(SectorSettings other) {
            return holdsBeginningOf(other) || other.holdsBeginningOf(this);
        }

        private boolean holdsBeginningOf(SectorSettings other) {
            double into = other.fromAzimuthDegrees - fromAzimuthDegrees;
            return into - 360 * Math.floor(into / 360) < widthDegrees();
        }
    }

    /**
     * An area and the probability of detection in it.
     *
     * @param value    the probability in place of the one by range, or what that is multiplied by
     * @param isFactor whether it is the latter
     */
    public record AreaSettings(GeoPolygon polygon, double value, boolean isFactor) {}
}
