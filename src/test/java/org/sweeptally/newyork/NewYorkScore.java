package org.sweeptally.newyork;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Set;
import java.util.SortedMap;
import java.util.TreeMap;
import java.util.TreeSet;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.score.OptimalAssignment;
import org.sweeptally.score.Ospa;

/**
 * A picture against the vessels that are in the region and in reach.
 *
 * @param ospaMetres      mean OSPA distance (Schuhmacher, Vo and Vo 2008; order 1) after the first minute
 * @param placeMetres     mean distance of vessels from the objects assigned to them, where nearer than the cut
 * @param births          births published
 * @param ends            ends published
 * @param appearances     how often a vessel came into the region, those there at the beginning included
 * @param departures      how often one left it
 * @param identityChanges how often a vessel was shown under another identity than before, all vessels together
 * @param vessels         that were shown at some time
 * @param trueMean        vessels in the region, mean over the scans
 * @param expectedMean    expected number of objects, mean over the scans
 * @param stillWrong      share of shown objects whose vessel moves (over 1 m/s) and that are said not to, or the
 *                        reverse (below 0.2 m/s); not a number where the picture does not say
 */
record NewYorkScore(
        double ospaMetres,
        double placeMetres,
        int births,
        int ends,
        int appearances,
        int departures,
        int identityChanges,
        int vessels,
        double trueMean,
        double expectedMean,
        double stillWrong) {

    static final double CUT_METRES = 300;

    private static final int SETTLING_SCANS = 20;
    private static final ObjectMapper JSON = new ObjectMapper();

    private record Shown(String object, double east, double north, JsonNode moving) {}

    static NewYorkScore of(Path records, NewYorkVessels vessels, GeoPolygon region, int scans) throws IOException {
        LocalPlane plane = new LocalPlane(SimulatedRadar.PLACE);
        PlaneArea core = PlaneArea.of(region, plane);
        SortedMap<Integer, List<Shown>> picture = picture(records, plane);
        SortedMap<Integer, Double> expected = new TreeMap<>();
        for (String line : Files.readAllLines(records.resolve("counts.ndjson"))) {
            JsonNode count = JSON.readTree(line);
            expected.put(
                    count.required("scan").asInt(),
                    count.required("all").required("mean").asDouble() + count.required("expectedUnseen").asDouble());
        }
        SortedMap<Integer, String> lastIdentity = new TreeMap<>();
        Ospa ospa = new Ospa(CUT_METRES, 1);
        double total = 0;
        double off = 0;
        int near = 0;
        int changes = 0;
        double trueTotal = 0;
        double expectedTotal = 0;
        int[] told = new int[2];
        Set<Integer> before = Set.of();
        int appearances = 0;
        int departures = 0;
        for (int scan = 0; scan < scans; scan++) {
            SortedMap<Integer, double[]> truth = vessels.at(SimulatedRadar.seconds(scan + 1));
            truth.values().removeIf(at -> !core.contains(at[0], at[1])
                    || Math.hypot(at[0], at[1]) > SimulatedRadar.REACH_METRES);
            appearances += missing(truth.keySet(), before);
            departures += missing(before, truth.keySet());
            before = new TreeSet<>(truth.keySet());
            if (scan < SETTLING_SCANS) {
                continue;
            }
            List<Shown> shown = picture.getOrDefault(scan, List.of());
            total += ospa.between(
                            truth.values().toArray(double[][]::new),
                            shown.stream().map(s -> new double[] {s.east(), s.north()}).toArray(double[][]::new))
                    .distance();
            trueTotal += truth.size();
            expectedTotal += expected.get(scan);
            double[][] distance = distances(List.copyOf(truth.values()), shown);
            int[] partner = OptimalAssignment.of(distance);
            int row = 0;
            for (var vessel : truth.entrySet()) {
                double d = distance[row][partner[row]];
                if (d < CUT_METRES) {
                    Shown object = shown.get(partner[row]);
                    off += d;
                    near++;
                    String last = lastIdentity.put(vessel.getKey(), object.object());
                    changes += last != null && !last.equals(object.object()) ? 1 : 0;
                    judge(vessel.getValue(), object.moving(), told);
                }
                row++;
            }
        }
        int counted = scans - SETTLING_SCANS;
        return new NewYorkScore(
                total / counted, off / near, lines(records, "births"), lines(records, "ends"),
                appearances, departures, changes, lastIdentity.size(), trueTotal / counted, expectedTotal / counted,
                told[1] == 0 ? Double.NaN : (double) told[0] / told[1]);
    }

    private static int missing(Set<Integer> some, Set<Integer> others) {
        return (int) some.stream().filter(one -> !others.contains(one)).count();
    }

    /** Counts the wrong ones first, all second. */
    private static void judge(double[] vessel, JsonNode moving, int[] told) {
        double speed = Math.hypot(vessel[2], vessel[3]);
        if (!moving.isNull() && (speed > 1 || speed < 0.2)) {
            told[0] += moving.asBoolean() == speed > 1 ? 0 : 1;
            told[1]++;
        }
    }

    private static SortedMap<Integer, List<Shown>> picture(Path records, LocalPlane plane) throws IOException {
        SortedMap<Integer, List<Shown>> picture = new TreeMap<>();
        for (String line : Files.readAllLines(records.resolve("tracks.ndjson"))) {
            JsonNode track = JSON.readTree(line);
            PlanePoint at = plane.toPlane(new LatLon(
                    track.required("latitude").asDouble(), track.required("longitude").asDouble()));
            picture.computeIfAbsent(track.required("scan").asInt(), key -> new ArrayList<>())
                    .add(new Shown(
                            track.required("object").asText(), at.eastMetres(), at.northMetres(),
                            track.required("moving")));
        }
        return picture;
    }

    private static int lines(Path records, String name) throws IOException {
        return Files.readAllLines(records.resolve(name + ".ndjson")).size();
    }

    /** A column for each object, and as many more as vessels, each of which costs the cut: nothing. */
    private static double[][] distances(List<double[]> vessels, List<Shown> objects) {
        double[][] distance = new double[vessels.size()][objects.size() + vessels.size()];
        for (int i = 0; i < vessels.size(); i++) {
            for (int j = 0; j < distance[i].length; j++) {
                distance[i][j] = j < objects.size()
                        ? Math.min(CUT_METRES, Math.hypot(
                                vessels.get(i)[0] - objects.get(j).east(), vessels.get(i)[1] - objects.get(j).north()))
                        : CUT_METRES;
            }
        }
        return distance;
    }
}
