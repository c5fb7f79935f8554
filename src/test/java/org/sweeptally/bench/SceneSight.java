package org.sweeptally.bench;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.sweeptally.geo.Obstacles;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.model.ClutterLearning;
import org.sweeptally.model.DetectionArea;
import org.sweeptally.model.DetectionProfile;
import org.sweeptally.model.FieldOfView;
import org.sweeptally.model.Look;
import org.sweeptally.model.MissRuns;
import org.sweeptally.model.Sector;
import org.sweeptally.model.SensorModel;
import org.sweeptally.world.WorldSettings;

/** What the benchmark's sensor sees: nearly all in each case, so that the work of the filter stays the same. */
public enum SceneSight {

    /** All around, with one probability of detection. */
    DISC,

    /**
     * A least range, two sectors, probability by range, 10 shadows, 5 areas and 10 islands of 12 corners, all small.
     */
    CHARTED,

    /** All around, with clutter learned in cells of a twentieth of the world's side. */
    LEARNING,

    /** All around, with misses in runs of 6 s. */
    RUNS;

    private static final double REACHES = 3;
    private static final int ISLANDS = 10;
    private static final int CORNERS = 12;

    Look of(Look disc, WorldSettings world, PlaneArea core) {
        SensorModel s = disc.sensor();
        PlanePoint middle = new PlanePoint(0, 0);
        return switch (this) {
            case DISC -> disc;
            case CHARTED -> new Look(
                    new SensorModel(s.name(), s.reachMetres(), byRange(world), s.clutterPerScan()),
                    charted(world, middle, REACHES * world.sideMetres()),
                    Optional.empty(),
                    core,
                    world.marginMetres());
            case LEARNING -> new Look(
                    new SensorModel(s.name(), s.reachMetres(), s.detection(), s.clutterPerScan(), MissRuns.NONE,
                            new ClutterLearning(1200, world.sideMetres() / 20)),
                    FieldOfView.disc(middle, s.reachMetres()),
                    Optional.empty(),
                    core,
                    world.marginMetres());
            case RUNS -> new Look(
                    new SensorModel(s.name(), s.reachMetres(), s.detection(), s.clutterPerScan(), new MissRuns(6, 0.98),
                            ClutterLearning.OFF),
                    FieldOfView.disc(middle, s.reachMetres()),
                    Optional.empty(),
                    core,
                    world.marginMetres());
        };
    }

    private static DetectionProfile byRange(WorldSettings world) {
        return new DetectionProfile(List.of(
                new DetectionProfile.Point(0, world.probabilityOfDetection() + 0.02),
                new DetectionProfile.Point(world.sideMetres(), world.probabilityOfDetection() - 0.03)));
    }

    private static FieldOfView charted(WorldSettings world, PlanePoint middle, double reach) {
        List<PlaneArea> shadows = new ArrayList<>();
        List<DetectionArea> areas = new ArrayList<>();
        List<List<List<PlanePoint>>> islands = new ArrayList<>();
        double size = world.sideMetres() / 400;
        for (int i = 0; i < ISLANDS; i++) {
            double angle = 2 * StrictMath.PI * i / ISLANDS;
            double range = world.sideMetres() * (0.15 + 0.03 * i);
            shadows.add(PlaneArea.ofRings(List.of(round(angle, range, size))));
            if (i % 2 == 0) {
                areas.add(new DetectionArea(PlaneArea.ofRings(List.of(round(angle + 0.1, range, 3 * size))), 0.9, true));
            }
            islands.add(List.of(round(angle + 0.3, world.sideMetres() * 0.4, size)));
        }
        return new FieldOfView(middle, 10, reach, List.of(Sector.of(0.01, 3), Sector.of(3.02, 3.26)), shadows,
                new Obstacles(islands).visibleFrom(middle, reach), areas);
    }

    private static List<PlanePoint> round(double angle, double range, double radius) {
        List<PlanePoint> ring = new ArrayList<>();
        for (int i = 0; i < CORNERS; i++) {
            double around = 2 * StrictMath.PI * i / CORNERS;
            ring.add(new PlanePoint(
                    range * StrictMath.sin(angle) + radius * StrictMath.cos(around),
                    range * StrictMath.cos(angle) + radius * StrictMath.sin(around)));
        }
        return ring;
    }
}
