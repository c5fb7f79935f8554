package org.sweeptally.site;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.site.SightSettings.AreaSettings;
import org.sweeptally.site.SightSettings.SectorSettings;

/** Reads what a sensor can see within its reach, from among the sensor's keys. */
final class SightReader {

    private static final Allowed RANGE = Allowed.from(0, 1_000_000);
    private static final Allowed AZIMUTH = Allowed.from(-360, 360);
    private static final Allowed FACTOR = Allowed.moreThanZero(1);

    private final SiteFiles files;
    private final Faults faults;
    private final PolygonsReader polygons;

    SightReader(SiteFiles files, Faults faults) {
        this.files = files;
        this.faults = faults;
        this.polygons = new PolygonsReader(files, faults);
    }

    SightSettings read(Fields fields, double reachMetres) {
        double least = fields.number("leastRangeMetres", RANGE, 0);
        if (least >= reachMetres) {
            faults.add(
                    fields.at("leastRangeMetres"),
                    Numbers.shortest(least),
                    "must be less than reachMetres, " + Numbers.shortest(reachMetres));
        }
        List<SectorSettings> sectors = fields.optional("sectors").map(this::sectors).orElse(List.of());
        boolean fromHeading = fields.flag("sectorsFromHeading", false);
        if (fromHeading && (fields.has("position") || !fields.has("sectors"))) {
            faults.add(
                    fields.at("sectorsFromHeading"),
                    "true",
                    "must be absent or false for a sensor with a position, which has no heading, or without sectors");
        }
        return new SightSettings(
                least,
                sectors,
                fromHeading,
                fields.optional("shadows").map(polygons::read).orElse(List.of()),
                fields.optional("obstacles").map(polygons::read).orElse(List.of()),
                fields.optional("areas").map(this::areas).orElse(List.of()));
    }

    private List<SectorSettings> sectors(Node node) {
        if (!(node instanceof Node.Sequence list) || list.items().isEmpty()) {
            faults.add(node.at(), node.shown(), "must be a list of {fromAzimuthDegrees, toAzimuthDegrees}");
            return List.of();
        }
        List<SectorSettings> sectors = new ArrayList<>();
        for (Node item : list.items()) {
            sector(item, sectors);
        }
        return sectors;
    }

    private void sector(Node item, List<SectorSettings> before) {
        Fields fields = Fields.of(item, "fromAzimuthDegrees and toAzimuthDegrees", faults);
        SectorSettings sector = new SectorSettings(
                fields.number("fromAzimuthDegrees", AZIMUTH), fields.number("toAzimuthDegrees", AZIMUTH));
        fields.end();
        if (Double.isNaN(sector.fromAzimuthDegrees() + sector.toAzimuthDegrees())) {
            return;
        }
        if (sector.widthDegrees() == 0) {
            faults.add(
                    fields.at("toAzimuthDegrees"),
                    Numbers.shortest(sector.toAzimuthDegrees()),
                    "must point elsewhere than fromAzimuthDegrees: a sensor that sees all around has no sectors");
            return;
        }
        for (int i = 0; i < before.size(); i++) {
            if (before.get(i).overlaps(sector)) {
                faults.add(item.at(), "", "overlaps the sector [" + i + "], must not");
            }
        }
        before.add(sector);
    }

    private List<AreaSettings> areas(Node node) {
        if (!(node instanceof Node.Sequence list) || list.items().isEmpty()) {
            faults.add(node.at(), node.shown(), "must be a list of {polygon, factor} or {polygon, probability}");
            return List.of();
        }
        List<AreaSettings> areas = new ArrayList<>();
        for (Node item : list.items()) {
            Fields fields = Fields.of(item, "polygon, and factor or probability", faults);
            Optional<GeoPolygon> polygon = fields.required(
                            "polygon", "a list of rings, or a GeoJSON file with one polygon")
                    .flatMap(shape -> RegionsReader.onePolygon(shape, files, faults));
            boolean isFactor = fields.has("factor");
            if (isFactor && fields.has("probability")) {
                faults.add(fields.at("factor"), "", "must be absent where probability is given");
            }
            fields.optional("factor");
            double value =
                    isFactor ? fields.number("factor", FACTOR) : fields.number("probability", Allowed.PROBABILITY);
            fields.optional("probability");
            fields.end();
            polygon.ifPresent(shape -> areas.add(new AreaSettings(shape, value, isFactor)));
        }
        return areas;
    }
}
