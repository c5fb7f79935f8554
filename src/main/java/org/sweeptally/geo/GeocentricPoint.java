package org.sweeptally.geo;

/**
 * A point in metres from the earth's centre, turning with the earth: x towards the equator at Greenwich, y towards the
 * equator at 90 degrees east, z towards the north pole.
 */
public record GeocentricPoint(double xMetres, double yMetres, double zMetres) {}
