package org.sweeptally.demo;

import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Collection;
import java.util.Deque;
import java.util.List;
import java.util.NavigableMap;
import java.util.Set;
import java.util.TreeMap;
import java.util.TreeSet;
import org.sweeptally.event.Count;
import org.sweeptally.event.Track;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.score.Ospa;
import org.sweeptally.site.RegionSettings;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/**
 * One region's picture as a subscriber puts it together, scan by scan, and scores it. Tracks and counts come on topics
 * of their own, in any order between the two: a scan is whole when its count is there and as many tracks as that says.
 */
final class RegionPicture {

    private final String region;
    private final GeoPolygon core;
    private final LocalPlane plane;
    private final Ospa ospa;
    private final EstuaryWorld world;
    /** Sensors that see the whole region, so that at their scans detections at face value have a fair chance. */
    private final Set<String> covering = new TreeSet<>();
    private final Deque<Count> counts = new ArrayDeque<>();
    private final NavigableMap<Long, List<Track>> tracks = new TreeMap<>();

    private long detections;
    private long rejects;
    private long births;
    private long ends;
    private long scans;
    private long scoredScans;
    private double ospaSum;
    private double faceValueSum;
    private Count last;

    RegionPicture(Site site, RegionSettings region, Ospa ospa, EstuaryWorld world) {
        this.region = region.name();
        this.core = region.core();
        this.plane = new LocalPlane(core.middle());
        this.ospa = ospa;
        this.world = world;
        site.sensors().stream().filter(this::covers).map(SensorSettings::name).forEach(covering::add);
    }

    /** The cores of the estuary are convex, so that their corners tell. */
    private boolean covers(SensorSettings sensor) {
        LocalPlane sensorPlane = new LocalPlane(sensor.position().orElseThrow());
        return core.outer().stream().map(sensorPlane::toPlane).allMatch(corner ->
                Math.sqrt(corner.eastMetres() * corner.eastMetres() + corner.northMetres() * corner.northMetres())
                        <= sensor.reachMetres());
    }

    void heard(int heardDetections) {
        detections += heardDetections;
    }

    void reject() {
        rejects++;
    }

    void birth() {
        births++;
    }

    void end() {
        ends++;
    }

    void track(Track track) {
        tracks.computeIfAbsent(track.getSequence(), sequence -> new ArrayList<>()).add(track);
        takeWholeScans();
    }

    void count(Count count) {
        counts.add(count);
        takeWholeScans();
    }

    private void takeWholeScans() {
        while (!counts.isEmpty()) {
            List<Track> ofScan = tracks.getOrDefault(counts.peek().getSequence(), List.of());
            if (ofScan.size() < counts.peek().getTracks()) {
                return;
            }
            last = counts.remove();
            tracks.remove(last.getSequence());
            scans++;
            score(last, ofScan);
        }
    }

    private void score(Count count, List<Track> shown) {
        if (!covering.contains(count.getSensor())) {
            return;
        }
        double[][] truth = points(world.truth(count.getTimeMicros()));
        double[][] picture = points(
                shown.stream().map(track -> new LatLon(track.getLatitude(), track.getLongitude())).toList());
        double[][] faceValue = points(
                world.faceValue(new EstuaryWorld.Scan(count.getScanTimeMicros(), count.getSensor())));
        scoredScans++;
        ospaSum += ospa.between(truth, picture).distance();
        faceValueSum += ospa.between(truth, faceValue).distance();
    }

    /** Those of some places that are in the core. */
    private double[][] points(Collection<LatLon> places) {
        return places.stream()
                .filter(core::contains)
                .map(plane::toPlane)
                .map(RegionPicture::point)
                .toArray(double[][]::new);
    }

    private static double[] point(PlanePoint point) {
        return new double[] {point.eastMetres(), point.northMetres()};
    }

    /** The last whole scan's count, null before the first. */
    Count last() {
        return last;
    }

    /** How many are truly in the region at the last whole scan. */
    int trueNumber() {
        return last == null ? 0 : points(world.truth(last.getTimeMicros())).length;
    }

    long scoredScans() {
        return scoredScans;
    }

    double ospaSum() {
        return ospaSum;
    }

    double faceValueSum() {
        return faceValueSum;
    }

    RegionRow row() {
        long scored = Math.max(1, scoredScans);
        return new RegionRow(
                region,
                scans,
                detections,
                rejects,
                births,
                ends,
                last == null ? 0 : last.getTracks(),
                last == null ? 0 : last.getAll().getMean(),
                last == null ? 0 : last.getAll().getLeast(),
                last == null ? 0 : last.getAll().getMost(),
                trueNumber(),
                scoredScans,
                ospaSum / scored,
                faceValueSum / scored);
    }
}
