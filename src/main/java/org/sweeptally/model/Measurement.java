package org.sweeptally.model;

/**
 * What a sensor measured of one object, as a region's plane sees it. Whatever was measured, it has a place: the filter
 * gates, rasters and begins objects there; the update itself is that of {@link MeasurementUpdate}.
 */
public sealed interface Measurement permits PositionMeasurement, PolarMeasurement {

    /** Measured place, metres. */
    double east();

    double north();

    /** Covariance of the place, square metres. */
    double varEast();

    double covEastNorth();

    double varNorth();

    /** How long before the time of the state the object was seen there, seconds. */
    double lagSeconds();
}
