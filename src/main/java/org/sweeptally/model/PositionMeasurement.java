package org.sweeptally.model;

/**
 * A measured place in the region's plane.
 *
 * @param east         metres
 * @param north        metres
 * @param varEast      square metres
 * @param covEastNorth square metres
 * @param varNorth     square metres
 * @param lagSeconds   how long before the time of the state the object was seen there: the measurement observes
 *                     position - lag * velocity
 */
public record PositionMeasurement(
        double east, double north, double varEast, double covEastNorth, double varNorth, double lagSeconds)
        implements Measurement {

    /** With an error of no direction, seen at the time of the state. */
    public static PositionMeasurement at(double east, double north, double sigmaMetres) {
        double variance = sigmaMetres * sigmaMetres;
        return new PositionMeasurement(east, north, variance, 0, variance, 0);
    }

    /** Whether the other is as exact and as old, so that both share one gain. */
    boolean sharesGainWith(PositionMeasurement other) {
        return varEast == other.varEast
                && covEastNorth == other.covEastNorth
                && varNorth == other.varNorth
                && lagSeconds == other.lagSeconds;
    }
}
