package org.sweeptally.world;

import java.util.SortedMap;
import java.util.TreeMap;

/**
 * Kalman filters (Kalman 1960) that are told which detection is of which object, which are false, and which objects are
 * alive: what is left of the error when all questions of association and existence are answered. Written
 * apart from the product's own filter; each axis by itself, since nothing couples them.
 */
public final class ToldFilter {

    /** Place and velocity along one axis, with their variances and covariance. */
    private static final class Axis {
        private double place;
        private double velocity;
        private double varPlace;
        private double covariance;
        private double varVelocity;

        private Axis(double z, WorldSettings world) {
            place = z;
            varPlace = world.sigmaMetres() * world.sigmaMetres();
            varVelocity = world.speedSigma() * world.speedSigma();
        }

        private void predict(double t, double q) {
            place += t * velocity;
            varPlace += t * (2 * covariance + t * varVelocity) + q * t * t * t / 3;
            covariance += t * varVelocity + q * t * t / 2;
            varVelocity += q * t;
        }

        private void update(double z, double noise) {
            double innovation = z - place;
            double variance = varPlace + noise;
            double gainPlace = varPlace / variance;
            double gainVelocity = covariance / variance;
            place += gainPlace * innovation;
            velocity += gainVelocity * innovation;
            varVelocity -= gainVelocity * covariance;
            covariance -= gainVelocity * varPlace;
            varPlace -= gainPlace * varPlace;
        }
    }

    private final WorldSettings world;
    private SortedMap<Integer, Axis[]> tracks = new TreeMap<>();
    private double seconds;

    public ToldFilter(WorldSettings world) {
        this.world = world;
    }

    /**
     * Takes in a scan; gives the picture: estimated places [east, north] in the square, of the objects alive that have
     * ever been detected.
     */
    public double[][] update(SimulatedScan scan) {
        SortedMap<Integer, Axis[]> alive = new TreeMap<>();
        for (TrueObject object : scan.objects()) {
            Axis[] track = tracks.get(object.id());
            if (track != null) {
                track[0].predict(scan.seconds() - seconds, world.accelerationNoise());
                track[1].predict(scan.seconds() - seconds, world.accelerationNoise());
                alive.put(object.id(), track);
            }
        }
        double noise = world.sigmaMetres() * world.sigmaMetres();
        for (SimulatedScan.Detection z : scan.detections()) {
            Axis[] track = alive.get(z.object());
            if (track != null) {
                track[0].update(z.east(), noise);
                track[1].update(z.north(), noise);
            } else if (z.object() != SimulatedScan.CLUTTER) {
                alive.put(z.object(), new Axis[] {new Axis(z.east(), world), new Axis(z.north(), world)});
            }
        }
        tracks = alive;
        seconds = scan.seconds();
        return shown();
    }

    private double[][] shown() {
        return tracks.values().stream()
                .filter(axes -> world.holds(axes[0].place, axes[1].place))
                .map(axes -> new double[] {axes[0].place, axes[1].place})
                .toArray(double[][]::new);
    }
}
