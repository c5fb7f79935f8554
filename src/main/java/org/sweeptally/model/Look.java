package org.sweeptally.model;

import java.util.Optional;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.geo.PlanePoint;

/**
 * One look of one sensor, as a region hears it: the probability that it detects an object at a place. That is 0 beyond
 * the sensor's reach, where the look did not look, and where the region does not hear.
 */
public final class Look {

    /** Within this many standard deviations of an edge the probability is averaged, farther from it not. */
    private static final double CLEAR_SIGMAS = 4;

    private static final double SQRT_3 = Math.sqrt(3);

    private final SensorModel sensor;
    private final PlanePoint position;
    private final Optional<LookCoverage> coverage;
    private final PlaneArea core;
    private final double apronMetres;
    private final boolean constantProfile;

    /**
     * @param position    where the sensor was, in the region's plane; not a number where it was beyond the plane's
     *                    horizon, and then it sees nothing here
     * @param coverage    where it looked, if not over its whole reach
     * @param core        the region's core in its plane
     * @param apronMetres how far around the core the region hears
     */
    public Look(
            SensorModel sensor,
            PlanePoint position,
            Optional<LookCoverage> coverage,
            PlaneArea core,
            double apronMetres) {
        this.sensor = sensor;
        this.position = position;
        this.coverage = coverage;
        this.core = core;
        this.apronMetres = apronMetres;
        this.constantProfile = sensor.detection().isConstant();
    }

    public SensorModel sensor() {
        return sensor;
    }

    /** Expected number of false detections per square metre, wherever the look looked. */
    public double clutterPerSquareMetre() {
        return sensor.clutterPerSquareMetre();
    }

    /** Whether the other look sees every place as well as this one. */
    public boolean seesAs(Look other) {
        return coverage.isEmpty()
                && other.coverage.isEmpty()
                && sensor.equals(other.sensor)
                && position.equals(other.position)
                && core == other.core
                && apronMetres == other.apronMetres;
    }

    /** Probability of detecting an object at a place in the region's plane. */
    public double probabilityOfDetection(double east, double north) {
        return hears(east, north) ? seenProbability(east, north) : 0;
    }

    /**
     * Probability of detection where it is the same all over a density, for most objects of most sites; NaN where it
     * must be averaged.
     */
    public double constantOver(Gaussian density) {
        return constantNear(density.east(), density.north(), density.largestPositionSigma());
    }

    /** The same for a density whose greatest position sigma is known already. */
    public double constantNear(double east, double north, double sigmaMetres) {
        if (!constantProfile || coverage.isPresent()) {
            return Double.NaN;
        }
        double margin = CLEAR_SIGMAS * sigmaMetres;
        double distance = distanceFromSensor(east, north);
        if (!(distance - margin <= sensor.reachMetres())) {
            return 0;
        }
        if (distance + margin > sensor.reachMetres()) {
            return Double.NaN;
        }
        if (core.isAtLeast(margin - apronMetres, east, north)) {
            return sensor.detection().points().get(0).probability();
        }
        return core.isAtLeast(-margin - apronMetres, east, north) ? Double.NaN : 0;
    }

    /**
     * Probability of detection averaged over a density's position: the 3 x 3 Gauss-Hermite rule along the axes of the
     * covariance's Cholesky factor, exact for polynomials of degree 5 (Abramowitz and Stegun 1964, 25.4.46). Over the
     * step at an edge it is within a few hundredths, which is less than anybody knows of a sensor at its edge.
     */
    public double averageOver(Gaussian density) {
        DMatrix4x4 p = density.covariance;
        DMatrix4 x = density.mean;
        double l11 = Math.sqrt(p.a11);
        double l21 = l11 > 0 ? p.a12 / l11 : 0;
        double l22 = Math.sqrt(Math.max(0, p.a22 - l21 * l21));
        double sum = 0;
        for (int i = -1; i <= 1; i++) {
            double u = i * SQRT_3;
            double weightI = i == 0 ? 2.0 / 3 : 1.0 / 6;
            for (int j = -1; j <= 1; j++) {
                double v = j * SQRT_3;
                double weight = weightI * (j == 0 ? 2.0 / 3 : 1.0 / 6);
                sum += weight * probabilityOfDetection(x.a1 + l11 * u, x.a2 + l21 * u + l22 * v);
            }
        }
        return Math.min(sum, 1);
    }

    private double seenProbability(double east, double north) {
        double distance = distanceFromSensor(east, north);
        if (!(distance <= sensor.reachMetres())) {
            return 0;
        }
        if (coverage.isPresent()
                && !coverage.get().covers(east - position.eastMetres(), north - position.northMetres(), east, north)) {
            return 0;
        }
        return sensor.detection().at(distance);
    }

    private boolean hears(double east, double north) {
        return core.isAtLeast(-apronMetres, east, north);
    }

    private double distanceFromSensor(double east, double north) {
        double offsetEast = east - position.eastMetres();
        double offsetNorth = north - position.northMetres();
        return Math.sqrt(offsetEast * offsetEast + offsetNorth * offsetNorth);
    }
}
