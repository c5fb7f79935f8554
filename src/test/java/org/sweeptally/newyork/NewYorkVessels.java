package org.sweeptally.newyork;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.SortedMap;
import java.util.TreeMap;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlanePoint;

/**
 * Where vessels were in New York harbour during 25 minutes of 2022: reports of their own about every 70 s, from the
 * nationwide archive of the US Coast Guard, BOEM and NOAA. Between two reports a vessel sails a smooth curve (cubic
 * Hermite, with the mean velocity over the reports beside). Of the many that are moored only those are kept that lie
 * apart from each other, since a radar would not tell the others apart either. The reports lie beside the checkout, in
 * {@code ../shared} or wherever the system property {@code sweeptally.shared} says, and are never copied into it.
 */
final class NewYorkVessels {

    /** Slower than this in the median is moored, knots. */
    private static final double MOORED_KNOTS = 0.5;

    /** Least distance between two moored vessels that are kept, metres. */
    private static final double APART_METRES = 500;

    private record Report(double seconds, double east, double north, double knots) {}

    private final SortedMap<Integer, List<Report>> vessels = new TreeMap<>();

    /** @param plane in which places are given */
    NewYorkVessels(Path file, LocalPlane plane) throws IOException {
        List<String> lines = Files.readAllLines(file);
        for (String line : lines.subList(1, lines.size())) {
            String[] fields = line.split(",");
            PlanePoint at = plane.toPlane(new LatLon(Double.parseDouble(fields[3]), Double.parseDouble(fields[2])));
            List<Report> reports = vessels.computeIfAbsent(Integer.parseInt(fields[1]), key -> new ArrayList<>());
            double seconds = Double.parseDouble(fields[0]);
            if (reports.isEmpty() || seconds > reports.get(reports.size() - 1).seconds()) {
                reports.add(new Report(seconds, at.eastMetres(), at.northMetres(), Double.parseDouble(fields[4])));
            }
        }
        vessels.values().removeIf(reports -> reports.size() < 2);
        thinMoored();
    }

    /** Where they lie, if they are there. */
    static Path file() {
        return Path.of(System.getProperty("sweeptally.shared", "../shared"), "data", "ais_new_york", "new_york.csv");
    }

    /** [east, north, east velocity, north velocity] of each vessel that has reported before and will again. */
    SortedMap<Integer, double[]> at(double seconds) {
        SortedMap<Integer, double[]> places = new TreeMap<>();
        vessels.forEach((vessel, reports) -> {
            if (seconds >= reports.get(0).seconds() && seconds <= reports.get(reports.size() - 1).seconds()) {
                places.put(vessel, between(reports, seconds));
            }
        });
        return places;
    }

    private void thinMoored() {
        List<Report> kept = new ArrayList<>();
        vessels.values().removeIf(reports -> {
            double[] knots = reports.stream().mapToDouble(Report::knots).sorted().toArray();
            if (knots[knots.length / 2] >= MOORED_KNOTS) {
                return false;
            }
            Report here = reports.get(0);
            boolean crowded = kept.stream().anyMatch(other ->
                    Math.hypot(other.east() - here.east(), other.north() - here.north()) < APART_METRES);
            if (!crowded) {
                kept.add(here);
            }
            return crowded;
        });
    }

    private static double[] between(List<Report> reports, double seconds) {
        int i = 1;
        while (i < reports.size() - 1 && reports.get(i).seconds() < seconds) {
            i++;
        }
        Report a = reports.get(i - 1);
        Report b = reports.get(i);
        double step = b.seconds() - a.seconds();
        double[] va = velocity(reports, i - 1);
        double[] vb = velocity(reports, i);
        double u = (seconds - a.seconds()) / step;
        double[] east = hermite(u, step, a.east(), b.east(), va[0], vb[0]);
        double[] north = hermite(u, step, a.north(), b.north(), va[1], vb[1]);
        return new double[] {east[0], north[0], east[1], north[1]};
    }

    /** Mean velocity from the report before to the one after; at the ends, to the only one beside. */
    private static double[] velocity(List<Report> reports, int i) {
        Report before = reports.get(Math.max(0, i - 1));
        Report after = reports.get(Math.min(reports.size() - 1, i + 1));
        double step = after.seconds() - before.seconds();
        return new double[] {(after.east() - before.east()) / step, (after.north() - before.north()) / step};
    }

    /** Place and velocity on the cubic with these ends and velocities there. */
    private static double[] hermite(
            double u, double step, double from, double to, double velocityFrom, double velocityTo) {
        double way = to - from;
        double a = step * velocityFrom;
        double b = step * velocityTo;
        double square = 3 * way - 2 * a - b;
        double cube = a + b - 2 * way;
        return new double[] {
            from + u * (a + u * (square + u * cube)), (a + u * (2 * square + u * 3 * cube)) / step
        };
    }
}
