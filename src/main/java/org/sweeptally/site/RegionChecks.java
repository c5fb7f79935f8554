package org.sweeptally.site;

import java.util.ArrayList;
import java.util.List;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.geo.PlanePoint;

/** What regions must be, each by itself, to each other and to the sensors. */
final class RegionChecks {

    /** Beyond it a tangent plane's lengths are off by more than a good sensor's noise. */
    static final double LARGEST_ACROSS_METRES = 100_000;

    /** Regions that share corners share no area but that of rounding. */
    static final double OVERLAP_TOLERANCE_SQUARE_METRES = 1;

    /** Nearer a pole, edges straight in longitude and latitude are no edges that anybody means. */
    static final double LARGEST_LATITUDE = 89;

    /** A grid of unseen objects beyond this is computed at every scan for nothing. */
    static final long LARGEST_GRID_CELLS = 1_000_000;

    /** Each of them is aged at every scan of the sensor. */
    static final long LARGEST_CLUTTER_CELLS = 40_000;

    private final Faults faults;

    RegionChecks(Faults faults) {
        this.faults = faults;
    }

    /**
     * Size, latitude, slivers and overlaps. A region whose mean width (twice area over outline) is less than a gate of
     * its most exact sensor is a sliver: no object could be told to be in it.
     *
     * @return the regions that are right by themselves
     */
    List<RegionDraft> shapes(List<RegionDraft> regions, List<SensorSettings> sensors, double gateSigmas) {
        double leastSigma = leastSigma(sensors);
        List<RegionDraft> sound = new ArrayList<>();
        for (RegionDraft region : regions) {
            if (isSound(region, gateSigmas * leastSigma)) {
                sound.add(region);
            }
        }
        for (int i = 0; i < sound.size(); i++) {
            for (int j = 0; j < i; j++) {
                overlap(sound.get(j), sound.get(i));
            }
        }
        return sound;
    }

    private boolean isSound(RegionDraft region, double leastWidth) {
        GeoPolygon core = region.core();
        if (core.outer().stream().anyMatch(corner -> Math.abs(corner.latitude()) > LARGEST_LATITUDE)) {
            faults.add(region.at(), "", "the region is nearer than a degree to a pole, must not be");
            return false;
        }
        double across = PolygonShape.acrossMetres(core);
        if (across > LARGEST_ACROSS_METRES) {
            faults.add(
                    region.at(),
                    "",
                    "the region is " + kilometres(across) + " km across, must be at most "
                            + kilometres(LARGEST_ACROSS_METRES) + " km");
            return false;
        }
        double width = new PolygonShape(core, core.outer().get(0)).meanWidthMetres();
        if (width < leastWidth) {
            faults.add(
                    region.at(),
                    "",
                    "the region is a sliver with a mean width of " + tenths(width) + " m, must be at least "
                            + tenths(leastWidth) + " m, gateSigmas times the least sensor sigma");
            return false;
        }
        return true;
    }

    private void overlap(RegionDraft first, RegionDraft second) {
        LatLon middle = first.core().outer().get(0);
        PolygonShape shape = new PolygonShape(first.core(), middle);
        double overlap = shape.overlapSquareMetres(new PolygonShape(second.core(), middle));
        if (overlap > OVERLAP_TOLERANCE_SQUARE_METRES) {
            faults.add(
                    second.at(),
                    "",
                    "the region " + second.name() + " overlaps " + first.name() + " by " + tenths(overlap)
                            + " m2, must not: neighbours have the same corners along the edge that they share");
        }
    }

    /** The grid of each region, apron included. */
    void grids(List<RegionDraft> drafts, List<RegionSettings> regions) {
        for (int i = 0; i < regions.size(); i++) {
            RegionSettings region = regions.get(i);
            PlaneArea area = PlaneArea.of(region.core(), new LocalPlane(region.core().middle()));
            double cell = region.unseenCellMetres();
            double columns = (area.maxEast() - area.minEast() + 2 * region.apronMetres()) / cell;
            double rows = (area.maxNorth() - area.minNorth() + 2 * region.apronMetres()) / cell;
            if (columns * rows > LARGEST_GRID_CELLS) {
                faults.add(
                        drafts.get(i).at(),
                        "",
                        "cells of " + Numbers.shortest(cell) + " m over the region and its apron of "
                                + tenths(region.apronMetres()) + " m are more than " + LARGEST_GRID_CELLS
                                + ", must be fewer: larger cells or a smaller apron");
            }
        }
    }

    /** The grid of learned clutter of each sensor in each region. */
    void clutterGrids(List<SensorSettings> sensors, Node sensorsNode, List<RegionSettings> regions) {
        for (SensorSettings sensor : sensors) {
            double cell = sensor.clutterLearning().cellMetres();
            boolean tooMany = sensor.clutterLearning().isOn() && regions.stream().anyMatch(region -> {
                PlaneArea area = PlaneArea.of(region.core(), new LocalPlane(region.core().middle()));
                double columns = (area.maxEast() - area.minEast() + 2 * region.apronMetres()) / cell;
                double rows = (area.maxNorth() - area.minNorth() + 2 * region.apronMetres()) / cell;
                return columns * rows > LARGEST_CLUTTER_CELLS;
            });
            if (tooMany) {
                Node settings = ((Node.Mapping) sensorsNode).entries().get(sensor.name());
                faults.add(
                        ((Node.Mapping) settings).entries().get("clutterLearning").at(),
                        "",
                        "cells of " + Numbers.shortest(cell) + " m over a region and its apron are more than "
                                + LARGEST_CLUTTER_CELLS + ", must be fewer: a larger cellMetres");
            }
        }
    }

    /**
     * Every sensor must see some of what some region hears.
     *
     * @param sensorsNode where the sensors were read from
     */
    void reaches(List<SensorSettings> sensors, Node sensorsNode, List<RegionSettings> regions) {
        for (SensorSettings sensor : sensors) {
            if (isWhole(sensor) && regions.stream().noneMatch(region -> isTouched(region, sensor))) {
                Node settings = ((Node.Mapping) sensorsNode).entries().get(sensor.name());
                faults.add(
                        ((Node.Mapping) settings).entries().get("reachMetres").at(),
                        Numbers.shortest(sensor.reachMetres()),
                        "must reach the apron of at least one region from where the sensor is");
            }
        }
    }

    /** Whether the sensor's place and reach were read without a fault. */
    private static boolean isWhole(SensorSettings sensor) {
        double place = sensor.position().map(p -> p.latitude() + p.longitude()).orElse(0.0);
        return !Double.isNaN(place + sensor.reachMetres());
    }

    private static boolean isTouched(RegionSettings region, SensorSettings sensor) {
        double near = region.apronMetres() + sensor.reachMetres();
        LatLon middle = region.core().middle();
        if (sensor.position().isPresent()) {
            LocalPlane plane = new LocalPlane(middle);
            PlanePoint at = plane.toPlane(sensor.position().get());
            return PlaneArea.of(region.core(), plane).signedDistanceMetres(at.eastMetres(), at.northMetres()) >= -near;
        }
        return sensor.roams().isEmpty()
                || new PolygonShape(region.core(), middle)
                                .distanceMetres(new PolygonShape(sensor.roams().get(), middle))
                        <= near;
    }

    private static double leastSigma(List<SensorSettings> sensors) {
        double least = Double.POSITIVE_INFINITY;
        for (SensorSettings sensor : sensors) {
            least = Math.min(least, Math.min(sensor.noise().alongSigmaMetres(), sensor.noise().acrossSigmaMetres()));
        }
        return sensors.isEmpty() ? 0 : least;
    }

    private static String kilometres(double metres) {
        return tenths(metres / 1000);
    }

    private static String tenths(double value) {
        return Numbers.shortest(Math.rint(value * 10) / 10);
    }
}
