package org.sweeptally.region;

import java.util.OptionalDouble;
import org.sweeptally.event.Detection;
import org.sweeptally.event.Noise;
import org.sweeptally.event.Part;
import org.sweeptally.event.PolarFix;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.model.PolarMeasurement;
import org.sweeptally.site.PolarSettings;
import org.sweeptally.site.SensorSettings;

/**
 * Turns a range and an azimuth into a region's plane. The place that they point to is taken from the sensor's own plane
 * to the region's over the ellipsoid, as any place is, and range and azimuth are read off again there: so the region's
 * convergence, and what its plane does to lengths at the sensor, is in them.
 *
 * <p>Heights count as above a flat earth: the place's fall below the sensor's horizon changes a range along the ground
 * by a few centimetres at 20 km.
 */
final class PolarConversion {

    /** Nearer than this, an angle that is read off is one of rounding, and planes do not differ. */
    private static final double NEAREST_METRES = 0.1;

    private static final double SQUARE_RADIANS = StrictMath.toRadians(1) * StrictMath.toRadians(1);

    private final SensorSettings sensor;
    private final Part part;
    private final PolarFix fix;
    private final Noise noise;
    private final double heightDifference;

    PolarConversion(Detection detection, Part part, SensorSettings sensor) {
        this.sensor = sensor;
        this.part = part;
        this.fix = (PolarFix) detection.getMeasurement();
        this.noise = noiseOf(detection, sensor);
        this.heightDifference = sensor.heightDifference(
                part.getSensorPosition() == null ? null : part.getSensorPosition().getHeightMetres(),
                detection.getHeightMetres());
    }

    /** Its own, or the sensor's: square metres, metre degrees and square degrees. */
    private static Noise noiseOf(Detection detection, SensorSettings sensor) {
        if (detection.getNoise() != null) {
            return detection.getNoise();
        }
        PolarSettings polar = sensor.polar().orElseThrow(() -> new IllegalArgumentException("sensor " + sensor.name()
                + " measures positions, and a polar measurement of it has no noise of its own"));
        double range = polar.rangeSigmaMetres();
        double azimuth = polar.azimuthSigmaDegrees();
        return new Noise(range * range, 0.0, azimuth * azimuth);
    }

    /** Where on the ellipsoid the detection is, unbiased, by the plane that touches where its sensor is. */
    LatLon place(LocalPlane sensorPlane) {
        PolarMeasurement measured = new PolarMeasurement(
                fix.getRangeMetres(),
                StrictMath.toRadians(fix.getAzimuthDegrees()),
                Double.NaN,
                noise(0),
                new PolarMeasurement.Station(0, 0, 0, 0, heightDifference, 0),
                0);
        return sensorPlane.toGeodetic(new PlanePoint(measured.east(), measured.north()));
    }

    /** The measurement in the region's plane. */
    PolarMeasurement measurement(LocalPlane plane, LocalPlane sensorPlane, double lagSeconds) {
        PlanePoint station = plane.toPlane(sensorPlane.origin());
        double ground = PolarMeasurement.groundRange(fix.getRangeMetres(), heightDifference);
        double azimuth = StrictMath.toRadians(fix.getAzimuthDegrees());
        PlanePoint pointed = plane.toPlane(sensorPlane.toGeodetic(
                new PlanePoint(ground * StrictMath.sin(azimuth), ground * StrictMath.cos(azimuth))));
        double east = pointed.eastMetres() - station.eastMetres();
        double north = pointed.northMetres() - station.northMetres();
        double turn = plane.convergenceRadians(sensorPlane.origin());
        boolean readOff = ground > NEAREST_METRES;
        return new PolarMeasurement(
                readOff
                        ? Math.sqrt(east * east + north * north + heightDifference * heightDifference)
                        : fix.getRangeMetres(),
                readOff ? StrictMath.atan2(east, north) : azimuth - turn,
                rangeRate(),
                noise(rateSigma()),
                station(station, turn),
                lagSeconds);
    }

    private double rangeRate() {
        boolean used = fix.getRangeRateMetresPerSecond() != null && rateSigma() > 0;
        return used ? fix.getRangeRateMetresPerSecond() : Double.NaN;
    }

    private double rateSigma() {
        return sensor.polar()
                .map(PolarSettings::rangeRateSigmaMetresPerSecond)
                .orElse(OptionalDouble.empty())
                .orElse(0);
    }

    private PolarMeasurement.Noise noise(double rateSigma) {
        return new PolarMeasurement.Noise(
                noise.getFirst(),
                StrictMath.toRadians(noise.getCross()),
                noise.getSecond() * SQUARE_RADIANS,
                rateSigma * rateSigma);
    }

    /** The sensor's velocity, to the true east and north, turned into the plane. */
    private PolarMeasurement.Station station(PlanePoint at, double turn) {
        boolean moves = sensor.position().isEmpty();
        double eastwards = moves && part.getSensorEastMetresPerSecond() != null
                ? part.getSensorEastMetresPerSecond()
                : 0;
        double northwards = moves && part.getSensorNorthMetresPerSecond() != null
                ? part.getSensorNorthMetresPerSecond()
                : 0;
        double c = StrictMath.cos(turn);
        double s = StrictMath.sin(turn);
        return new PolarMeasurement.Station(
                at.eastMetres(),
                at.northMetres(),
                c * eastwards - s * northwards,
                s * eastwards + c * northwards,
                heightDifference,
                sensor.polar().map(PolarSettings::largestRangeRateMetresPerSecond).orElse(0.0));
    }
}
