package org.sweeptally.world;

import java.util.ArrayList;
import java.util.Collections;
import java.util.List;
import java.util.Random;
import java.util.SplittableRandom;
import org.sweeptally.filter.Component;
import org.sweeptally.filter.FilterScene;
import org.sweeptally.filter.FilterSettings;
import org.sweeptally.filter.ObjectFilter;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.model.Look;
import org.sweeptally.model.MotionProfile;

/** Craft on courses of our choice on the simulated square, detected and followed scan by scan. */
final class CourseRun {

    private final WorldSettings world;
    private final SplittableRandom random;
    private final Random normal;
    private final double[][][] states;
    private final Look look;
    private final ObjectFilter filter;
    private int scan = -1;

    /** The same seed gives the same detections, whatever the profiles. */
    CourseRun(WorldSettings world, List<MotionProfile> profiles, long seed, List<Course> courses) {
        this.world = world;
        this.random = new SplittableRandom(seed);
        this.normal = new Random(random.nextLong());
        this.states = courses.stream()
                .map(course -> course.states(world.periodSeconds(), world.scans()))
                .toArray(double[][][]::new);
        PlaneArea core = FilterScene.square(world.sideMetres() / 2);
        this.look = ModelRun.look(world, core);
        this.filter = new ObjectFilter(settings(world, profiles), core, world.marginMetres());
    }

    private static FilterSettings settings(WorldSettings world, List<MotionProfile> profiles) {
        double density = world.objectsPerSquareMetre();
        return new FilterSettings(
                profiles, density / world.lifetimeSeconds(), density, density, 0.7, 0.3,
                FilterSettings.RECYCLING_BELOW, 5, 100, 100_000, 1_000_000, 1_000_000, 1000, 1e-5, 2_000_000);
    }

    boolean next() {
        if (++scan == world.scans()) {
            return false;
        }
        double seconds = seconds();
        List<SimulatedScan.Detection> detections = new ArrayList<>();
        for (int craft = 0; craft < states.length; craft++) {
            double[] at = states[craft][scan];
            boolean detected = random.nextDouble() < world.probabilityOfDetection();
            double east = at[0] + world.sigmaMetres() * normal.nextGaussian();
            double north = at[1] + world.sigmaMetres() * normal.nextGaussian();
            if (detected && world.sees(at[0], at[1])) {
                detections.add(new SimulatedScan.Detection(east, north, craft));
            }
        }
        double half = world.sideMetres() / 2 + world.marginMetres();
        double expected = world.clutterPerSquareMetre() * 4 * half * half;
        for (double left = StrictMath.exp(-expected), product = random.nextDouble(); product > left; ) {
            double east = half * (2 * random.nextDouble() - 1);
            double north = half * (2 * random.nextDouble() - 1);
            if (world.sees(east, north)) {
                detections.add(new SimulatedScan.Detection(east, north, SimulatedScan.CLUTTER));
            }
            product *= random.nextDouble();
        }
        Collections.shuffle(detections, new Random(random.nextLong()));
        SimulatedScan simulated = new SimulatedScan(seconds, detections, List.of());
        filter.predict(scan == 0 ? 0 : world.periodSeconds());
        filter.update(ModelRun.scan(world, simulated, look), simulated.micros());
        return true;
    }

    int scan() {
        return scan;
    }

    double seconds() {
        return scan * world.periodSeconds();
    }

    ObjectFilter filter() {
        return filter;
    }

    /** State of a craft at this scan. */
    double[] state(int craft) {
        return states[craft][scan];
    }

    /** The confirmed component nearest to a craft, if one is nearer than some metres; else null. */
    Component shownNear(int craft, double metres) {
        Component nearest = null;
        double least = metres;
        for (Component component : filter.components()) {
            double off = off(component, craft);
            if (component.confirmed() && off < least) {
                nearest = component;
                least = off;
            }
        }
        return nearest;
    }

    double off(Component component, int craft) {
        double[] at = state(craft);
        return Math.hypot(component.density().east() - at[0], component.density().north() - at[1]);
    }
}
