package org.sweeptally.region.intake;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.TreeMap;
import org.sweeptally.event.Detection;
import org.sweeptally.event.GeoPoint;
import org.sweeptally.event.Part;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.RejectReason;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/**
 * Judges the values of parts that could be read, whatever they were read from.
 *
 * <p>A fault of a detection costs that detection. A fault of the part itself costs the whole part; as long as its
 * sensor is known and its scan time can be, the part is passed on nevertheless, without detections and without the
 * fields at fault, and marked unusable: it still closes its scan, and the scan, of which something is missing, counts
 * no miss. The same holds for a part of whose detections none could be used.
 */
public final class PartCheck {

    private final Map<String, SensorSettings> sensors = new TreeMap<>();
    private final int mostDetections;

    public PartCheck(Site site) {
        site.sensors().forEach(sensor -> sensors.put(sensor.name(), sensor));
        this.mostDetections = site.bounds().detectionsPerPart();
    }

    /** How many detections a part may have; the reader of a longer one need not keep any. */
    public int mostDetections() {
        return mostDetections;
    }

    /** Whether the site has a sensor of this name. */
    public boolean knows(String sensorOrNull) {
        return sensorOrNull != null && sensors.containsKey(sensorOrNull);
    }

    /** Judges a part. The part of the reading is changed: it becomes the part that is passed on. */
    public Intake judge(PartReading reading, Original original) {
        Part part = reading.part();
        Faults faults = reading.faults();
        SensorSettings sensor = sensor(part, faults);
        boolean timed = scanTime(part, reading.names(), faults);
        fields(part, reading.names(), faults);
        if (sensor != null) {
            position(part, reading.detectionsSent(), sensor, faults);
        }
        amount(reading.detectionsSent(), faults);
        if (sensor != null && timed && reading.detectionsSent() <= mostDetections) {
            DetectionCheck check = new DetectionCheck(sensor, part, reading.names(), faults);
            part.getDetections().forEach(check::check);
        }
        return intake(reading, sensor != null && timed, original);
    }

    private SensorSettings sensor(Part part, Faults faults) {
        if (part.getSensor() == null) {
            return null;
        }
        SensorSettings sensor = sensors.get(part.getSensor());
        if (sensor == null) {
            faults.part(RejectReason.UNKNOWN_SENSOR, "sensor", () -> "sensor is " + Shown.text(part.getSensor())
                    + ": the site's sensors are " + String.join(", ", sensors.keySet()));
        }
        return sensor;
    }

    private static boolean scanTime(Part part, FieldNames names, Faults faults) {
        return FieldCheck.time(faults.badFieldsOfPart(), names.time("scanTime"), part.getScanTimeMicros());
    }

    /** Whatever is at fault and may be absent is taken out of the part. */
    private static void fields(Part part, FieldNames names, Faults faults) {
        FaultSink sink = faults.badFieldsOfPart();
        if (part.getPart() < 0) {
            sink.add("part", () -> "part is " + part.getPart() + ": a number 0 or more is allowed");
        }
        if (part.getScan() != null && part.getScan() < 0) {
            long scan = part.getScan();
            sink.add("scan", () -> "scan is " + scan + ": a number 0 or more is allowed");
            part.setScan(null);
        }
        if (part.getPromise() != null
                && !FieldCheck.time(sink, names.nothingBefore(), part.getPromise().getNothingBeforeMicros())) {
            part.setPromise(null);
        }
        if (part.getCoverage() != null && !CoverageCheck.check(sink, part.getCoverage())) {
            part.setCoverage(null);
        }
        if (!FieldCheck.azimuth(sink, "sensorHeadingDegrees", part.getSensorHeadingDegrees())) {
            part.setSensorHeadingDegrees(null);
        }
        if (!FieldCheck.finite(sink, "sensorEastMetresPerSecond", part.getSensorEastMetresPerSecond())) {
            part.setSensorEastMetresPerSecond(null);
        }
        if (!FieldCheck.finite(sink, "sensorNorthMetresPerSecond", part.getSensorNorthMetresPerSecond())) {
            part.setSensorNorthMetresPerSecond(null);
        }
    }

    /** A part that neither closes a scan nor has detections, such as a mere promise, needs no position. */
    private static void position(Part part, int detectionsSent, SensorSettings sensor, Faults faults) {
        GeoPoint position = part.getSensorPosition();
        if (position == null) {
            if (sensor.position().isEmpty() && (part.getClosesScan() || detectionsSent > 0)) {
                faults.part(RejectReason.NO_SENSOR_POSITION, "sensorPosition",
                        () -> "sensorPosition is missing: sensor "
                        + sensor.name() + " has no fixed position in the site file, so every part says where it is");
            }
            return;
        }
        FaultSink sink = faults.badFieldsOfPart();
        boolean sound = FieldCheck.latitude(sink, "sensorPosition.latitude", position.getLatitude());
        sound &= FieldCheck.longitude(sink, "sensorPosition.longitude", position.getLongitude());
        sound &= FieldCheck.finite(sink, "sensorPosition.heightMetres", position.getHeightMetres());
        if (!sound) {
            part.setSensorPosition(null);
        }
    }

    private void amount(int detectionsSent, Faults faults) {
        if (detectionsSent > mostDetections) {
            faults.part(RejectReason.TOO_LARGE, "detections", () -> "detections has " + detectionsSent
                    + " entries: at most " + mostDetections
                    + " are allowed in one part (detectionsPerPart of the site file)");
        }
    }

    private static Intake intake(PartReading reading, boolean passable, Original original) {
        Faults faults = reading.faults();
        List<Detection> used = used(reading);
        boolean whole = faults.strikePart() || used.isEmpty() && reading.detectionsSent() > 0;
        Optional<PartBody> body = Optional.empty();
        if (passable) {
            reading.part().setDetections(whole ? new ArrayList<>() : used);
            body = Optional.of(
                    new PartBody(reading.part(), reading.detectionsSent(), whole, reading.wholeDigest()));
        }
        return new Intake(
                body, faults.isEmpty() ? Optional.empty() : Optional.of(Rejects.of(reading, whole, original)));
    }

    private static List<Detection> used(PartReading reading) {
        List<Detection> used = new ArrayList<>(reading.part().getDetections().size());
        for (Detection detection : reading.part().getDetections()) {
            if (!reading.faults().strike(detection.getIndex())) {
                used.add(detection);
            }
        }
        return used;
    }
}
