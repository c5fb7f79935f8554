package org.sweeptally.region;

import java.util.ArrayList;
import java.util.Collections;
import java.util.List;
import java.util.NavigableMap;
import java.util.TreeMap;
import org.sweeptally.event.Detection;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Part;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.Reject;
import org.sweeptally.event.RejectReason;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/**
 * Finds the regions that a part concerns, and what each of them gets of it: the detections of its core and apron, with
 * their original indexes. A part that closes its scan, makes a promise or could not be used goes to every region that
 * the sensor can see any of, emptied of what does not concern it and whatever its coverage: it moves their horizons.
 * Other parts that concern nobody go nowhere. A pure function of the site and the part.
 */
public final class PartRouter {

    /**
     * Where a part goes.
     *
     * @param byRegion    what each region gets, by the region's name
     * @param beyondReach how many detections lay beyond their sensor's reach
     * @param outside     how many others lay outside every region and its apron
     * @param reject      the detections that are rejected for it, or null where the site does not ask
     */
    public record Routed(NavigableMap<String, PartBody> byRegion, int beyondReach, int outside, Reject reject) {}

    private final Site site;
    private final List<RegionArea> areas;
    private final NavigableMap<String, SensorSettings> sensors = new TreeMap<>();
    private final NavigableMap<String, List<RegionArea>> seenBySensor = new TreeMap<>();

    public PartRouter(Site site) {
        this.site = site;
        this.areas = site.regions().stream().map(RegionArea::new).toList();
        for (SensorSettings sensor : site.sensors()) {
            sensors.put(sensor.name(), sensor);
            seenBySensor.put(sensor.name(), areas.stream().filter(area -> area.isTouchedBy(sensor)).toList());
        }
    }

    /** The regions whose horizons wait for a sensor, by name. */
    public List<String> regionsSeenBy(String sensor) {
        return seenBySensor.getOrDefault(sensor, List.of()).stream().map(RegionArea::name).sorted().toList();
    }

    /**
     * Routes a part.
     *
     * @param entry whose body is a whole {@link PartBody}, of a sensor of the site, with a position if the sensor moves
     */
    public Routed route(LogEntry entry) {
        PartBody whole = ScanParts.bodyOf(entry);
        SensorSettings sensor = sensors.get(whole.getPart().getSensor());
        if (sensor == null) {
            throw new IllegalArgumentException("site " + site.name() + " has no sensor " + whole.getPart().getSensor());
        }
        Sorted sorted = whole.getUnusable() ? new Sorted() : sort(whole.getPart(), sensor);
        NavigableMap<String, PartBody> byRegion = new TreeMap<>();
        for (RegionArea area : seenBySensor.get(sensor.name())) {
            List<Detection> heard = sorted.byRegion.getOrDefault(area.name(), List.of());
            if (!heard.isEmpty() || concernsAll(whole)) {
                byRegion.put(area.name(), with(whole, heard));
            }
        }
        return new Routed(
                Collections.unmodifiableNavigableMap(byRegion),
                sorted.beyondReach.size(),
                sorted.outside.size(),
                site.rejectOutside() ? reject(entry, sorted, sensor) : null);
    }

    private static boolean concernsAll(PartBody whole) {
        return whole.getPart().getClosesScan() || whole.getPart().getPromise() != null || whole.getUnusable();
    }

    private static PartBody with(PartBody whole, List<Detection> heard) {
        Part sent = whole.getPart();
        Part part = new Part(
                sent.getSensor(),
                sent.getScanTimeMicros(),
                sent.getScan(),
                sent.getPart(),
                sent.getClosesScan(),
                sent.getPromise(),
                sent.getCoverage(),
                sent.getSensorPosition(),
                sent.getSensorHeadingDegrees(),
                sent.getSensorEastMetresPerSecond(),
                sent.getSensorNorthMetresPerSecond(),
                heard);
        return new PartBody(part, whole.getDetectionsSent(), whole.getUnusable(), whole.getWholeDigest());
    }

    /** Detections by where they lie. */
    private static final class Sorted {
        final NavigableMap<String, List<Detection>> byRegion = new TreeMap<>();
        final List<Integer> beyondReach = new ArrayList<>();
        final List<Integer> outside = new ArrayList<>();
    }

    private Sorted sort(Part part, SensorSettings sensor) {
        Sorted sorted = new Sorted();
        if (part.getDetections().isEmpty()) {
            return sorted;
        }
        LocalPlane sensorPlane = new LocalPlane(positionOf(part, sensor));
        for (Detection detection : part.getDetections()) {
            LatLon place = MeasurementConversion.placeOf(detection, part, sensorPlane, sensor);
            if (distance(sensorPlane.toPlane(place)) > sensor.reachMetres()) {
                sorted.beyondReach.add(detection.getIndex());
            } else if (!give(detection, place, sensor, sorted)) {
                sorted.outside.add(detection.getIndex());
            }
        }
        return sorted;
    }

    private static LatLon positionOf(Part part, SensorSettings sensor) {
        return sensor.position().orElseGet(() -> {
            if (part.getSensorPosition() == null) {
                throw new IllegalArgumentException(
                        "sensor " + sensor.name() + " moves, and its part does not say where it was");
            }
            return ScanConversion.place(part.getSensorPosition());
        });
    }

    private static double distance(PlanePoint point) {
        return Math.sqrt(
                point.eastMetres() * point.eastMetres() + point.northMetres() * point.northMetres());
    }

    private boolean give(Detection detection, LatLon place, SensorSettings sensor, Sorted sorted) {
        boolean given = false;
        for (RegionArea area : seenBySensor.get(sensor.name())) {
            if (area.hears(place)) {
                sorted.byRegion.computeIfAbsent(area.name(), name -> new ArrayList<>()).add(detection);
                given = true;
            }
        }
        return given;
    }

    private static Reject reject(LogEntry entry, Sorted sorted, SensorSettings sensor) {
        List<Integer> indexes = new ArrayList<>(sorted.beyondReach);
        indexes.addAll(sorted.outside);
        if (indexes.isEmpty()) {
            return null;
        }
        Collections.sort(indexes);
        int sent = ScanParts.partOf(entry).getDetections().size();
        String sentence = "has " + sorted.beyondReach.size() + " of " + sent
                + " detections beyond the sensor's reach of "
                + sensor.reachMetres() + " m, and " + sorted.outside.size()
                + " more outside every region and its apron; rejectOutside asks to say so";
        boolean all = indexes.size() == sent;
        return Rejects.some(null, entry, all, RejectReason.OUTSIDE, sentence, indexes);
    }
}
