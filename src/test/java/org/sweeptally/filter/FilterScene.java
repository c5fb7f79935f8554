package org.sweeptally.filter;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.model.DetectionProfile;
import org.sweeptally.model.Look;
import org.sweeptally.model.MotionProfile;
import org.sweeptally.model.NearlyConstantVelocity;
import org.sweeptally.model.PositionMeasurement;
import org.sweeptally.model.SensorModel;

/**
 * An invented stretch of water for tests of the filter: a square, a sensor in its middle, and settings near to
 * hand.
 */
public final class FilterScene {

    public static final double SIGMA_METRES = 15;

    private final PlaneArea core;
    private final double apronMetres;
    private final double reachMetres;

    /** A square of so many metres, an apron around it, and a sensor with that reach. */
    public FilterScene(double sideMetres, double apronMetres, double reachMetres) {
        this.core = square(sideMetres / 2);
        this.apronMetres = apronMetres;
        this.reachMetres = reachMetres;
    }

    /** A square around the plane's origin. */
    public static PlaneArea square(double half) {
        LocalPlane plane = new LocalPlane(new LatLon(31, -41));
        List<LatLon> corners = new ArrayList<>();
        for (double[] c : new double[][] {{-half, -half}, {half, -half}, {half, half}, {-half, half}}) {
            corners.add(plane.toGeodetic(new PlanePoint(c[0], c[1])));
        }
        return PlaneArea.of(new GeoPolygon(corners, List.of()), plane);
    }

    public PlaneArea core() {
        return core;
    }

    public double apronMetres() {
        return apronMetres;
    }

    public ObjectFilter filter(FilterSettings settings) {
        return new ObjectFilter(settings, core, apronMetres);
    }

    /** A look from the middle of the square. */
    public Look look(double probabilityOfDetection, double clutterPerSquareMetre) {
        SensorModel sensor = new SensorModel(
                "mast",
                reachMetres,
                DetectionProfile.constant(probabilityOfDetection),
                clutterPerSquareMetre * Math.PI * reachMetres * reachMetres);
        return new Look(sensor, new PlanePoint(0, 0), Optional.empty(), core, apronMetres);
    }

    /** A scan of position measurements: east and north in turn. */
    public static Scan scan(long timeMicros, Look look, double... eastNorth) {
        List<Observation> observations = new ArrayList<>();
        for (int i = 0; i < eastNorth.length; i += 2) {
            PositionMeasurement z = PositionMeasurement.at(eastNorth[i], eastNorth[i + 1], SIGMA_METRES);
            observations.add(new Observation(z, 0, i / 2, "d" + i / 2, null));
        }
        return new Scan("mast", timeMicros, look, observations);
    }

    /** 20 objects on 16 square kilometres, that live 600 s. */
    public static FilterSettings settings() {
        double density = 20 / 16e6;
        return oneKind(
                0.05, 6, 600, density / 600, density, density, 0.7, 0.3, 0.1, 5, 100, 1000, 5000, 200_000, 1000, 1e-5, 2_000_000);
    }

    /** Settings of a site whose objects are all of one kind and move in one way. */
    public static FilterSettings oneKind(
            double accelerationNoise, double speedSigma, double lifetimeSeconds, double births, double outside,
            double initial, double confirming, double ending, double recyclingBelow, double gateSigmas,
            double cellMetres, int components, int terms, long exactSteps, int sweeps, double leastTermWeight,
            int gatedPairs) {
        MotionProfile kind = MotionProfile.single(
                new NearlyConstantVelocity(accelerationNoise), lifetimeSeconds, speedSigma);
        return new FilterSettings(
                List.of(kind), births, outside, initial, confirming, ending, recyclingBelow, gateSigmas, cellMetres,
                components, terms, exactSteps, sweeps, leastTermWeight, gatedPairs);
    }
}
