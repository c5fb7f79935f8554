package org.sweeptally.geo;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.math.BigDecimal;
import java.util.ArrayList;
import java.util.Collections;
import java.util.List;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class GeoPolygonTest {

    private static final int SIDE = 8;

    /** A partition of a square of one degree, its inner corners shaken, its cells whole or cut in two. */
    @ParameterizedTest
    @ValueSource(doubles = {4, 179.4, -180, -0.5})
    void everyPlaceBelongsToExactlyOneOfNeighbours(double west) {
        SplittableRandom random = Wgs84Test.seeded(31);
        LatLon[][] corners = shakenCorners(random, west);
        List<GeoPolygon> partition = partition(random, corners);
        List<LatLon> places = hardPlaces(random, corners);
        assertThat(places.size()).isGreaterThan(20_000);
        int owned = 0;
        for (LatLon place : places) {
            boolean inside = place.latitude() >= 52
                    && place.latitude() < 53
                    && isAtOrEastOf(place, corners[0][0])
                    && !isAtOrEastOf(place, corners[0][SIDE]);
            long owners = partition.stream().filter(p -> p.contains(place)).count();
            assertThat(owners).as("owners of %s", place).isEqualTo(inside ? 1 : 0);
            owned += inside ? 1 : 0;
        }
        assertThat(owned).isGreaterThan(15_000);
    }

    @Test
    void aRingMayRunEitherWayFromAnyCorner() {
        SplittableRandom random = Wgs84Test.seeded(32);
        List<LatLon> ring = new ArrayList<>(List.of(at(0, 0), at(3, 1), at(2, 4), at(1, 1.5), at(-1, 3)));
        List<LatLon> turned = new ArrayList<>(ring);
        Collections.reverse(turned);
        Collections.rotate(turned, 2);
        for (int i = 0; i < 10_000; i++) {
            LatLon place = at(random.nextDouble(-1, 4), random.nextDouble(-1, 5));
            assertThat(polygon(turned).contains(place)).isEqualTo(polygon(ring).contains(place));
        }
    }

    @Test
    void aHoleBelongsToWhatFillsIt() {
        List<LatLon> hole = List.of(at(1, 1), at(1, 2), at(2, 2), at(2, 1));
        GeoPolygon around = new GeoPolygon(List.of(at(0, 0), at(0, 3), at(3, 3), at(3, 0)), List.of(hole));
        GeoPolygon filling = polygon(hole);
        for (double latitude = .25; latitude < 3; latitude += .25) {
            for (double longitude = .25; longitude < 3; longitude += .25) {
                LatLon place = at(latitude, longitude);
                assertThat(around.contains(place)).isNotEqualTo(filling.contains(place));
            }
        }
    }

    @Test
    void aPolygonAcrossTheAntimeridianHoldsBothSides() {
        GeoPolygon polygon = polygon(List.of(at(10, 179), at(10, -179), at(12, -179), at(12, 179)));
        for (double longitude : new double[] {179, 179.5, 180, -180, -179.5}) {
            assertThat(polygon.contains(at(11, longitude))).as("at %s", longitude).isTrue();
        }
        for (double longitude : new double[] {0, 178.9, -178.9, -179}) {
            assertThat(polygon.contains(at(11, longitude))).as("at %s", longitude).isFalse();
        }
        assertThat(Math.abs(polygon.middle().longitude())).isGreaterThan(179.999999);
        assertThat(polygon.middle().latitude()).isCloseTo(11, within(1e-12));
    }

    @Test
    void aHoleAcrossTheAntimeridianIsCutFromTheRightTurn() {
        GeoPolygon polygon = new GeoPolygon(
                List.of(at(10, 179), at(10, -179), at(12, -179), at(12, 179)),
                List.of(List.of(at(10.5, -179.5), at(10.5, -179.2), at(11, -179.2))));
        assertThat(polygon.contains(at(10.55, -179.25))).isFalse();
        assertThat(polygon.contains(at(10.9, -179.45))).isTrue();
    }

    @Test
    void whatIsNoNumberIsOutside() {
        GeoPolygon polygon = polygon(List.of(at(0, 0), at(0, 3), at(3, 3)));
        assertThat(polygon.contains(at(Double.NaN, 1))).isFalse();
        assertThat(polygon.contains(at(1, Double.NaN))).isFalse();
        assertThat(polygon.contains(at(1, Double.POSITIVE_INFINITY))).isFalse();
    }

    @Test
    void aRingThatIsNoneIsRefused() {
        assertThatThrownBy(() -> polygon(List.of(at(0, 0), at(1, 1), at(0, 0)))).hasMessageContaining("three corners");
        assertThatThrownBy(() -> polygon(List.of(at(0, 0), at(1, 1), at(91, 0)))).hasMessageContaining("91");
        assertThatThrownBy(() -> polygon(List.of(at(0, 0), at(1, 1), at(0, Double.NaN)))).hasMessageContaining("NaN");
    }

    @Test
    void aClosingCornerIsLeftOut() {
        List<LatLon> open = List.of(at(0, 0), at(0, 3), at(3, 3));
        List<LatLon> closed = List.of(at(0, 0), at(0, 3), at(3, 3), at(0, 0));
        assertThat(polygon(closed)).isEqualTo(polygon(open)).hasSameHashCodeAs(polygon(open));
    }

    /** Without rounding, and across the antimeridian. */
    private static boolean isAtOrEastOf(LatLon place, LatLon corner) {
        BigDecimal right = new BigDecimal(place.longitude()).subtract(new BigDecimal(corner.longitude()));
        BigDecimal turn = BigDecimal.valueOf(360 * Math.rint(right.doubleValue() / 360));
        return right.subtract(turn).signum() >= 0;
    }

    private static LatLon[][] shakenCorners(SplittableRandom random, double west) {
        LatLon[][] corners = new LatLon[SIDE + 1][SIDE + 1];
        for (int row = 0; row <= SIDE; row++) {
            for (int column = 0; column <= SIDE; column++) {
                boolean inner = row > 0 && row < SIDE && column > 0 && column < SIDE;
                double shakeNorth = inner ? random.nextDouble(-.03, .03) : 0;
                double shakeEast = inner ? random.nextDouble(-.03, .03) : 0;
                double longitude = west + (double) column / SIDE + shakeEast;
                corners[row][column] = at(52 + (double) row / SIDE + shakeNorth, Math.IEEEremainder(longitude, 360));
            }
        }
        return corners;
    }

    private static List<GeoPolygon> partition(SplittableRandom random, LatLon[][] corners) {
        List<GeoPolygon> cells = new ArrayList<>();
        for (int row = 0; row < SIDE; row++) {
            for (int column = 0; column < SIDE; column++) {
                LatLon a = corners[row][column];
                LatLon b = corners[row][column + 1];
                LatLon c = corners[row + 1][column + 1];
                LatLon d = corners[row + 1][column];
                switch (random.nextInt(3)) {
                    case 0 -> cells.add(shuffled(random, List.of(a, b, c, d)));
                    case 1 -> {
                        cells.add(shuffled(random, List.of(a, b, c)));
                        cells.add(shuffled(random, List.of(c, d, a)));
                    }
                    default -> {
                        cells.add(shuffled(random, List.of(a, b, d)));
                        cells.add(shuffled(random, List.of(b, c, d)));
                    }
                }
            }
        }
        return cells;
    }

    private static GeoPolygon shuffled(SplittableRandom random, List<LatLon> ring) {
        List<LatLon> turned = new ArrayList<>(ring);
        if (random.nextBoolean()) {
            Collections.reverse(turned);
        }
        Collections.rotate(turned, random.nextInt(ring.size()));
        return polygon(turned);
    }

    /** Corners, places on edges and diagonals as near as doubles come, their nearest neighbours, and any others. */
    private static List<LatLon> hardPlaces(SplittableRandom random, LatLon[][] corners) {
        List<LatLon> places = new ArrayList<>();
        for (int row = 0; row <= SIDE; row++) {
            for (int column = 0; column <= SIDE; column++) {
                addWithNeighbours(corners[row][column], places);
                for (int[] step : new int[][] {{0, 1}, {1, 0}, {1, 1}, {1, -1}}) {
                    int toRow = row + step[0];
                    int toColumn = column + step[1];
                    if (toRow <= SIDE && toColumn >= 0 && toColumn <= SIDE) {
                        for (int i = 0; i < 8; i++) {
                            LatLon to = corners[toRow][toColumn];
                            addWithNeighbours(between(corners[row][column], to, random.nextDouble()), places);
                        }
                    }
                }
            }
        }
        double west = corners[0][0].longitude();
        for (int i = 0; i < 5000; i++) {
            places.add(at(
                    random.nextDouble(51.9, 53.1), Math.IEEEremainder(west + random.nextDouble(-.1, 1.1), 360)));
        }
        return places;
    }

    private static LatLon between(LatLon a, LatLon b, double share) {
        double step = Math.IEEEremainder(b.longitude() - a.longitude(), 360);
        return at(
                a.latitude() + share * (b.latitude() - a.latitude()),
                Math.IEEEremainder(a.longitude() + share * step, 360));
    }

    private static void addWithNeighbours(LatLon place, List<LatLon> places) {
        for (double latitude : neighbours(place.latitude())) {
            for (double longitude : neighbours(place.longitude())) {
                if (Math.abs(longitude) <= 180) {
                    places.add(at(latitude, longitude));
                }
            }
        }
    }

    private static double[] neighbours(double value) {
        return new double[] {Math.nextDown(value), value, Math.nextUp(value)};
    }

    private static LatLon at(double latitude, double longitude) {
        return new LatLon(latitude, longitude);
    }

    private static GeoPolygon polygon(List<LatLon> ring) {
        return new GeoPolygon(ring, List.of());
    }
}
