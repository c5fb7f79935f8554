package org.sweeptally.site;

import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;
import java.util.TreeMap;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.site.Node.Position;

/** Reads regions, from a GeoJSON file (RFC 7946) that the site file names, or written out in it. */
final class RegionsReader {

    static final Allowed APRON = Allowed.from(0, 100_000);
    static final Allowed CELL = Allowed.from(1, 100_000);

    private final Faults faults;
    private final SiteFiles files;
    private final PolygonReader polygons;
    private final Map<String, RegionDraft> regions = new TreeMap<>();

    private RegionsReader(SiteFiles files, Faults faults) {
        this.files = files;
        this.faults = faults;
        this.polygons = new PolygonReader(faults);
    }

    /** The regions that are whole, by name. */
    static List<RegionDraft> read(Node node, SiteFiles files, Faults faults) {
        RegionsReader reader = new RegionsReader(files, faults);
        if (node instanceof Node.Scalar scalar && scalar.text() != null && !scalar.text().isBlank()) {
            files.geoJson(scalar.text(), node.at()).ifPresent(reader::collection);
        } else if (node instanceof Node.Mapping mapping && !mapping.entries().isEmpty()) {
            mapping.entries().forEach(reader::inline);
        } else {
            faults.add(
                    node.at(),
                    node.shown(),
                    "must be the name of a GeoJSON file, or a mapping of regions' names to polygons");
        }
        return List.copyOf(reader.regions.values());
    }

    /** One polygon: rings written out, or a GeoJSON file with it alone. */
    static Optional<GeoPolygon> onePolygon(Node node, SiteFiles files, Faults faults) {
        RegionsReader reader = new RegionsReader(files, faults);
        if (node instanceof Node.Scalar scalar && scalar.text() != null && !scalar.text().isBlank()) {
            return files.geoJson(scalar.text(), node.at()).flatMap(reader::onlyPolygon);
        }
        return reader.polygons.read(node);
    }

    private void inline(String name, Node node) {
        Fields fields = Fields.of(node, "polygon, apronMetres, cellMetres", faults);
        boolean named = Names.check(name, node.at(), faults);
        Optional<GeoPolygon> core = fields.required("polygon", "a list of rings, each a list of [longitude, latitude]")
                .flatMap(polygons::read);
        OptionalDouble apron = fields.optionalNumber("apronMetres", APRON);
        OptionalDouble cell = fields.optionalNumber("cellMetres", CELL);
        fields.end();
        if (named && core.isPresent()) {
            regions.put(name, new RegionDraft(name, fields.at("polygon"), core.get(), apron, cell));
        }
    }

    private void collection(Node node) {
        if (!isOfType(node, "FeatureCollection") || !(entry(node, "features") instanceof Node.Sequence features)) {
            faults.add(node.at(), "", "must be a GeoJSON FeatureCollection with a list of features");
            return;
        }
        if (features.items().isEmpty()) {
            faults.add(features.at(), "", "must have at least one feature, a region");
        }
        features.items().forEach(this::feature);
    }

    private void feature(Node node) {
        if (!isOfType(node, "Feature")) {
            faults.add(node.at(), node.shown(), "must be a GeoJSON Feature");
            return;
        }
        String name = name(node);
        Optional<GeoPolygon> core = geometry(node);
        if (name.isEmpty() || core.isEmpty()) {
            return;
        }
        RegionDraft draft =
                new RegionDraft(name, node.at(), core.get(), OptionalDouble.empty(), OptionalDouble.empty());
        RegionDraft first = regions.putIfAbsent(name, draft);
        if (first != null) {
            faults.add(
                    node.at(),
                    "'" + name + "'",
                    "must differ from the name of the region on line " + first.at().line());
        }
    }

    private String name(Node feature) {
        Node name = entry(entry(feature, "properties"), "name");
        if (name instanceof Node.Scalar scalar && scalar.text() != null) {
            return Names.check(scalar.text(), name.at(), faults) ? scalar.text() : "";
        }
        Position at = feature.at().key("properties.name", feature.at().line());
        faults.add(name == null ? at : name.at(), name == null ? "missing" : name.shown(), "must be the region's name");
        return "";
    }

    private Optional<GeoPolygon> geometry(Node feature) {
        Node geometry = entry(feature, "geometry");
        Node coordinates = entry(geometry, "coordinates");
        if (isOfType(geometry, "Polygon") && coordinates != null) {
            return polygons.read(coordinates);
        }
        Position at = feature.at().key("geometry", feature.at().line());
        faults.add(
                geometry == null ? at : geometry.at(),
                "",
                "must be a Polygon with coordinates; one across the antimeridian too, in one piece");
        return Optional.empty();
    }

    private Optional<GeoPolygon> onlyPolygon(Node node) {
        if (isOfType(node, "Polygon") && entry(node, "coordinates") != null) {
            return polygons.read(entry(node, "coordinates"));
        }
        if (isOfType(node, "Feature")) {
            return geometry(node);
        }
        if (isOfType(node, "FeatureCollection")
                && entry(node, "features") instanceof Node.Sequence features
                && features.items().size() == 1) {
            return geometry(features.items().get(0));
        }
        faults.add(node.at(), "", "must be one GeoJSON Polygon, or one Feature with it");
        return Optional.empty();
    }

    static boolean isOfType(Node node, String type) {
        return entry(node, "type") instanceof Node.Scalar scalar && type.equals(scalar.text());
    }

    static Node entry(Node node, String key) {
        return node instanceof Node.Mapping mapping ? mapping.entries().get(key) : null;
    }
}
