package org.sweeptally.harbour;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;

/**
 * How near a picture is to the truth, on the truth's side: at every scan of a sensor each true vessel is assigned to a
 * published object, one to one at least total distance, each distance cut; averaged over vessels and scans, with the
 * changes of the assigned identity.
 *
 * @param truthSideMetres          mean distance
 * @param identityChangesPerVessel how often a vessel's object became another
 * @param meanConfirmed            published objects a scan
 */
public record HarbourScore(double truthSideMetres, double identityChangesPerVessel, double meanConfirmed) {

    private static final double CUT_METRES = 20;

    /** A published object at a scan. */
    record Shown(String object, double east, double north) {}

    /** Scores a file of tracks at the radar's scans. */
    public static HarbourScore of(HarbourRecordings recordings, int scenario, Path tracks) throws IOException {
        Map<Integer, List<Shown>> shown = new TreeMap<>();
        ObjectMapper mapper = new ObjectMapper();
        for (String line : Files.readAllLines(tracks)) {
            JsonNode track = mapper.readTree(line);
            if (track.get("sensor").asText().equals("radar")) {
                double[] place = HarbourRecordings.toPlane(
                        track.get("latitude").asDouble(), track.get("longitude").asDouble());
                shown.computeIfAbsent(track.get("scan").asInt(), scan -> new ArrayList<>())
                        .add(new Shown(track.get("object").asText(), place[0], place[1]));
            }
        }
        Tally tally = new Tally();
        Map<String, List<double[]>> truth = recordings.truth(scenario);
        for (HarbourRecordings.Look look : recordings.looks(scenario, List.of("radar"))) {
            tally.scan(at(truth, look.seconds()), shown.getOrDefault(look.scan(), List.of()));
        }
        return tally.score(truth.size());
    }

    private static Map<String, double[]> at(Map<String, List<double[]>> truth, double seconds) {
        Map<String, double[]> places = new TreeMap<>();
        truth.forEach((vessel, fixes) -> {
            boolean known = seconds >= fixes.get(0)[0] - 1 && seconds <= fixes.get(fixes.size() - 1)[0] + 1;
            if (known) {
                places.put(vessel, interpolated(fixes, seconds));
            }
        });
        return places;
    }

    private static double[] interpolated(List<double[]> fixes, double seconds) {
        int after = 1;
        while (after < fixes.size() - 1 && fixes.get(after)[0] < seconds) {
            after++;
        }
        double[] a = fixes.get(after - 1);
        double[] b = fixes.get(after);
        double share = Math.min(1, Math.max(0, (seconds - a[0]) / (b[0] - a[0])));
        return new double[] {a[1] + share * (b[1] - a[1]), a[2] + share * (b[2] - a[2])};
    }

    /** Adds up scan by scan. */
    static final class Tally {
        private final Map<String, String> last = new TreeMap<>();
        private double total;
        private int vessels;
        private int scans;
        private int changes;
        private int shownInAll;

        void scan(Map<String, double[]> truth, List<Shown> shown) {
            scans++;
            shownInAll += shown.size();
            vessels += truth.size();
            List<String> names = List.copyOf(truth.keySet());
            int[] best = new int[names.size()];
            total += assign(names, truth, shown, 0, new int[names.size()], best, 0, Double.POSITIVE_INFINITY);
            for (int i = 0; i < best.length; i++) {
                if (best[i] >= 0 && distance(truth.get(names.get(i)), shown.get(best[i])) < CUT_METRES) {
                    String before = last.put(names.get(i), shown.get(best[i]).object());
                    changes += before != null && !before.equals(shown.get(best[i]).object()) ? 1 : 0;
                }
            }
        }

        /** Tries every assignment of vessels from i on; returns the least total and leaves it in best. */
        private static double assign(
                List<String> names, Map<String, double[]> truth, List<Shown> shown, int i, int[] chosen, int[] best,
                double soFar, double least) {
            if (i == names.size()) {
                if (soFar < least) {
                    System.arraycopy(chosen, 0, best, 0, chosen.length);
                    return soFar;
                }
                return least;
            }
            double found = least;
            for (int j = -1; j < shown.size(); j++) {
                if (j < 0 || isFree(j, chosen, i)) {
                    chosen[i] = j;
                    double cut = j < 0 ? CUT_METRES : Math.min(CUT_METRES, distance(truth.get(names.get(i)), shown.get(j)));
                    found = assign(names, truth, shown, i + 1, chosen, best, soFar + cut, found);
                }
            }
            return found;
        }

        private static boolean isFree(int j, int[] chosen, int before) {
            for (int k = 0; k < before; k++) {
                if (chosen[k] == j) {
                    return false;
                }
            }
            return true;
        }

        HarbourScore score(int allVessels) {
            return new HarbourScore(total / vessels, (double) changes / allVessels, (double) shownInAll / scans);
        }
    }

    private static double distance(double[] place, Shown object) {
        return Math.hypot(place[0] - object.east(), place[1] - object.north());
    }
}
