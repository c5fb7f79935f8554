package org.sweeptally.model;

import java.util.List;

/**
 * Probability of detection by distance from the sensor: linear between the points given, constant
 * before the first and after the last. The reach that ends it belongs to the {@link SensorModel}.
 */
public record DetectionProfile(List<Point> points) {

    /** Probability of detection, 0 to 1, at a distance in metres. */
    public record Point(double rangeMetres, double probability) {}

    public DetectionProfile {
        points = List.copyOf(points);
        if (points.isEmpty()) {
            throw new IllegalArgumentException("a detection profile needs a point");
        }
    }

    /** The same probability at every distance. */
    public static DetectionProfile constant(double probability) {
        return new DetectionProfile(List.of(new Point(0, probability)));
    }

    /** Probability of detection at a distance in metres. */
    public double at(double rangeMetres) {
        Point before = points.get(0);
        if (rangeMetres <= before.rangeMetres()) {
            return before.probability();
        }
        for (int i = 1; i < points.size(); i++) {
            Point after = points.get(i);
            if (rangeMetres <= after.rangeMetres()) {
                double share = (rangeMetres - before.rangeMetres()) / (after.rangeMetres() - before.rangeMetres());
                return before.probability() + share * (after.probability() - before.probability());
            }
            before = after;
        }
        return before.probability();
    }

    /** By how much the probability differs between two distances in metres: its greatest less its least. */
    double spread(double fromMetres, double toMetres) {
        double least = Math.min(at(fromMetres), at(toMetres));
        double greatest = Math.max(at(fromMetres), at(toMetres));
        for (Point point : points) {
            if (point.rangeMetres() > fromMetres && point.rangeMetres() < toMetres) {
                least = Math.min(least, point.probability());
                greatest = Math.max(greatest, point.probability());
            }
        }
        return greatest - least;
    }
}
