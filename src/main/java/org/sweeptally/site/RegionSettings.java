package org.sweeptally.site;

import org.sweeptally.geo.GeoPolygon;

/**
 * One surveillance region.
 *
 * @param core        the area that the region answers for
 * @param apronMetres how far around its core it also hears and computes
 * @param unseenCellMetres side of a cell of its grid of unseen objects
 */
public record RegionSettings(String name, GeoPolygon core, double apronMetres, double unseenCellMetres) {}
