package org.sweeptally.site;

import java.util.OptionalDouble;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.site.Node.Position;

/**
 * A region as it was read, before what it leaves open is filled in.
 *
 * @param at where its polygon stands
 */
record RegionDraft(
        String name, Position at, GeoPolygon core, OptionalDouble apronMetres, OptionalDouble unseenCellMetres) {}
