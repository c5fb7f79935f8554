package org.sweeptally.region;

import org.sweeptally.event.Detection;
import org.sweeptally.event.GeodeticFix;
import org.sweeptally.event.Noise;
import org.sweeptally.event.OffsetFix;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.event.Part;
import org.sweeptally.event.PolarFix;
import org.sweeptally.model.Measurement;
import org.sweeptally.model.PositionMeasurement;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.SensorSettings.PositionNoise;

/** Turns one sensor's measurements, made from one place, into what they are in a region's plane, with their noise. */
final class MeasurementConversion {

    private final LocalPlane plane;
    private final LocalPlane sensorPlane;
    private final SensorSettings sensor;
    private final PlanePoint sensorAt;

    /**
     * @param plane       the region's
     * @param sensorPlane the plane that touches where the sensor is
     * @param sensor      whose noise is that of measurements that bring none of their own
     */
    MeasurementConversion(LocalPlane plane, LocalPlane sensorPlane, SensorSettings sensor) {
        this.plane = plane;
        this.sensorPlane = sensorPlane;
        this.sensor = sensor;
        this.sensorAt = plane.toPlane(sensorPlane.origin());
    }

    /**
     * @param part       that brought the detection
     * @param lagSeconds how long before the scan takes effect the object was seen there
     */
    Measurement convert(Detection detection, Part part, double lagSeconds) {
        if (detection.getMeasurement() instanceof PolarFix) {
            return new PolarConversion(detection, part, sensor).measurement(plane, sensorPlane, lagSeconds);
        }
        LatLon place = placeOf(detection, part, sensorPlane, sensor);
        PlanePoint at = plane.toPlane(place);
        if (detection.getNoise() == null) {
            return withUsualNoise(at, lagSeconds);
        }
        // East and north of an offset are the sensor's, those of a place are the place's own.
        LatLon axes = detection.getMeasurement() instanceof OffsetFix ? sensorPlane.origin() : place;
        return withNoise(at, detection.getNoise(), plane.convergenceRadians(axes), lagSeconds);
    }

    /** Where on the ellipsoid a detection of a part is, by the plane that touches where its sensor is. */
    static LatLon placeOf(Detection detection, Part part, LocalPlane sensorPlane, SensorSettings sensor) {
        Object measurement = detection.getMeasurement();
        if (measurement instanceof GeodeticFix fix) {
            return new LatLon(fix.getLatitude(), fix.getLongitude());
        }
        if (measurement instanceof OffsetFix fix) {
            return sensorPlane.toGeodetic(new PlanePoint(fix.getEastMetres(), fix.getNorthMetres()));
        }
        if (measurement instanceof PolarFix) {
            return new PolarConversion(detection, part, sensor).place(sensorPlane);
        }
        throw new IllegalArgumentException("a detection without measurement: " + measurement);
    }

    /** The noise along and across the line of sight, turned by its direction. */
    private PositionMeasurement withUsualNoise(PlanePoint at, double lagSeconds) {
        double east = at.eastMetres() - sensorAt.eastMetres();
        double north = at.northMetres() - sensorAt.northMetres();
        double squared = east * east + north * north;
        PositionNoise usualNoise = sensor.noiseAt(Math.sqrt(squared));
        double along = usualNoise.alongSigmaMetres() * usualNoise.alongSigmaMetres();
        double across = usualNoise.acrossSigmaMetres() * usualNoise.acrossSigmaMetres();
        double eastShare = squared > 0 ? east * east / squared : 0;
        double product = squared > 0 ? east * north / squared : 0;
        return new PositionMeasurement(
                at.eastMetres(),
                at.northMetres(),
                across + (along - across) * eastShare,
                (along - across) * product,
                along + (across - along) * eastShare,
                lagSeconds);
    }

    /** A covariance turned counter-clockwise by an angle, from its own axes to the plane's. */
    private static PositionMeasurement withNoise(PlanePoint at, Noise noise, double turn, double lagSeconds) {
        double c = StrictMath.cos(turn);
        double s = StrictMath.sin(turn);
        double first = noise.getFirst();
        double cross = noise.getCross();
        double second = noise.getSecond();
        return new PositionMeasurement(
                at.eastMetres(),
                at.northMetres(),
                c * c * first - 2 * c * s * cross + s * s * second,
                c * s * (first - second) + (c * c - s * s) * cross,
                s * s * first + 2 * c * s * cross + c * c * second,
                lagSeconds);
    }
}
