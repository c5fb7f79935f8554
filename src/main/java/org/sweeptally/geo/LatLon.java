package org.sweeptally.geo;

/** A place on the WGS84 ellipsoid, in degrees north and degrees east. */
public record LatLon(double latitude, double longitude) {}
