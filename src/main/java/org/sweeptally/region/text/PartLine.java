package org.sweeptally.region.text;

import com.fasterxml.jackson.core.JsonParser;
import com.fasterxml.jackson.core.JsonToken;
import java.io.IOException;
import java.util.ArrayList;
import java.util.List;
import org.sweeptally.event.Coverage;
import org.sweeptally.event.Detection;
import org.sweeptally.event.GeoPoint;
import org.sweeptally.event.Part;
import org.sweeptally.event.SensorPromise;
import org.sweeptally.region.intake.Faults;
import org.sweeptally.region.intake.PartReading;

/**
 * One part being read from the tokens of a line. The detections are read one by one, so that a line with too many
 * never stands in memory as objects.
 */
final class PartLine {

    private static final List<String> KNOWN = List.of(
            "sensor", "scanTime", "scan", "part", "closesScan", "promises", "coverage", "sensorPosition",
            "sensorHeadingDegrees", "sensorEastMetresPerSecond", "sensorNorthMetresPerSecond", "detections");

    private static final List<String> PROMISES = List.of("nothingBefore", "nothingEver");

    private static final List<String> COVERAGE =
            List.of("fromMetres", "toMetres", "fromAzimuthDegrees", "toAzimuthDegrees", "area");

    private static final List<String> PLACE = List.of("latitude", "longitude", "heightMetres");

    private final Faults faults = new Faults();
    private final JsonTree.Fields own = new JsonTree.Fields();
    private final List<Detection> detections = new ArrayList<>();
    private final int mostDetections;
    private int sent;

    PartLine(int mostDetections) {
        this.mostDetections = mostDetections;
    }

    /** What could not be read. */
    Faults faults() {
        return faults;
    }

    /** How many detections were sent. */
    int detectionsSent() {
        return sent;
    }

    /**
     * Takes the tokens of an object in; the parser stands at its beginning. What was taken in before a failure stays.
     * Of names beyond a bound none is kept: so many cannot all be known, and the part is at fault already.
     */
    void take(JsonParser parser) throws IOException {
        for (String name = parser.nextFieldName(); name != null; name = parser.nextFieldName()) {
            JsonToken first = parser.nextToken();
            if (name.equals("detections") && first == JsonToken.START_ARRAY && !own.values().containsKey(name)) {
                own.put(name, new JsonTree.Items(List.of()));
                takeDetections(parser);
            } else if (own.values().size() + own.repeated().size() < JsonTree.MOST_VALUES) {
                own.put(name, value(name, parser));
            } else {
                parser.skipChildren();
            }
        }
    }

    /** Of a name that nobody knows the name is enough. */
    private static Object value(String name, JsonParser parser) throws IOException {
        if (KNOWN.contains(name)) {
            return JsonTree.read(parser);
        }
        parser.skipChildren();
        return null;
    }

    private void takeDetections(JsonParser parser) throws IOException {
        for (; parser.nextToken() != JsonToken.END_ARRAY; sent++) {
            if (sent < mostDetections) {
                DetectionLine.read(JsonTree.read(parser), sent, faults).ifPresent(detections::add);
            } else {
                parser.skipChildren();
            }
        }
    }

    /** The part of what was taken in; see {@link PartReading} for what stands for what could not be read. */
    Part part() {
        LineFields fields = new LineFields(own, "", KNOWN, faults.badFieldsOfPart());
        fields.items("detections", "objects");
        if (!fields.has("sensor")) {
            fields.missing("sensor", "the name of a sensor of the site file is expected");
        }
        if (!fields.has("scanTime")) {
            fields.missing("scanTime", "the time at which the look began is expected");
        }
        Part part = new Part();
        part.setSensor(fields.text("sensor"));
        Long scanTime = fields.time("scanTime");
        part.setScanTimeMicros(scanTime == null ? PartReading.UNREAD_MICROS : scanTime);
        part.setScan(fields.whole("scan", 0, Long.MAX_VALUE));
        part.setPart(partNumber(fields));
        part.setClosesScan(Boolean.TRUE.equals(fields.flag("closesScan")));
        part.setPromise(promise(fields.object("promises", "nothingBefore or nothingEver")));
        part.setCoverage(coverage(fields.object("coverage", "limits")));
        part.setSensorPosition(place(fields.object("sensorPosition", "latitude and longitude"), "sensorPosition."));
        part.setSensorHeadingDegrees(fields.number("sensorHeadingDegrees"));
        part.setSensorEastMetresPerSecond(fields.number("sensorEastMetresPerSecond"));
        part.setSensorNorthMetresPerSecond(fields.number("sensorNorthMetresPerSecond"));
        part.setDetections(detections);
        return part;
    }

    private static int partNumber(LineFields fields) {
        if (!fields.has("part")) {
            return 0;
        }
        Long number = fields.whole("part", 0, Integer.MAX_VALUE);
        return number == null ? PartReading.UNREAD_PART : number.intValue();
    }

    private SensorPromise promise(JsonTree.Fields own) {
        if (own == null) {
            return null;
        }
        LineFields fields = new LineFields(own, "promises.", PROMISES, faults.badFieldsOfPart());
        Long before = fields.time("nothingBefore");
        Boolean ever = fields.flag("nothingEver");
        if (fields.has("nothingBefore") == Boolean.TRUE.equals(ever)) {
            faults.badFieldsOfPart().add("promises", () -> "promises gives "
                    + (fields.has("nothingBefore") ? "both nothingBefore and nothingEver" : "nothing")
                    + ": either a nothingBefore with a time, or a nothingEver that is true, is expected");
            return null;
        }
        return before == null && !Boolean.TRUE.equals(ever) ? null : new SensorPromise(before);
    }

    private Coverage coverage(JsonTree.Fields own) {
        if (own == null) {
            return null;
        }
        LineFields fields = new LineFields(own, "coverage.", COVERAGE, faults.badFieldsOfPart());
        JsonTree.Items corners = fields.items("area", "corners");
        List<GeoPoint> area = null;
        if (corners != null) {
            area = new ArrayList<>();
            for (Object corner : corners.values()) {
                GeoPoint point = corner(corner, "coverage.area[" + area.size() + "]");
                if (point == null) {
                    return null;
                }
                area.add(point);
            }
        }
        return new Coverage(fields.number("fromMetres"), fields.number("toMetres"),
                fields.number("fromAzimuthDegrees"), fields.number("toAzimuthDegrees"), area);
    }

    private GeoPoint corner(Object value, String name) {
        if (value instanceof JsonTree.Fields fields) {
            return place(fields, name + ".");
        }
        faults.badFieldsOfPart().add(name, () -> name + " is " + LineFields.shown(value)
                + ": an object with latitude and longitude is expected");
        return null;
    }

    private GeoPoint place(JsonTree.Fields own, String prefix) {
        if (own == null) {
            return null;
        }
        LineFields fields = new LineFields(own, prefix, PLACE, faults.badFieldsOfPart());
        for (String name : List.of("latitude", "longitude")) {
            if (!fields.has(name)) {
                fields.missing(name, "a place has a latitude and a longitude");
            }
        }
        Double latitude = fields.number("latitude");
        Double longitude = fields.number("longitude");
        Double height = fields.number("heightMetres");
        return latitude == null || longitude == null ? null : new GeoPoint(latitude, longitude, height);
    }
}
