package org.sweeptally.geo;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;

class ObstaclesTest {

    private static final double REACH = 1000;

    @Test
    void aWallHidesWhatIsBehindItAndNothingElse() {
        Obstacles wall = new Obstacles(List.of(List.of(ring(-100, 200, 100, 200, 100, 220, -100, 220))));
        PlaneArea visible = wall.visibleFrom(new PlanePoint(0, 0), REACH).orElseThrow();
        assertThat(visible.contains(0, 199)).isTrue();
        assertThat(visible.contains(0, 201)).isFalse();
        assertThat(visible.contains(0, 900)).isFalse();
        // The shadow's edge goes through the corner (100, 200): at 800 north it is at 400 east.
        assertThat(visible.signedDistanceMetres(400, 800)).isCloseTo(0, within(1e-9));
        assertThat(visible.contains(401, 800)).isTrue();
        assertThat(visible.contains(399, 800)).isFalse();
        assertThat(visible.contains(0, -900)).isTrue();
    }

    @Test
    void whoStandsOnAHeadlandSeesOverItAndNotThroughItsOtherArm() {
        // A bay open to the north between two arms; the eye stands at the western one's root.
        List<PlanePoint> land = ring(-200, -100, 300, -100, 300, 200, 200, 200, 200, 0, -100, 0, -100, 200, -200, 200);
        PlaneArea visible =
                new Obstacles(List.of(List.of(land))).visibleFrom(new PlanePoint(-150, 100), REACH).orElseThrow();
        assertThat(visible.contains(-190, 150)).isTrue();
        assertThat(visible.contains(-500, 100)).isTrue();
        assertThat(visible.contains(100, 100)).isTrue();
        assertThat(visible.contains(400, 100)).isFalse();
    }

    @Test
    void whatCannotHideAnythingLeavesAllVisible() {
        Obstacles far = new Obstacles(List.of(List.of(ring(1100, -50, 1200, -50, 1200, 50, 1100, 50))));
        assertThat(far.visibleFrom(new PlanePoint(0, 0), REACH)).isEmpty();
        assertThat(new Obstacles(List.of()).visibleFrom(new PlanePoint(0, 0), REACH)).isEmpty();
    }

    @Test
    void aPlaceIsVisibleExactlyWhereItsLineOfSightEntersNothing() {
        for (long seed = 1; seed <= 60; seed++) {
            SplittableRandom random = new SplittableRandom(seed);
            List<List<PlanePoint>> polygons = new ArrayList<>();
            for (int i = 0; i <= random.nextInt(6); i++) {
                polygons.add(star(random));
            }
            PlanePoint eye = new PlanePoint(random.nextDouble(-300, 300), random.nextDouble(-300, 300));
            Optional<PlaneArea> visible = new Obstacles(polygons.stream().map(List::of).toList()).visibleFrom(eye, REACH);
            for (int i = 0; i < 400; i++) {
                double range = REACH * Math.sqrt(random.nextDouble());
                double angle = 2 * Math.PI * random.nextDouble();
                double east = eye.eastMetres() + range * StrictMath.cos(angle);
                double north = eye.northMetres() + range * StrictMath.sin(angle);
                boolean told = visible.isEmpty() || visible.get().contains(east, north);
                if (visible.isPresent() && Math.abs(visible.get().signedDistanceMetres(east, north)) < 1e-6) {
                    continue;
                }
                assertThat(told).as("seed %d: (%f, %f) from %s", seed, east, north, eye)
                        .isEqualTo(!entersAny(polygons, eye, east, north));
            }
        }
    }

    /** Walks the line of sight in small steps between its crossings with all edges: it must never go from out to in. */
    private static boolean entersAny(List<List<PlanePoint>> polygons, PlanePoint eye, double east, double north) {
        for (List<PlanePoint> ring : polygons) {
            PlaneArea area = PlaneArea.ofRings(List.of(ring));
            List<Double> crossings = new ArrayList<>(List.of(0.0, 1.0));
            for (int i = 0; i < ring.size(); i++) {
                crossing(eye, east, north, ring.get(i), ring.get((i + 1) % ring.size()), crossings);
            }
            crossings.sort(null);
            boolean outBefore = false;
            for (int i = 1; i < crossings.size(); i++) {
                double middle = (crossings.get(i - 1) + crossings.get(i)) / 2;
                boolean in = area.contains(
                        eye.eastMetres() + middle * (east - eye.eastMetres()),
                        eye.northMetres() + middle * (north - eye.northMetres()));
                if (in && outBefore) {
                    return true;
                }
                outBefore |= !in;
            }
        }
        return false;
    }

    private static void crossing(
            PlanePoint eye, double east, double north, PlanePoint a, PlanePoint b, List<Double> crossings) {
        double rayEast = east - eye.eastMetres();
        double rayNorth = north - eye.northMetres();
        double alongEast = b.eastMetres() - a.eastMetres();
        double alongNorth = b.northMetres() - a.northMetres();
        double sine = rayEast * alongNorth - rayNorth * alongEast;
        double toEast = a.eastMetres() - eye.eastMetres();
        double toNorth = a.northMetres() - eye.northMetres();
        double way = (toEast * alongNorth - toNorth * alongEast) / sine;
        double share = (toEast * rayNorth - toNorth * rayEast) / sine;
        if (way > 0 && way < 1 && share >= 0 && share <= 1) {
            crossings.add(way);
        }
    }

    private static List<PlanePoint> star(SplittableRandom random) {
        double east = random.nextDouble(-700, 700);
        double north = random.nextDouble(-700, 700);
        int corners = random.nextInt(3, 9);
        List<PlanePoint> ring = new ArrayList<>();
        for (int i = 0; i < corners; i++) {
            double angle = 2 * Math.PI * (i + 0.8 * random.nextDouble()) / corners;
            double radius = random.nextDouble(20, 250);
            ring.add(new PlanePoint(east + radius * StrictMath.cos(angle), north + radius * StrictMath.sin(angle)));
        }
        return ring;
    }

    private static List<PlanePoint> ring(double... eastNorth) {
        List<PlanePoint> ring = new ArrayList<>();
        for (int i = 0; i < eastNorth.length; i += 2) {
            ring.add(new PlanePoint(eastNorth[i], eastNorth[i + 1]));
        }
        return ring;
    }
}
