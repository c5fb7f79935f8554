package org.sweeptally.region.text;

import com.fasterxml.jackson.core.JsonGenerator;
import java.io.IOException;
import java.util.List;
import org.sweeptally.event.Coverage;
import org.sweeptally.event.Detection;
import org.sweeptally.event.GeoPoint;
import org.sweeptally.event.GeodeticFix;
import org.sweeptally.event.Noise;
import org.sweeptally.event.OffsetFix;
import org.sweeptally.event.Part;
import org.sweeptally.event.PolarFix;
import org.sweeptally.event.SensorPromise;
import org.sweeptally.region.intake.Times;

/** Writes parts as the lines that {@link PartJson} reads. Fields that are null are left out. */
final class PartWriter {

    private final JsonGenerator out;

    private PartWriter(JsonGenerator out) {
        this.out = out;
    }

    /**
     * The line of a part, without its end.
     *
     * @throws IllegalArgumentException if a number is not finite, or if detections are missing from the part: a line
     *     has no place for an index, so the others would change theirs
     */
    static String line(Part part) {
        placesAreIndexes(part.getDetections());
        return JsonOut.line(out -> new PartWriter(out).part(part));
    }

    /** The indexes count up from 0, or were all left at 0. */
    private static void placesAreIndexes(List<Detection> detections) {
        boolean left = detections.stream().allMatch(detection -> detection.getIndex() == 0);
        for (int i = 0; i < detections.size() && !left; i++) {
            if (detections.get(i).getIndex() != i) {
                throw new IllegalArgumentException("detection " + i + " has the index " + detections.get(i).getIndex()
                        + ": a part from which detections were taken cannot be written as a line");
            }
        }
    }

    private void part(Part part) throws IOException {
        out.writeStartObject();
        out.writeStringField("sensor", part.getSensor());
        out.writeStringField("scanTime", Times.text(part.getScanTimeMicros()));
        if (part.getScan() != null) {
            out.writeNumberField("scan", part.getScan());
        }
        out.writeNumberField("part", part.getPart());
        out.writeBooleanField("closesScan", part.getClosesScan());
        if (part.getPromise() != null) {
            promise(part.getPromise());
        }
        if (part.getCoverage() != null) {
            coverage(part.getCoverage());
        }
        if (part.getSensorPosition() != null) {
            out.writeFieldName("sensorPosition");
            place(part.getSensorPosition());
        }
        number("sensorHeadingDegrees", part.getSensorHeadingDegrees());
        number("sensorEastMetresPerSecond", part.getSensorEastMetresPerSecond());
        number("sensorNorthMetresPerSecond", part.getSensorNorthMetresPerSecond());
        out.writeArrayFieldStart("detections");
        for (Detection detection : part.getDetections()) {
            detection(detection);
        }
        out.writeEndArray();
        out.writeEndObject();
    }

    private void promise(SensorPromise promise) throws IOException {
        out.writeObjectFieldStart("promises");
        if (promise.getNothingBeforeMicros() == null) {
            out.writeBooleanField("nothingEver", true);
        } else {
            out.writeStringField("nothingBefore", Times.text(promise.getNothingBeforeMicros()));
        }
        out.writeEndObject();
    }

    private void coverage(Coverage coverage) throws IOException {
        out.writeObjectFieldStart("coverage");
        number("fromMetres", coverage.getFromMetres());
        number("toMetres", coverage.getToMetres());
        number("fromAzimuthDegrees", coverage.getFromAzimuthDegrees());
        number("toAzimuthDegrees", coverage.getToAzimuthDegrees());
        if (coverage.getArea() != null) {
            out.writeArrayFieldStart("area");
            for (GeoPoint corner : coverage.getArea()) {
                place(corner);
            }
            out.writeEndArray();
        }
        out.writeEndObject();
    }

    private void place(GeoPoint place) throws IOException {
        out.writeStartObject();
        number("latitude", place.getLatitude());
        number("longitude", place.getLongitude());
        number("heightMetres", place.getHeightMetres());
        out.writeEndObject();
    }

    private void detection(Detection detection) throws IOException {
        out.writeStartObject();
        text("id", detection.getId());
        if (detection.getTimeMicros() != null) {
            out.writeStringField("time", Times.text(detection.getTimeMicros()));
        }
        measurement(detection.getMeasurement());
        if (detection.getNoise() != null) {
            noise(detection.getNoise());
        }
        number("heightMetres", detection.getHeightMetres());
        number("strength", detection.getStrength());
        text("declaredIdentity", detection.getDeclaredIdentity());
        out.writeEndObject();
    }

    private void measurement(Object measurement) throws IOException {
        if (measurement instanceof GeodeticFix fix) {
            number("latitude", fix.getLatitude());
            number("longitude", fix.getLongitude());
        } else if (measurement instanceof OffsetFix fix) {
            number("eastMetres", fix.getEastMetres());
            number("northMetres", fix.getNorthMetres());
        } else if (measurement instanceof PolarFix fix) {
            number("rangeMetres", fix.getRangeMetres());
            number("azimuthDegrees", fix.getAzimuthDegrees());
            number("rangeRateMetresPerSecond", fix.getRangeRateMetresPerSecond());
        } else {
            throw new IllegalArgumentException("a detection without measurement: " + measurement);
        }
    }

    private void noise(Noise noise) throws IOException {
        out.writeObjectFieldStart("noise");
        number("first", noise.getFirst());
        number("cross", noise.getCross());
        number("second", noise.getSecond());
        out.writeEndObject();
    }

    private void number(String name, Double valueOrNull) throws IOException {
        if (valueOrNull != null) {
            out.writeFieldName(name);
            JsonOut.number(out, name, valueOrNull);
        }
    }

    private void text(String name, String valueOrNull) throws IOException {
        if (valueOrNull != null) {
            out.writeStringField(name, valueOrNull);
        }
    }
}
