package org.sweeptally.harbour;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.SortedMap;
import java.util.TreeMap;
import org.sweeptally.harbour.HarbourRecordings.Truth;
import org.sweeptally.score.OptimalAssignment;

/**
 * How well a picture shows the vessels whose true places are known. At every scan of a sensor the vessels are assigned
 * to shown objects one to one, at least total distance, each distance cut.
 *
 * @param truthSideMetres          mean of the cut distances over vessels and scans
 * @param identityChangesPerVessel how often a vessel nearer than the cut was shown under another identity than before
 * @param meanConfirmed            objects shown a scan
 */
public record HarbourScore(double truthSideMetres, double identityChangesPerVessel, double meanConfirmed) {

    public static final double CUT_METRES = 20;

    /** Truth is taken to hold this long before its first and after its last place. */
    private static final double SLACK_SECONDS = 1;

    private static final ObjectMapper JSON = new ObjectMapper();

    private record Shown(String object, double east, double north) {}

    /**
     * Scores a picture.
     *
     * @param scanSeconds times of the sensor's scans by number
     * @param truth       true places of each vessel in order of time
     * @param tracks      lines of tracks.ndjson
     * @param sensor      the sensor whose scans count
     */
    public static HarbourScore of(
            SortedMap<Integer, Double> scanSeconds,
            SortedMap<String, List<Truth>> truth,
            List<String> tracks,
            String sensor,
            double cutMetres)
            throws IOException {
        SortedMap<Integer, List<Shown>> picture = picture(tracks, sensor);
        SortedMap<String, String> lastIdentity = new TreeMap<>();
        double total = 0;
        int cases = 0;
        int changes = 0;
        int shown = 0;
        for (Map.Entry<Integer, Double> scan : scanSeconds.entrySet()) {
            List<Shown> objects = picture.getOrDefault(scan.getKey(), List.of());
            shown += objects.size();
            SortedMap<String, double[]> vessels = vessels(truth, scan.getValue());
            double[][] distance = distances(List.copyOf(vessels.values()), objects, cutMetres);
            int[] partner = OptimalAssignment.of(distance);
            int row = 0;
            for (String vessel : vessels.keySet()) {
                double off = distance[row][partner[row]];
                total += off;
                cases++;
                if (off < cutMetres) {
                    String identity = objects.get(partner[row]).object();
                    String before = lastIdentity.put(vessel, identity);
                    changes += before != null && !before.equals(identity) ? 1 : 0;
                }
                row++;
            }
        }
        return new HarbourScore(
                total / cases, (double) changes / Math.max(1, truth.size()), (double) shown / scanSeconds.size());
    }

    private static SortedMap<Integer, List<Shown>> picture(List<String> tracks, String sensor) throws IOException {
        SortedMap<Integer, List<Shown>> picture = new TreeMap<>();
        for (String line : tracks) {
            JsonNode track = JSON.readTree(line);
            if (track.required("sensor").asText().equals(sensor)) {
                picture.computeIfAbsent(track.required("scan").asInt(), key -> new ArrayList<>())
                        .add(new Shown(
                                track.required("object").asText(),
                                HarbourPlane.east(track.required("longitude").asDouble()),
                                HarbourPlane.north(track.required("latitude").asDouble())));
            }
        }
        return picture;
    }

    /**
     * Where each vessel is at a time: on the line between the places before and after, and at the ends where it stops.
     */
    private static SortedMap<String, double[]> vessels(SortedMap<String, List<Truth>> truth, double seconds) {
        SortedMap<String, double[]> vessels = new TreeMap<>();
        truth.forEach((vessel, places) -> {
            double first = places.get(0).seconds();
            double last = places.get(places.size() - 1).seconds();
            if (seconds >= first - SLACK_SECONDS && seconds <= last + SLACK_SECONDS) {
                int i = 1;
                while (i < places.size() - 1 && places.get(i).seconds() < seconds) {
                    i++;
                }
                Truth a = places.get(i - 1);
                Truth b = places.get(i);
                double w = Math.min(Math.max((seconds - a.seconds()) / (b.seconds() - a.seconds()), 0), 1);
                vessels.put(vessel, new double[] {
                    a.east() + w * (b.east() - a.east()), a.north() + w * (b.north() - a.north())
                });
            }
        });
        return vessels;
    }

    /** A column for each object, and as many more as vessels, each of which costs the cut: nothing. */
    private static double[][] distances(List<double[]> vessels, List<Shown> objects, double cut) {
        double[][] distance = new double[vessels.size()][objects.size() + vessels.size()];
        for (int i = 0; i < vessels.size(); i++) {
            for (int j = 0; j < distance[i].length; j++) {
                distance[i][j] = cut;
                if (j < objects.size()) {
                    double east = vessels.get(i)[0] - objects.get(j).east();
                    double north = vessels.get(i)[1] - objects.get(j).north();
                    distance[i][j] = Math.min(cut, Math.sqrt(east * east + north * north));
                }
            }
        }
        return distance;
    }
}
