package org.sweeptally.region;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.NavigableMap;
import java.util.Optional;
import java.util.TreeMap;
import java.util.function.Function;
import org.sweeptally.event.Coverage;
import org.sweeptally.event.Detection;
import org.sweeptally.event.GeoPoint;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Part;
import org.sweeptally.filter.Observation;
import org.sweeptally.filter.Scan;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.model.FieldOfView;
import org.sweeptally.model.Look;
import org.sweeptally.model.LookCoverage;
import org.sweeptally.site.PlaneSight;
import org.sweeptally.site.SensorSettings;

/**
 * Turns the parts of a scan, as they were sent, into what the filter of a region takes: places in the region's plane,
 * ordered by part and index, and the look that they come from.
 */
final class ScanConversion {

    private final RegionArea area;
    private final NavigableMap<String, PlaneSight> sights = new TreeMap<>();

    ScanConversion(RegionArea area) {
        this.area = area;
    }

    /**
     * The scan in the region's plane; empty if its sensor moves and no part says where it was.
     *
     * @param sensor the settings of the scan's sensor that hold when it takes effect
     */
    Optional<Scan> convert(ScanParts scan, SensorSettings sensor) {
        return sensor.position()
                .or(() -> spoken(scan, Part::getSensorPosition).map(ScanConversion::place))
                .map(position -> new Scan(
                        scan.sensor(),
                        scan.scanTimeMicros(),
                        look(scan, sensor, position),
                        observations(scan, sensor, position)));
    }

    private Look look(ScanParts scan, SensorSettings sensor, LatLon position) {
        Optional<LookCoverage> coverage = spoken(scan, Part::getCoverage).map(c -> coverage(c, position));
        FieldOfView view = sightOf(sensor).from(position, spoken(scan, Part::getSensorHeadingDegrees).orElse(null));
        return new Look(sensor.model(), view, coverage, area.core(), area.apronMetres());
    }

    private PlaneSight sightOf(SensorSettings sensor) {
        PlaneSight known = sights.get(sensor.name());
        if (known == null || !known.sensor().equals(sensor)) {
            known = new PlaneSight(sensor, area.plane());
            sights.put(sensor.name(), known);
        }
        return known;
    }

    /**
     * What the parts say of the whole look: the closing part has the word, because every region hears it; where it says
     * nothing, the first part that does.
     */
    private static <T> Optional<T> spoken(ScanParts scan, Function<Part, T> word) {
        T first = null;
        for (LogEntry entry : scan.entries()) {
            Part part = ScanParts.partOf(entry);
            T said = word.apply(part);
            if (said != null && part.getClosesScan()) {
                return Optional.of(said);
            }
            first = first == null ? said : first;
        }
        return Optional.ofNullable(first);
    }

    private LookCoverage coverage(Coverage coverage, LatLon position) {
        if (coverage.getArea() != null && !isFacing(coverage.getArea())) {
            return LookCoverage.NOTHING;
        }
        double from = 0;
        double width = 2 * StrictMath.PI;
        if (coverage.getFromAzimuthDegrees() != null) {
            double turned = area.plane().convergenceRadians(position);
            from = StrictMath.toRadians(coverage.getFromAzimuthDegrees()) - turned;
            double degrees = coverage.getToAzimuthDegrees() - coverage.getFromAzimuthDegrees();
            degrees -= 360 * Math.floor(degrees / 360);
            width = degrees == 0 ? width : StrictMath.toRadians(degrees);
        }
        return new LookCoverage(
                coverage.getFromMetres() == null ? 0 : coverage.getFromMetres(),
                coverage.getToMetres() == null ? Double.POSITIVE_INFINITY : coverage.getToMetres(),
                from,
                width,
                Optional.ofNullable(coverage.getArea()).map(this::planeArea));
    }

    private PlaneArea planeArea(List<GeoPoint> corners) {
        List<LatLon> ring = corners.stream().map(ScanConversion::place).toList();
        return PlaneArea.of(new GeoPolygon(ring, List.of()), area.plane());
    }

    /** Whether all of an area is on the side of the earth that the region's plane touches. */
    private boolean isFacing(List<GeoPoint> corners) {
        return corners.stream()
                .noneMatch(corner -> Double.isNaN(area.plane().toPlane(place(corner)).eastMetres()));
    }

    private List<Observation> observations(ScanParts scan, SensorSettings sensor, LatLon position) {
        List<Observation> observations = new ArrayList<>(scan.detections());
        LocalPlane sensorPlane = new LocalPlane(position);
        for (LogEntry entry : scan.entries()) {
            Part part = ScanParts.partOf(entry);
            // A moving sensor may be elsewhere by the next part, so each part's own position counts.
            boolean elsewhere = sensor.position().isEmpty() && part.getSensorPosition() != null;
            LatLon at = elsewhere ? place(part.getSensorPosition()) : position;
            LocalPlane plane = at.equals(position) ? sensorPlane : new LocalPlane(at);
            MeasurementConversion conversion = new MeasurementConversion(area.plane(), plane, sensor);
            for (Detection detection : ordered(part.getDetections())) {
                long seen = detection.getTimeMicros() == null ? part.getScanTimeMicros() : detection.getTimeMicros();
                long logSeen = Micros.plus(seen, sensor.timeOffsetMicros());
                double lag = Micros.toSeconds(scan.logTimeMicros() - logSeen);
                observations.add(new Observation(
                        conversion.convert(detection, part, lag),
                        part.getPart(),
                        detection.getIndex(),
                        detection.getId(),
                        detection.getDeclaredIdentity()));
            }
        }
        return observations;
    }

    private static List<Detection> ordered(List<Detection> detections) {
        return detections.stream()
                .sorted(Comparator.comparingInt(Detection::getIndex))
                .toList();
    }

    static LatLon place(GeoPoint point) {
        return new LatLon(point.getLatitude(), point.getLongitude());
    }
}
