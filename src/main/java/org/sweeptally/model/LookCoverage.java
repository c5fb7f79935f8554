package org.sweeptally.model;

import java.util.Optional;
import org.sweeptally.geo.PlaneArea;

/**
 * Where one look looked, within the sensor's reach: a ring, a sector, a polygon, or what they have in common.
 *
 * @param fromMetres         least distance from the sensor, 0 for none
 * @param toMetres           greatest distance from the sensor, infinite for none
 * @param fromAzimuthRadians start of the sector, clockwise from the plane's north
 * @param widthRadians       width of the sector, clockwise from its start; 2 pi for all around
 * @param area               polygon in the region's plane, if any
 */
public record LookCoverage(
        double fromMetres, double toMetres, double fromAzimuthRadians, double widthRadians, Optional<PlaneArea> area) {

    /** Of a look that looked at nothing here. */
    public static final LookCoverage NOTHING =
            new LookCoverage(Double.POSITIVE_INFINITY, Double.POSITIVE_INFINITY, 0, 2 * StrictMath.PI, Optional.empty());

    /** Whether it is limited to a sector. */
    boolean hasSector() {
        return widthRadians < 2 * StrictMath.PI;
    }
}
