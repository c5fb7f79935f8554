package org.sweeptally.geo;

/** A place in a {@link LocalPlane}, in metres to the east and to the north of the plane's origin. */
public record PlanePoint(double eastMetres, double northMetres) {}
