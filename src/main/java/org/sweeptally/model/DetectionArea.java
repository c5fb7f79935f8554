package org.sweeptally.model;

import org.sweeptally.geo.PlaneArea;

/**
 * An area in which a sensor detects otherwise than elsewhere.
 *
 * @param value    a probability of detection that stands in place of the one by range, or what that is multiplied by
 * @param isFactor whether it is the latter
 */
public record DetectionArea(PlaneArea area, double value, boolean isFactor) {

    /** Probability of detection in the area, from the one by range. */
    double probability(double byRange) {
        return isFactor ? value * byRange : value;
    }
}
