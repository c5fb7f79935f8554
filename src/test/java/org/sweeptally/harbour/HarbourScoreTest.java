package org.sweeptally.harbour;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.SortedMap;
import java.util.TreeMap;
import org.junit.jupiter.api.Test;
import org.sweeptally.harbour.HarbourRecordings.Truth;

/** The score on pictures of two vessels and a few scans, each small enough to work out by hand. */
class HarbourScoreTest {

    private final List<String> tracks = new ArrayList<>();
    private final SortedMap<Integer, Double> scans = new TreeMap<>();
    private final SortedMap<String, List<Truth>> truth = new TreeMap<>();

    @Test
    void distancesAreMeasuredToWhereTheVesselIsBetweenItsPlaces() throws IOException {
        truth.put("1", List.of(new Truth(0, 0, 0), new Truth(10, 100, 0)));
        scans.put(0, 2.5);
        show(0, "a", 28, 4);
        assertScore(5, 0, 1);
    }

    @Test
    void anUnseenVesselCostsTheCutAndFarObjectsDoNotHelp() throws IOException {
        vesselsAtRest();
        scans.put(0, 1.0);
        scans.put(1, 2.0);
        show(0, "a", 3, 4);
        show(0, "far", 500, 500);
        assertScore((5 + 20 + 20 + 20) / 4.0, 0, 1);
    }

    @Test
    void theWholeIsLeastOffNotEachVesselForItself() throws IOException {
        // Vessels at 0 and 10; objects at 9 and 13. Whoever takes the nearest first pairs 10 with 9 and is off 1 + 13.
        truth.put("1", List.of(new Truth(0, 0, 0), new Truth(10, 0, 0)));
        truth.put("2", List.of(new Truth(0, 10, 0), new Truth(10, 10, 0)));
        scans.put(0, 1.0);
        show(0, "a", 9, 0);
        show(0, "b", 13, 0);
        assertScore(6, 0, 2);
    }

    @Test
    void aChangeIsCountedWhenTheNextOneHasAnotherIdentityEvenAfterAGap() throws IOException {
        vesselsAtRest();
        String[] identities = {"a", "a", null, "b", "b", "a"};
        for (int k = 0; k < identities.length; k++) {
            scans.put(k, 0.1 * k);
            if (identities[k] != null) {
                show(k, identities[k], 0, 0);
            }
        }
        // Vessel 1: five times 0, once 20; vessel 2: always 20. Two changes over two vessels.
        assertScore((20 + 6 * 20) / 12.0, 1, 5 / 6.0);
    }

    @Test
    void truthHoldsForASecondBeyondItsEndsAndThenNoLonger() throws IOException {
        truth.put("1", List.of(new Truth(5, 0, 0), new Truth(6, 10, 0)));
        scans.put(0, 4.5);
        scans.put(1, 6.5);
        scans.put(2, 8.0);
        show(0, "a", 0, 3);
        show(1, "a", 10, 1);
        show(2, "a", 700, 0);
        assertScore(2, 0, 1);
    }

    @Test
    void scansOfAnotherSensorDoNotCount() throws IOException {
        vesselsAtRest();
        scans.put(0, 1.0);
        tracks.add(line("lidar", 0, "a", 0, 0));
        assertScore(20, 0, 0);
    }

    private void vesselsAtRest() {
        truth.put("1", List.of(new Truth(0, 0, 0), new Truth(10, 0, 0)));
        truth.put("2", List.of(new Truth(0, 200, 0), new Truth(10, 200, 0)));
    }

    private void show(int scan, String object, double east, double north) {
        tracks.add(line("radar", scan, object, east, north));
    }

    private static String line(String sensor, int scan, String object, double east, double north) {
        return String.format(
                Locale.ROOT,
                "{\"object\":\"%s\",\"sensor\":\"%s\",\"scan\":%d,\"latitude\":%.12f,\"longitude\":%.12f}",
                object, sensor, scan, HarbourPlane.latitude(north), HarbourPlane.longitude(east));
    }

    private void assertScore(double metres, double changes, double shown) throws IOException {
        HarbourScore score = HarbourScore.of(scans, truth, tracks, "radar", HarbourScore.CUT_METRES);
        assertThat(score.truthSideMetres()).isCloseTo(metres, within(1e-5));
        assertThat(score.identityChangesPerVessel()).isEqualTo(changes);
        assertThat(score.meanConfirmed()).isCloseTo(shown, within(1e-12));
    }
}
