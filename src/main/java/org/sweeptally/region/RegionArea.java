package org.sweeptally.region;

import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.site.RegionSettings;
import org.sweeptally.site.SensorSettings;

/** Where a region is: its core, its apron, and the plane in which it computes, which touches in the core's middle. */
final class RegionArea {

    private final RegionSettings settings;
    private final LocalPlane plane;
    private final PlaneArea core;

    RegionArea(RegionSettings settings) {
        this(settings, new LocalPlane(settings.core().middle()));
    }

    private RegionArea(RegionSettings settings, LocalPlane plane) {
        this(settings, plane, PlaneArea.of(settings.core(), plane));
    }

    private RegionArea(RegionSettings settings, LocalPlane plane, PlaneArea core) {
        this.settings = settings;
        this.plane = plane;
        this.core = core;
    }

    String name() {
        return settings.name();
    }

    LocalPlane plane() {
        return plane;
    }

    PlaneArea core() {
        return core;
    }

    double apronMetres() {
        return settings.apronMetres();
    }

    /** Whether a place is the region's own. */
    boolean owns(LatLon place) {
        return settings.core().contains(place);
    }

    /** Whether a place is in the core or its apron. */
    boolean hears(LatLon place) {
        PlanePoint point = plane.toPlane(place);
        return core.signedDistanceMetres(point.eastMetres(), point.northMetres()) >= -settings.apronMetres();
    }

    /**
     * Whether a sensor can see any of what the region hears. The region waits for exactly these sensors, and gets every
     * closing part of theirs.
     */
    boolean isTouchedBy(SensorSettings sensor) {
        double near = settings.apronMetres() + sensor.reachMetres();
        if (sensor.position().isPresent()) {
            PlanePoint at = plane.toPlane(sensor.position().get());
            return core.signedDistanceMetres(at.eastMetres(), at.northMetres()) >= -near;
        }
        return sensor.roams().isEmpty() || isNear(sensor.roams().get(), near);
    }

    private boolean isNear(GeoPolygon roams, double metres) {
        boolean facing = roams.outer().stream().noneMatch(corner -> Double.isNaN(plane.toPlane(corner).eastMetres()));
        if (!facing) {
            // Part of it is on the other side of the earth: it may pass anywhere on its way there.
            return true;
        }
        return PolygonDistance.between(settings.core(), core, roams, PlaneArea.of(roams, plane), plane) <= metres;
    }

    /** Whether the other settings of the region leave its core where it is. */
    boolean isWhere(RegionSettings other) {
        return settings.core().outer().equals(other.core().outer())
                && settings.core().holes().equals(other.core().holes());
    }

    /** The same core, perhaps with another apron or other cells. */
    RegionArea with(RegionSettings other) {
        return new RegionArea(other, plane, core);
    }

    RegionSettings settings() {
        return settings;
    }
}
