package org.sweeptally.world;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.sweeptally.filter.FilterScene;
import org.sweeptally.filter.FilterSettings;
import org.sweeptally.filter.ObjectFilter;
import org.sweeptally.filter.Observation;
import org.sweeptally.filter.Scan;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.model.DetectionProfile;
import org.sweeptally.model.Look;
import org.sweeptally.model.PositionMeasurement;
import org.sweeptally.model.SensorModel;

/**
 * The filter on the simulated world, with settings that say what is so. The square is its core; its apron is what the
 * sensor sees beyond.
 */
public final class ModelRun {

    /** The sensor reaches over the whole square and its margin; the margin is the limit. */
    private static final double REACHES = 3;

    private final WorldSettings world;
    private final Look look;
    private final ObjectFilter filter;
    private double seconds;

    public ModelRun(WorldSettings world, double confirming, double ending) {
        this.world = world;
        PlaneArea core = FilterScene.square(world.sideMetres() / 2);
        look = look(world, core);
        filter = new ObjectFilter(settings(world, confirming, ending), core, world.marginMetres());
    }

    /** A look at the square and its margin. */
    public static Look look(WorldSettings world, PlaneArea core) {
        double reach = REACHES * world.sideMetres();
        SensorModel sensor = new SensorModel(
                "mast",
                reach,
                DetectionProfile.constant(world.probabilityOfDetection()),
                world.clutterPerSquareMetre() * StrictMath.PI * reach * reach);
        return new Look(sensor, new PlanePoint(0, 0), Optional.empty(), core, world.marginMetres());
    }

    /** The world's own numbers; thresholds as given, bounds so wide that none bites. */
    public static FilterSettings settings(WorldSettings world, double confirming, double ending) {
        double density = world.objectsPerSquareMetre();
        return FilterScene.oneKind(
                world.accelerationNoise(), world.speedSigma(), world.lifetimeSeconds(),
                density / world.lifetimeSeconds(), density, density, confirming, ending,
                FilterSettings.RECYCLING_BELOW, 5, 100, 100_000, 1_000_000, 1_000_000, 1000, 1e-5, 2_000_000);
    }

    /** A scan as the filter takes it: nothing in it says what caused a detection. */
    public static Scan scan(WorldSettings world, SimulatedScan simulated, Look look) {
        List<Observation> observations = new ArrayList<>();
        for (SimulatedScan.Detection z : simulated.detections()) {
            PositionMeasurement measured = PositionMeasurement.at(z.east(), z.north(), world.sigmaMetres());
            observations.add(new Observation(measured, 0, observations.size(), null, null));
        }
        return new Scan("mast", simulated.micros(), look, observations);
    }

    /** Takes in the next scan. */
    public void update(SimulatedScan simulated) {
        filter.predict(simulated.seconds() - seconds);
        filter.update(scan(world, simulated, look), simulated.micros());
        seconds = simulated.seconds();
    }

    public ObjectFilter filter() {
        return filter;
    }

    /** Places [east, north] of the confirmed components in the square: the picture. */
    public double[][] shown() {
        return filter.components().stream()
                .filter(c -> c.confirmed() && world.holds(c.density().east(), c.density().north()))
                .map(c -> new double[] {c.density().east(), c.density().north()})
                .toArray(double[][]::new);
    }
}
