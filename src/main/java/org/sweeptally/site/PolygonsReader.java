package org.sweeptally.site;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.sweeptally.geo.GeoPolygon;

/**
 * Reads any number of polygons: a list of them written out, or a GeoJSON file (RFC 7946) with polygons in any form, as
 * charts are exported.
 */
final class PolygonsReader {

    /** Each is looked at by objects near its edges, so that all of a whole coast in one polygon costs time. */
    static final int MOST_CORNERS = 5000;

    /** What is longer than this cannot be all on the side of the earth that a region's plane faces. */
    static final double LARGEST_ACROSS_METRES = 1_000_000;

    private final SiteFiles files;
    private final Faults faults;
    private final PolygonReader polygons;

    PolygonsReader(SiteFiles files, Faults faults) {
        this.files = files;
        this.faults = faults;
        this.polygons = new PolygonReader(faults);
    }

    /** All that are whole; what is wrong with others leaves faults. */
    List<GeoPolygon> read(Node node) {
        List<GeoPolygon> all = new ArrayList<>();
        if (node instanceof Node.Scalar scalar && scalar.text() != null && !scalar.text().isBlank()) {
            files.geoJson(scalar.text(), node.at()).ifPresent(json -> geoJson(json, all));
        } else if (node instanceof Node.Sequence list && !list.items().isEmpty()) {
            list.items().forEach(item -> polygons.read(item).ifPresent(all::add));
        } else {
            faults.add(
                    node.at(),
                    node.shown(),
                    "must be the name of a GeoJSON file, or a list of polygons, each a list of rings");
        }
        check(node, all);
        return all;
    }

    private void geoJson(Node node, List<GeoPolygon> all) {
        Node coordinates = RegionsReader.entry(node, "coordinates");
        if (RegionsReader.isOfType(node, "FeatureCollection")
                && RegionsReader.entry(node, "features") instanceof Node.Sequence features) {
            features.items().forEach(feature -> geoJson(feature, all));
        } else if (RegionsReader.isOfType(node, "Feature") && RegionsReader.entry(node, "geometry") != null) {
            geoJson(RegionsReader.entry(node, "geometry"), all);
        } else if (RegionsReader.isOfType(node, "Polygon") && coordinates != null) {
            polygons.read(coordinates).ifPresent(all::add);
        } else if (RegionsReader.isOfType(node, "MultiPolygon") && coordinates instanceof Node.Sequence list) {
            list.items().forEach(item -> polygons.read(item).ifPresent(all::add));
        } else {
            faults.add(node.at(), "", "must be a GeoJSON Polygon or MultiPolygon, a Feature with one, or a"
                    + " FeatureCollection of these");
        }
    }

    private void check(Node node, List<GeoPolygon> all) {
        int corners = 0;
        for (GeoPolygon polygon : all) {
            corners += polygon.outer().size();
            for (var hole : polygon.holes()) {
                corners += hole.size();
            }
            double across = PolygonShape.acrossMetres(polygon);
            if (across > LARGEST_ACROSS_METRES) {
                faults.add(node.at(), "", "a polygon is " + Math.round(across / 1000) + " km across, must be at most "
                        + Math.round(LARGEST_ACROSS_METRES / 1000) + " km");
            }
        }
        if (corners > MOST_CORNERS) {
            faults.add(node.at(), "", "the polygons have " + corners + " corners together, must be at most "
                    + MOST_CORNERS + ": simplify them");
        }
    }
}
