package org.sweeptally.demo;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import org.sweeptally.event.Detection;
import org.sweeptally.event.GeodeticFix;
import org.sweeptally.event.OffsetFix;
import org.sweeptally.event.Part;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.site.SensorSettings;

/** A sensor of the invented estuary: it sees what the site file says it would, with the errors that it says. */
final class ShoreSensor {

    /** How a sensor writes down where something is. */
    enum Writing { PLACES, OFFSETS }

    private final SensorSettings settings;
    private final Writing writing;
    private final int detectionsPerPart;
    private final LocalPlane plane;
    private final Chance chance;

    ShoreSensor(SensorSettings settings, Writing writing, int detectionsPerPart, Chance chance) {
        this.settings = settings;
        this.writing = writing;
        this.detectionsPerPart = detectionsPerPart;
        this.plane = new LocalPlane(settings.position().orElseThrow());
        this.chance = chance;
    }

    String name() {
        return settings.name();
    }

    double intervalSeconds() {
        return settings.intervalSeconds();
    }

    /**
     * A scan as it would be sent.
     *
     * @param parts  the last one closes the scan
     * @param places where its detections are, at face value
     */
    record Sent(List<Part> parts, List<LatLon> places) {}

    /** One look at what is there, and at what is not. */
    Sent scan(List<LatLon> there, long scanTimeMicros, long number) {
        List<PlanePoint> seen = new ArrayList<>();
        for (LatLon place : there) {
            PlanePoint at = plane.toPlane(place);
            double range = range(at);
            boolean isSeen = range <= settings.reachMetres()
                    && chance.happens(settings.detectionProbability().at(range));
            if (isSeen) {
                seen.add(measured(at, range));
            }
        }
        for (int left = chance.poisson(settings.clutterPerScan()); left > 0; left--) {
            double range = settings.reachMetres() * Math.sqrt(chance.between(0, 1));
            double bearing = chance.between(0, 2 * StrictMath.PI);
            seen.add(new PlanePoint(range * StrictMath.sin(bearing), range * StrictMath.cos(bearing)));
        }
        seen.sort(Comparator.comparingDouble(PlanePoint::eastMetres)); // so that their order tells nothing
        return new Sent(parts(seen, scanTimeMicros, number), seen.stream().map(plane::toGeodetic).toList());
    }

    /** With the sensor's error along and across its line of sight. */
    private PlanePoint measured(PlanePoint at, double range) {
        double along = settings.noise().alongSigmaMetres() * chance.gaussian() / Math.max(range, 1);
        double across = settings.noise().acrossSigmaMetres() * chance.gaussian() / Math.max(range, 1);
        return new PlanePoint(
                at.eastMetres() + along * at.eastMetres() + across * at.northMetres(),
                at.northMetres() + along * at.northMetres() - across * at.eastMetres());
    }

    private List<Part> parts(List<PlanePoint> seen, long scanTimeMicros, long number) {
        List<Part> parts = new ArrayList<>();
        int from = 0;
        do {
            int to = Math.min(from + detectionsPerPart, seen.size());
            List<Detection> detections = new ArrayList<>();
            for (int i = from; i < to; i++) {
                detections.add(Detection.newBuilder()
                        .setIndex(i - from)
                        .setId(name().charAt(0) + "" + number + "-" + i)
                        .setMeasurement(written(seen.get(i)))
                        .build());
            }
            parts.add(Part.newBuilder()
                    .setSensor(name())
                    .setScanTimeMicros(scanTimeMicros)
                    .setScan(number)
                    .setPart(parts.size())
                    .setClosesScan(to == seen.size())
                    .setDetections(detections)
                    .build());
            from = to;
        } while (from < seen.size());
        return parts;
    }

    private Object written(PlanePoint at) {
        if (writing == Writing.OFFSETS) {
            return new OffsetFix(at.eastMetres(), at.northMetres());
        }
        LatLon place = plane.toGeodetic(at);
        return new GeodeticFix(place.latitude(), place.longitude());
    }

    private static double range(PlanePoint at) {
        return Math.sqrt(at.eastMetres() * at.eastMetres() + at.northMetres() * at.northMetres());
    }
}
