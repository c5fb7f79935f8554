package org.sweeptally.cli;

import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.TreeMap;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.model.FieldOfView;
import org.sweeptally.model.Look;
import org.sweeptally.region.PartRouter;
import org.sweeptally.site.PlaneSight;
import org.sweeptally.site.RegionSettings;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/** A region with its sensors in its plane, as a forecast needs it. A sensor that moves is taken to be in the middle. */
final class SiteScene {

    /** Points along a side of the raster on which shares of the region and a typical place are sought. */
    private static final int RASTER = 41;

    private final Site site;
    private final RegionSettings region;
    private final LocalPlane plane;
    private final PlaneArea core;
    private final Map<String, PlaneSight> sights = new TreeMap<>();

    SiteScene(Site site, RegionSettings region) {
        this.site = site;
        this.region = region;
        this.plane = new LocalPlane(region.core().middle());
        this.core = PlaneArea.of(region.core(), plane);
    }

    Site site() {
        return site;
    }

    RegionSettings region() {
        return region;
    }

    PlaneArea core() {
        return core;
    }

    /** Sensors that can see any of what the region hears, by name: it waits for these. */
    List<SensorSettings> sensors() {
        PartRouter router = new PartRouter(site);
        return site.sensors().stream()
                .filter(sensor -> router.regionsSeenBy(sensor.name()).contains(region.name()))
                .toList();
    }

    PlanePoint positionOf(SensorSettings sensor) {
        return sensor.position().map(plane::toPlane).orElse(new PlanePoint(0, 0));
    }

    /** A look over all that a sensor can see; one whose sectors count from its heading is taken to head north. */
    Look look(SensorSettings sensor) {
        return new Look(sensor.model(), view(sensor), Optional.empty(), core, region.apronMetres());
    }

    private FieldOfView view(SensorSettings sensor) {
        return sights.computeIfAbsent(sensor.name(), name -> new PlaneSight(sensor, plane))
                .from(sensor.position().orElse(plane.origin()), null);
    }

    /**
     * Shares of the core's area, 0 to 1.
     *
     * @param reached within the sensor's ring and sectors
     * @param hidden  of all, what is within them and in shadow or behind an obstacle
     */
    record Shares(double reached, double hidden) {

        double seen() {
            return reached - hidden;
        }
    }

    Shares shares(SensorSettings sensor) {
        FieldOfView view = view(sensor);
        double reached = share(view::looksAt);
        return new Shares(reached, reached - share(view::sees));
    }

    /** Share of the core's area that no sensor sees. */
    double shareUnseen() {
        List<FieldOfView> views = sensors().stream().map(this::view).toList();
        return share((east, north) -> views.stream().noneMatch(view -> view.sees(east, north)));
    }

    private interface PlaceTest {
        boolean holds(double east, double north);
    }

    private double share(PlaceTest test) {
        int inside = 0;
        int hits = 0;
        for (int i = 0; i < RASTER * RASTER; i++) {
            PlanePoint point = rasterPoint(i);
            if (core.contains(point.eastMetres(), point.northMetres())) {
                inside++;
                hits += test.holds(point.eastMetres(), point.northMetres()) ? 1 : 0;
            }
        }
        return inside == 0 ? 0 : (double) hits / inside;
    }

    /** The place nearest to the middle that some sensor sees; empty if none sees any of the core. */
    Optional<PlanePoint> typicalPlace() {
        Optional<PlanePoint> best = Optional.empty();
        double least = Double.POSITIVE_INFINITY;
        List<Look> looks = sensors().stream().map(this::look).toList();
        for (int i = 0; i < RASTER * RASTER; i++) {
            PlanePoint point = rasterPoint(i);
            double square = point.eastMetres() * point.eastMetres() + point.northMetres() * point.northMetres();
            boolean seen = core.contains(point.eastMetres(), point.northMetres()) && looks.stream()
                    .anyMatch(look -> look.probabilityOfDetection(point.eastMetres(), point.northMetres()) > 0);
            if (seen && square < least) {
                least = square;
                best = Optional.of(point);
            }
        }
        return best;
    }

    private PlanePoint rasterPoint(int i) {
        double u = (i % RASTER + 0.5) / RASTER;
        double v = (i / RASTER + 0.5) / RASTER;
        return new PlanePoint(
                core.minEast() + u * (core.maxEast() - core.minEast()),
                core.minNorth() + v * (core.maxNorth() - core.minNorth()));
    }
}
