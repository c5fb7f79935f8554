package org.sweeptally.model;

import java.util.Optional;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.geo.PlanePoint;

/**
 * One look of one sensor, as a region hears it: the probability that it detects an object at a place. That is 0 where
 * the sensor cannot see, where the look did not look, and where the region does not hear.
 */
public final class Look {

    /** Within this many standard deviations of an edge the probability is averaged, farther from it not. */
    private static final double CLEAR_SIGMAS = 4;

    /** Probabilities of detection that differ by no more are taken for one: less than anybody knows of a sensor. */
    private static final double ALIKE = 0.01;

    private final SensorModel sensor;
    private final FieldOfView view;
    private final Optional<LookCoverage> coverage;
    private final Optional<Sector> coveredSector;
    private final PlaneArea core;
    private final double apronMetres;

    /**
     * A look of a sensor that sees all around.
     *
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
        this(sensor, FieldOfView.disc(position, sensor.reachMetres()), coverage, core, apronMetres);
    }

    /**
     * @param view        what the sensor can see from where it was
     * @param coverage    where it looked, if not over all of that
     * @param core        the region's core in its plane
     * @param apronMetres how far around the core the region hears
     */
    public Look(
            SensorModel sensor,
            FieldOfView view,
            Optional<LookCoverage> coverage,
            PlaneArea core,
            double apronMetres) {
        this.sensor = sensor;
        this.view = view;
        this.coverage = coverage;
        this.coveredSector = coverage.filter(LookCoverage::hasSector)
                .map(c -> Sector.of(c.fromAzimuthRadians(), c.widthRadians()));
        this.core = core;
        this.apronMetres = apronMetres;
    }

    public SensorModel sensor() {
        return sensor;
    }

    /**
     * Expected number of false detections per square metre, wherever the look looked: those of a scan over all that the
     * sensor can see from there, be it in the region or not.
     */
    public double clutterPerSquareMetre() {
        return sensor.clutterPerScan() / view.seenSquareMetres();
    }

    /** Whether the other look sees every place as well as this one. */
    public boolean seesAs(Look other) {
        return coverage.isEmpty()
                && other.coverage.isEmpty()
                && sensor.equals(other.sensor)
                && view.isSameAs(other.view)
                && core == other.core
                && apronMetres == other.apronMetres;
    }

    /** Probability of detecting an object at a place in the region's plane. */
    public double probabilityOfDetection(double east, double north) {
        return isReported(east, north) ? seenProbability(east, north) : 0;
    }

    /**
     * Probability of detecting an object that the sensor measured at a place. Whether the look looked there and the
     * region hears it was decided by the place measured; whether the object stood in shadow by where it was, so that is
     * averaged over the error.
     */
    public double probabilityOfDetection(Measurement z) {
        if (!isReported(z.east(), z.north())) {
            return 0;
        }
        double largest = largestSigma(z.varEast(), z.covEastNorth(), z.varNorth());
        double constant = seenWithin(z.east(), z.north(), CLEAR_SIGMAS * largest);
        if (!Double.isNaN(constant)) {
            return constant;
        }
        PlaneSpread spread = new PlaneSpread(z.varEast(), z.covEastNorth(), z.varNorth());
        double sum = 0;
        for (int i = 0; i < PlaneSpread.POINTS; i++) {
            sum += seenProbability(z.east() + spread.east(i), z.north() + spread.north(i));
        }
        return sum / PlaneSpread.POINTS;
    }

    /** Greatest standard deviation over all directions, metres. */
    private static double largestSigma(double varEast, double covEastNorth, double varNorth) {
        double half = 0.5 * (varEast + varNorth);
        double difference = 0.5 * (varEast - varNorth);
        return Math.sqrt(half + Math.sqrt(difference * difference + covEastNorth * covEastNorth));
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
        return constantWithin(east, north, CLEAR_SIGMAS * sigmaMetres);
    }

    /** Probability of detection where it is the same within a distance of a place, or nearly so; else NaN. */
    public double constantWithin(double east, double north, double metres) {
        double seen = seenWithin(east, north, metres);
        int covered = seen == 0 || coverage.isEmpty() ? FieldOfView.SEEN : covered(east, north, metres);
        if (seen == 0 || covered == FieldOfView.UNSEEN) {
            return 0;
        }
        if (core.isAtLeast(metres - apronMetres, east, north)) {
            return covered == FieldOfView.SEEN ? seen : Double.NaN;
        }
        return core.isAtLeast(-metres - apronMetres, east, north) ? Double.NaN : 0;
    }

    private double seenWithin(double east, double north, double metres) {
        return switch (view.side(east, north, metres)) {
            case FieldOfView.UNSEEN -> 0;
            case FieldOfView.SEEN -> view.probabilityWithin(sensor.detection(), east, north, metres, ALIKE);
            default -> Double.NaN;
        };
    }

    /** On which side of the coverage's edges all places within a distance of one are. */
    private int covered(double east, double north, double metres) {
        LookCoverage looked = coverage.get();
        double range = view.rangeMetres(east, north);
        double inside = looked.toMetres() - range;
        if (looked.fromMetres() > 0) {
            inside = Math.min(inside, range - looked.fromMetres());
        }
        if (coveredSector.isPresent()) {
            inside = Math.min(inside, coveredSector.get().signedDistanceMetres(
                    east - view.position().eastMetres(), north - view.position().northMetres()));
        }
        if (looked.area().isPresent() && inside >= -metres) {
            inside = Math.min(inside, looked.area().get().signedDistanceMetres(east, north));
        }
        if (inside < -metres) {
            return FieldOfView.UNSEEN;
        }
        return inside >= metres ? FieldOfView.SEEN : FieldOfView.MIXED;
    }

    /**
     * Probability of detection averaged over a density's position. Over the step at an edge it is within 0.06 of the
     * probability inside, which is less than anybody knows of a sensor at its edge.
     */
    public double averageOver(Gaussian density) {
        PlaneSpread spread = PlaneSpread.of(density);
        double sum = 0;
        for (int i = 0; i < PlaneSpread.POINTS; i++) {
            sum += probabilityOfDetection(density.east() + spread.east(i), density.north() + spread.north(i));
        }
        return sum / PlaneSpread.POINTS;
    }

    private double seenProbability(double east, double north) {
        return view.sees(east, north) ? view.probability(sensor.detection(), east, north) : 0;
    }

    /** Whether a detection measured at a place would have been sent and heard. */
    private boolean isReported(double east, double north) {
        if (!core.isAtLeast(-apronMetres, east, north)) {
            return false;
        }
        if (coverage.isEmpty()) {
            return true;
        }
        LookCoverage looked = coverage.get();
        double range = view.rangeMetres(east, north);
        return range >= looked.fromMetres()
                && range <= looked.toMetres()
                && (coveredSector.isEmpty() || coveredSector.get().contains(
                        east - view.position().eastMetres(), north - view.position().northMetres()))
                && (looked.area().isEmpty() || looked.area().get().contains(east, north));
    }
}
