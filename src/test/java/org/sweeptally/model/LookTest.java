package org.sweeptally.model;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.SplittableRandom;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.junit.jupiter.api.Test;
import org.sweeptally.geo.Obstacles;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.geo.PlanePoint;

/** A look against a plain reading of what it is made of, and against integrals by brute force. */
class LookTest {

    private static final double REACH = 1000;
    private static final PlaneArea CORE = rectangle(-900, -900, 900, 900);
    private static final double APRON = 150;

    /** All that limits a look, drawn at random, beside a plain description of the same. */
    private static final class Scene {
        final PlanePoint eye;
        final double least;
        final double[][] sectors;
        final List<PlaneArea> shadows = new ArrayList<>();
        final List<DetectionArea> areas = new ArrayList<>();
        final Optional<PlaneArea> open;
        final Optional<LookCoverage> coverage;
        final DetectionProfile profile;
        final Look look;

        Scene(long seed) {
            SplittableRandom random = new SplittableRandom(seed);
            eye = new PlanePoint(random.nextDouble(-500, 500), random.nextDouble(-500, 500));
            least = random.nextBoolean() ? 0 : random.nextDouble(50, 200);
            double from = random.nextDouble(0, 6);
            sectors = random.nextInt(3) == 0
                    ? new double[][] {}
                    : new double[][] {{from, random.nextDouble(0.3, 3.6)}, {from + 4, random.nextDouble(0.2, 1.5)}};
            for (int i = 0; i < random.nextInt(3); i++) {
                shadows.add(box(random));
            }
            for (int i = 0; i < random.nextInt(3); i++) {
                areas.add(new DetectionArea(box(random), random.nextDouble(0.2, 0.9), random.nextBoolean()));
            }
            open = random.nextBoolean()
                    ? Optional.empty()
                    : new Obstacles(List.of(List.of(corners(random)))).visibleFrom(eye, REACH);
            coverage = random.nextBoolean()
                    ? Optional.empty()
                    : Optional.of(new LookCoverage(
                            random.nextDouble(0, 100), random.nextDouble(500, 1200), random.nextDouble(0, 6),
                            random.nextBoolean() ? 2 * Math.PI : random.nextDouble(0.5, 6),
                            random.nextBoolean() ? Optional.empty() : Optional.of(box(random))));
            profile = random.nextBoolean()
                    ? DetectionProfile.constant(0.9)
                    : new DetectionProfile(List.of(
                            new DetectionProfile.Point(100, 0.95), new DetectionProfile.Point(900, 0.5)));
            List<Sector> made = new ArrayList<>();
            for (double[] sector : sectors) {
                made.add(Sector.of(sector[0], sector[1]));
            }
            FieldOfView view = new FieldOfView(eye, least, REACH, made, shadows, open, areas);
            look = new Look(new SensorModel("mast", REACH, profile, 10), view, coverage, CORE, APRON);
        }

        /** What the probability of detection at a place is, read off plainly. */
        double plain(double east, double north) {
            double range = Math.hypot(east - eye.eastMetres(), north - eye.northMetres());
            double azimuth = Math.atan2(east - eye.eastMetres(), north - eye.northMetres());
            boolean seen = range >= least && range <= REACH && CORE.signedDistanceMetres(east, north) >= -APRON;
            boolean inSectors = sectors.length == 0;
            for (double[] sector : sectors) {
                inSectors |= isInto(azimuth, sector[0], sector[1]);
            }
            seen &= inSectors && open.map(o -> o.contains(east, north)).orElse(true);
            seen &= shadows.stream().noneMatch(shadow -> shadow.contains(east, north));
            if (coverage.isPresent()) {
                LookCoverage c = coverage.get();
                seen &= range >= c.fromMetres() && range <= c.toMetres();
                seen &= isInto(azimuth, c.fromAzimuthRadians(), c.widthRadians());
                seen &= c.area().map(a -> a.contains(east, north)).orElse(true);
            }
            if (!seen) {
                return 0;
            }
            for (DetectionArea area : areas) {
                if (area.area().contains(east, north)) {
                    return area.isFactor() ? area.value() * profile.at(range) : area.value();
                }
            }
            return profile.at(range);
        }

        private static boolean isInto(double azimuth, double from, double width) {
            double into = azimuth - from;
            return into - 2 * Math.PI * Math.floor(into / (2 * Math.PI)) <= width;
        }
    }

    @Test
    void theProbabilityAtAPlaceIsWhatAPlainReadingGives() {
        for (long seed = 1; seed <= 100; seed++) {
            Scene scene = new Scene(seed);
            SplittableRandom random = new SplittableRandom(seed);
            for (int i = 0; i < 400; i++) {
                double east = random.nextDouble(-1200, 1200);
                double north = random.nextDouble(-1200, 1200);
                assertThat(scene.look.probabilityOfDetection(east, north))
                        .as("seed %d at (%f, %f)", seed, east, north)
                        .isCloseTo(scene.plain(east, north), within(1e-12));
            }
        }
    }

    @Test
    void whereItSaysThatAllIsAlikeItIs() {
        int answered = 0;
        int zero = 0;
        for (long seed = 1; seed <= 100; seed++) {
            Scene scene = new Scene(seed);
            SplittableRandom random = new SplittableRandom(seed);
            for (int i = 0; i < 200; i++) {
                double east = random.nextDouble(-1200, 1200);
                double north = random.nextDouble(-1200, 1200);
                double metres = random.nextDouble(1, 150);
                double told = scene.look.constantWithin(east, north, metres);
                if (Double.isNaN(told)) {
                    continue;
                }
                answered++;
                zero += told == 0 ? 1 : 0;
                for (int k = 0; k < 60; k++) {
                    double range = metres * Math.sqrt(random.nextDouble());
                    double angle = 2 * Math.PI * random.nextDouble();
                    assertThat(scene.plain(east + range * Math.cos(angle), north + range * Math.sin(angle)))
                            .as("seed %d within %f m of (%f, %f)", seed, metres, east, north)
                            .isCloseTo(told, within(0.01));
                }
            }
        }
        assertThat(answered).isGreaterThan(100 * 200 / 2);
        assertThat(answered - zero).isGreaterThan(500);
    }

    @Test
    void mostPlacesOfASiteWithSectorsAndShadowsNeedNoAverage() {
        FieldOfView view = new FieldOfView(new PlanePoint(0, 0), 50, REACH, List.of(Sector.of(5, 4)),
                List.of(rectangle(200, 200, 260, 400)), Optional.empty(), List.of());
        Look look = new Look(new SensorModel("mast", REACH, DetectionProfile.constant(0.9), 10), view, Optional.empty(),
                CORE, APRON);
        int answered = 0;
        for (int i = 0; i < 1000; i++) {
            SplittableRandom random = new SplittableRandom(i);
            double told = look.constantNear(random.nextDouble(-800, 800), random.nextDouble(-800, 800), 8);
            answered += Double.isNaN(told) ? 0 : 1;
        }
        assertThat(answered).isGreaterThan(800);
    }

    /** Against the integral over the density on a fine raster. */
    @Test
    void nearEdgesTheAverageIsThatOfTheDensity() {
        double worst = 0;
        double sum = 0;
        int averaged = 0;
        for (long seed = 1; seed <= 150; seed++) {
            Scene scene = new Scene(seed);
            SplittableRandom random = new SplittableRandom(seed);
            double sigma = random.nextDouble(5, 40);
            double correlation = random.nextDouble(-0.9, 0.9);
            double cov = correlation * sigma * 0.6 * sigma;
            Gaussian density = new Gaussian(
                    new DMatrix4(random.nextDouble(-900, 900), random.nextDouble(-900, 900), 0, 0),
                    new DMatrix4x4(sigma * sigma, cov, 0, 0, cov, 0.36 * sigma * sigma, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1));
            double exact = integral(scene, density);
            double told = scene.look.constantOver(density);
            if (Double.isNaN(told)) {
                told = scene.look.averageOver(density);
                averaged++;
                sum += Math.abs(told - exact);
                worst = Math.max(worst, Math.abs(told - exact));
            }
            assertThat(told).as("seed %d", seed).isCloseTo(exact, within(0.1));
        }
        System.out.printf("averages near edges: %d, mean error %.4f, worst %.3f%n", averaged, sum / averaged, worst);
        assertThat(averaged).isGreaterThan(20);
        assertThat(sum / averaged).isLessThan(0.02);
    }

    private static double integral(Scene scene, Gaussian density) {
        double l11 = Math.sqrt(density.covariance.a11);
        double l21 = density.covariance.a12 / l11;
        double l22 = Math.sqrt(density.covariance.a22 - l21 * l21);
        double sum = 0;
        double weights = 0;
        for (double u = -4; u <= 4; u += 0.05) {
            for (double v = -4; v <= 4; v += 0.05) {
                double weight = Math.exp(-(u * u + v * v) / 2);
                weights += weight;
                sum += weight * scene.plain(density.east() + l11 * u, density.north() + l21 * u + l22 * v);
            }
        }
        return sum / weights;
    }

    /** The share of a Gaussian beyond a straight edge is the normal distribution's. */
    @Test
    void besideAStraightEdgeTheAverageIsTheNormalDistributions() {
        FieldOfView view = new FieldOfView(new PlanePoint(0, 0), 0, 1e6, List.of(),
                List.of(rectangle(-5000, -5000, 0, 5000)), Optional.empty(), List.of());
        Look look = new Look(new SensorModel("mast", 1e6, DetectionProfile.constant(1), 10), view, Optional.empty(),
                rectangle(-9000, -9000, 9000, 9000), 0);
        double worst = 0;
        for (int i = -80; i <= 80; i++) {
            double sigmas = i / 20.0;
            Gaussian density = Gaussian.atRest(20 * sigmas, 10, 400, 120, 100, 5);
            double told = look.constantOver(density);
            told = Double.isNaN(told) ? look.averageOver(density) : told;
            worst = Math.max(worst, Math.abs(told - normal(sigmas)));
        }
        assertThat(worst).isLessThan(0.06);
    }

    private static double normal(double x) {
        double sum = 0;
        for (double t = -8; t < x; t += 1e-4) {
            sum += Math.exp(-t * t / 2) * 1e-4;
        }
        return sum / Math.sqrt(2 * Math.PI);
    }

    @Test
    void aDetectionMeasuredInShadowMayBeOfAnObjectBesideIt() {
        FieldOfView view = new FieldOfView(new PlanePoint(0, -500), 0, REACH, List.of(),
                List.of(rectangle(-300, -300, 0, 300)), Optional.empty(), List.of());
        Look look = new Look(new SensorModel("mast", REACH, DetectionProfile.constant(0.8), 10), view, Optional.empty(),
                CORE, APRON);
        assertThat(look.probabilityOfDetection(-10, 0)).isZero();
        // One sigma inside: the normal distribution leaves 0.1587 outside.
        assertThat(look.probabilityOfDetection(PositionMeasurement.at(-10, 0, 10))).isCloseTo(0.8 * 0.1587, within(0.03));
        assertThat(look.probabilityOfDetection(PositionMeasurement.at(10, 0, 10))).isCloseTo(0.8 * 0.8413, within(0.03));
        assertThat(look.probabilityOfDetection(PositionMeasurement.at(100, 0, 10))).isEqualTo(0.8);
        assertThat(look.probabilityOfDetection(PositionMeasurement.at(-100, 0, 10))).isZero();
    }

    @Test
    void clutterIsThatOfAScanOverAllThatTheSensorSees() {
        double disc = Math.PI * REACH * REACH;
        assertThat(density(view(0, List.of(), List.of()))).isEqualTo(10 / (StrictMath.PI * REACH * REACH));
        assertThat(density(view(500, List.of(), List.of()))).isCloseTo(10 / (0.75 * disc), within(1e-15));
        assertThat(density(view(0, List.of(Sector.of(1, Math.PI / 2)), List.of()))).isCloseTo(10 / (disc / 4), within(1e-15));
        // A shadow of 600 m by 600 m, within reach all of it.
        FieldOfView shaded = view(0, List.of(), List.of(rectangle(-300, -300, 300, 300)));
        assertThat(10 / density(shaded)).isCloseTo(disc - 360_000, within(0.005 * disc));
        FieldOfView shadedFar = view(0, List.of(), List.of(rectangle(1100, 0, 1200, 100)));
        assertThat(density(shadedFar)).isEqualTo(density(view(0, List.of(), List.of())));
        // Half of a sector of a quarter turn is behind a wall that goes on beyond the reach.
        FieldOfView behind = new FieldOfView(new PlanePoint(0, 0), 0, REACH, List.of(Sector.of(0, Math.PI / 2)), List.of(),
                new Obstacles(List.of(List.of(List.of(
                        new PlanePoint(2, 1), new PlanePoint(9000, 1), new PlanePoint(9000, 8999)))))
                        .visibleFrom(new PlanePoint(0, 0), REACH), List.of());
        assertThat(10 / density(behind)).isCloseTo(disc / 8, within(0.005 * disc));
    }

    private static FieldOfView view(double least, List<Sector> sectors, List<PlaneArea> shadows) {
        return new FieldOfView(new PlanePoint(0, 0), least, REACH, sectors, shadows, Optional.empty(), List.of());
    }

    private static double density(FieldOfView view) {
        return new Look(new SensorModel("mast", REACH, DetectionProfile.constant(0.9), 10), view, Optional.empty(), CORE,
                APRON).clutterPerSquareMetre();
    }

    private static PlaneArea box(SplittableRandom random) {
        return PlaneArea.ofRings(List.of(corners(random)));
    }

    /** A rectangle that lies askew. */
    private static List<PlanePoint> corners(SplittableRandom random) {
        double east = random.nextDouble(-900, 900);
        double north = random.nextDouble(-900, 900);
        double turn = random.nextDouble(0, 6);
        double length = random.nextDouble(50, 500);
        double width = random.nextDouble(20, 300);
        List<PlanePoint> corners = new ArrayList<>();
        for (double[] c : new double[][] {{-1, -1}, {1, -1}, {1, 1}, {-1, 1}}) {
            corners.add(new PlanePoint(
                    east + c[0] * length * Math.cos(turn) - c[1] * width * Math.sin(turn),
                    north + c[0] * length * Math.sin(turn) + c[1] * width * Math.cos(turn)));
        }
        return corners;
    }

    private static PlaneArea rectangle(double west, double south, double east, double north) {
        return PlaneArea.ofRings(List.of(List.of(
                new PlanePoint(west, south), new PlanePoint(east, south), new PlanePoint(east, north),
                new PlanePoint(west, north))));
    }
}
