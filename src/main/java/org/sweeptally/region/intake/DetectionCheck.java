package org.sweeptally.region.intake;

import org.sweeptally.event.Detection;
import org.sweeptally.event.GeodeticFix;
import org.sweeptally.event.Noise;
import org.sweeptally.event.OffsetFix;
import org.sweeptally.event.Part;
import org.sweeptally.event.PolarFix;
import org.sweeptally.site.SensorSettings;

/** Checks the detections of one part of one sensor, each on its own. */
final class DetectionCheck {

    /** Beyond it a plane that touches the ellipsoid at the sensor says nothing about places. */
    static final double FARTHEST_OFFSET_METRES = 1_000_000;

    /** Variances in square metres from (1 mm) squared to (1000 km) squared: others ruin the arithmetic. */
    static final double LEAST_VARIANCE = 1e-6;

    static final double GREATEST_VARIANCE = 1e12;

    private final SensorSettings sensor;
    private final long scanTimeMicros;
    private final long lookEndMicros;
    private final FieldNames names;
    private final Faults faults;
    private final PolarCheck polar;

    /** @param part whose detections are checked; its scan time is plausible */
    DetectionCheck(SensorSettings sensor, Part part, FieldNames names, Faults faults) {
        this.sensor = sensor;
        this.polar = new PolarCheck(sensor, part);
        this.scanTimeMicros = part.getScanTimeMicros();
        this.lookEndMicros = scanTimeMicros + Math.round(sensor.sweepSeconds() * 1e6);
        this.names = names;
        this.faults = faults;
    }

    /** Checks one detection; what is wrong goes to the faults, under its index. */
    void check(Detection detection) {
        int index = detection.getIndex();
        FaultSink sink = faults.badFieldsOf(index);
        time(sink, detection.getTimeMicros());
        FieldCheck.text(sink, "id", detection.getId());
        FieldCheck.text(sink, "declaredIdentity", detection.getDeclaredIdentity());
        FieldCheck.finite(sink, "heightMetres", detection.getHeightMetres());
        FieldCheck.finite(sink, "strength", detection.getStrength());
        if (detection.getMeasurement() instanceof PolarFix fix) {
            polar.check(sink, detection, fix, faults);
            return;
        }
        measurement(sink, detection.getMeasurement());
        noise(sink, detection.getNoise());
    }

    private void time(FaultSink sink, Long microsOrNull) {
        String field = names.time("time");
        if (!FieldCheck.time(sink, field, microsOrNull)
                || microsOrNull == null
                || microsOrNull >= scanTimeMicros && microsOrNull <= lookEndMicros) {
            return;
        }
        sink.add(field, () -> field + " is " + Times.text(microsOrNull) + ": the look lasts from "
                + Times.text(scanTimeMicros) + " to " + Times.text(lookEndMicros) + " (sweepSeconds of sensor "
                + sensor.name() + " is " + Shown.number(sensor.sweepSeconds()) + ")");
    }

    private static void measurement(FaultSink sink, Object measurement) {
        if (measurement instanceof GeodeticFix fix) {
            FieldCheck.latitude(sink, "latitude", fix.getLatitude());
            FieldCheck.longitude(sink, "longitude", fix.getLongitude());
        } else if (measurement instanceof OffsetFix fix) {
            offset(sink, "eastMetres", fix.getEastMetres());
            offset(sink, "northMetres", fix.getNorthMetres());
        } else {
            throw new IllegalArgumentException("a detection without measurement: " + measurement);
        }
    }

    private static void offset(FaultSink sink, String field, double metres) {
        FieldCheck.within(sink, field, metres, -FARTHEST_OFFSET_METRES, FARTHEST_OFFSET_METRES,
                "metres from the sensor from -1000000 to 1000000 are allowed");
    }

    private static void noise(FaultSink sink, Noise noise) {
        if (noise == null) {
            return;
        }
        boolean sound = variance(sink, "noise.first", noise.getFirst());
        sound &= variance(sink, "noise.second", noise.getSecond());
        sound &= FieldCheck.finite(sink, "noise.cross", noise.getCross());
        if (sound) {
            definite(sink, noise);
        }
    }

    /** Whether a covariance of sound variances is positive definite. */
    static boolean definite(FaultSink sink, Noise noise) {
        if (noise.getFirst() * noise.getSecond() > noise.getCross() * noise.getCross()) {
            return true;
        }
        sink.add("noise", () -> "noise is first " + Shown.number(noise.getFirst()) + ", cross "
                + Shown.number(noise.getCross()) + ", second " + Shown.number(noise.getSecond())
                + ": first times second must be more than the square of cross");
        return false;
    }

    static boolean variance(FaultSink sink, String field, double squareMetres) {
        return FieldCheck.within(sink, field, squareMetres, LEAST_VARIANCE, GREATEST_VARIANCE,
                "square metres from 0.000001 to 1000000000000 are allowed");
    }
}
