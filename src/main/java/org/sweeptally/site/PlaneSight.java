package org.sweeptally.site;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.Obstacles;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.model.DetectionArea;
import org.sweeptally.model.FieldOfView;
import org.sweeptally.model.Sector;
import org.sweeptally.site.SightSettings.AreaSettings;
import org.sweeptally.site.SightSettings.SectorSettings;

/**
 * A sensor's field of view in a region's plane, from wherever it is; the last one is kept, since most sensors stand
 * still.
 */
public final class PlaneSight {

    private final SensorSettings sensor;
    private final LocalPlane plane;
    private final List<PlaneArea> shadows = new ArrayList<>();
    private final List<DetectionArea> areas = new ArrayList<>();
    private final Obstacles obstacles;

    private LatLon lastPosition;
    private Double lastHeading;
    private FieldOfView last;

    public PlaneSight(SensorSettings sensor, LocalPlane plane) {
        this.sensor = sensor;
        this.plane = plane;
        for (GeoPolygon shadow : sensor.sight().shadows()) {
            if (isFacing(shadow)) {
                shadows.add(PlaneArea.of(shadow, plane));
            }
        }
        for (AreaSettings area : sensor.sight().areas()) {
            if (isFacing(area.polygon())) {
                areas.add(new DetectionArea(PlaneArea.of(area.polygon(), plane), area.value(), area.isFactor()));
            }
        }
        obstacles = new Obstacles(sensor.sight().obstacles().stream()
                .filter(this::isFacing)
                .map(obstacle -> PlaneArea.rings(obstacle, plane))
                .toList());
    }

    /** What is on the other side of the earth is in nobody's way here. */
    private boolean isFacing(GeoPolygon polygon) {
        return polygon.outer().stream().noneMatch(corner -> Double.isNaN(plane.toPlane(corner).eastMetres()));
    }

    /** The settings that it was made from. */
    public SensorSettings sensor() {
        return sensor;
    }

    /**
     * What the sensor can see.
     *
     * @param position       where it is
     * @param headingDegrees where its platform points, clockwise from true north, or null
     */
    public FieldOfView from(LatLon position, Double headingDegrees) {
        if (last == null || !position.equals(lastPosition) || !same(headingDegrees, lastHeading)) {
            last = view(position, headingDegrees);
            lastPosition = position;
            lastHeading = headingDegrees;
        }
        return last;
    }

    private boolean same(Double one, Double other) {
        return !sensor.sight().sectorsFromHeading() || (one == null ? other == null : one.equals(other));
    }

    private FieldOfView view(LatLon position, Double headingDegrees) {
        PlanePoint eye = plane.toPlane(position);
        double reach = sensor.reachMetres();
        Optional<PlaneArea> open =
                Double.isNaN(eye.eastMetres()) ? Optional.empty() : obstacles.visibleFrom(eye, reach);
        double turned = StrictMath.toDegrees(plane.convergenceRadians(position));
        double heading = sensor.sight().sectorsFromHeading() && headingDegrees != null ? headingDegrees : 0;
        List<Sector> sectors = sensor.sight().sectors().stream()
                .map(sector -> sector(sector, heading - turned))
                .toList();
        return new FieldOfView(eye, sensor.sight().leastRangeMetres(), reach, sectors, shadows, open, areas);
    }

    private static Sector sector(SectorSettings sector, double turnDegrees) {
        return Sector.of(
                StrictMath.toRadians(sector.fromAzimuthDegrees() + turnDegrees),
                StrictMath.toRadians(sector.widthDegrees()));
    }
}
