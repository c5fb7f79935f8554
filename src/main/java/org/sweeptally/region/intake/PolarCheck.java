package org.sweeptally.region.intake;

import org.sweeptally.event.Detection;
import org.sweeptally.event.Noise;
import org.sweeptally.event.Part;
import org.sweeptally.event.PolarFix;
import org.sweeptally.event.RejectReason;
import org.sweeptally.site.PolarSettings;
import org.sweeptally.site.SensorSettings;

/**
 * Checks ranges and azimuths. A sensor of which the site file does not say how exact its azimuths are may send them all
 * the same, where each says it of itself.
 */
final class PolarCheck {

    /** Square degrees, from (0.001 degrees) squared to (45 degrees) squared: wider ones are no direction. */
    static final double LEAST_AZIMUTH_VARIANCE = 1e-6;

    static final double GREATEST_AZIMUTH_VARIANCE = 2025;

    static final double FASTEST_METRES_PER_SECOND = 10_000;

    /** A range may be shorter than the height difference by the error of so many standard deviations. */
    private static final double RANGE_SIGMAS = 5;

    private final SensorSettings sensor;
    private final Part part;

    PolarCheck(SensorSettings sensor, Part part) {
        this.sensor = sensor;
        this.part = part;
    }

    void check(FaultSink sink, Detection detection, PolarFix fix, Faults faults) {
        if (sensor.polar().isEmpty() && detection.getNoise() == null) {
            faults.detection(detection.getIndex(), RejectReason.WRONG_MEASUREMENT, "measurement", () -> "sensor "
                    + sensor.name() + " measures positions: a detection gives latitude and longitude, or eastMetres and"
                    + " northMetres, or a range and an azimuth with a noise of their own");
            return;
        }
        boolean sound = FieldCheck.within(sink, "rangeMetres", fix.getRangeMetres(), 0,
                DetectionCheck.FARTHEST_OFFSET_METRES, "metres from the sensor from 0 to 1000000 are allowed");
        FieldCheck.azimuth(sink, "azimuthDegrees", fix.getAzimuthDegrees());
        rangeRate(sink, fix.getRangeRateMetresPerSecond());
        sound &= noise(sink, detection.getNoise());
        boolean known = detection.getHeightMetres() == null || Double.isFinite(detection.getHeightMetres());
        if (sound && known) {
            height(sink, detection, fix);
        }
    }

    private void rangeRate(FaultSink sink, Double rateOrNull) {
        if (rateOrNull == null
                || !FieldCheck.within(sink, "rangeRateMetresPerSecond", rateOrNull, -FASTEST_METRES_PER_SECOND,
                        FASTEST_METRES_PER_SECOND, "metres a second from -10000 to 10000 are allowed")) {
            return;
        }
        boolean used = sensor.polar().isPresent() && sensor.polar().get().rangeRateSigmaMetresPerSecond().isPresent();
        boolean still = part.getSensorEastMetresPerSecond() != null && part.getSensorNorthMetresPerSecond() != null;
        if (used && sensor.position().isEmpty() && !still) {
            sink.add("rangeRateMetresPerSecond", () -> "rangeRateMetresPerSecond is " + Shown.number(rateOrNull)
                    + ", and the part does not say how fast sensor " + sensor.name()
                    + ", which moves, was: sensorEastMetresPerSecond and sensorNorthMetresPerSecond are expected, 0 if"
                    + " its own speed is taken out already");
        }
    }

    private static boolean noise(FaultSink sink, Noise noise) {
        if (noise == null) {
            return true;
        }
        boolean sound = DetectionCheck.variance(sink, "noise.first", noise.getFirst());
        sound &= FieldCheck.within(sink, "noise.second", noise.getSecond(), LEAST_AZIMUTH_VARIANCE,
                GREATEST_AZIMUTH_VARIANCE, "square degrees from 0.000001 to 2025 are allowed");
        sound &= FieldCheck.finite(sink, "noise.cross", noise.getCross());
        return sound && DetectionCheck.definite(sink, noise);
    }

    /** The object's height against the sensor's, where both are known, must leave some of the range. */
    private void height(FaultSink sink, Detection detection, PolarFix fix) {
        double difference = sensor.heightDifference(
                part.getSensorPosition() == null ? null : part.getSensorPosition().getHeightMetres(),
                detection.getHeightMetres());
        double sigma = detection.getNoise() == null
                ? sensor.polar().map(PolarSettings::rangeSigmaMetres).orElse(0.0)
                : Math.sqrt(detection.getNoise().getFirst());
        if (fix.getRangeMetres() + RANGE_SIGMAS * sigma < Math.abs(difference)) {
            sink.add("rangeMetres", () -> "rangeMetres is " + Shown.number(fix.getRangeMetres())
                    + ": at least the difference in height from the sensor is expected, "
                    + Shown.number(Math.abs(difference)) + " m");
        }
    }
}
