package org.sweeptally.score;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.SplittableRandom;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;

/**
 * The definition is that of Schuhmacher, Vo and Vo 2008, IEEE TSP 56(8):3447-3457 (from memory). The worked cases are
 * small enough to redo by hand; they were computed twice, by going through all permutations and by an independent
 * library.
 */
class OspaTest {

    private static final double TOLERANCE = 1e-12;

    /** Truth, estimates, cut; then distance, localisation, cardinality for p = 1 and for p = 2. */
    private record Worked(
            double[][] truth, double[][] estimates, double cut, double[] first, double[] second) {}

    private static Worked worked(double[][] truth, double[][] estimates, double cut, double[] first, double[] second) {
        return new Worked(truth, estimates, cut, first, second);
    }

    private static double[][] at(double... eastNorth) {
        double[][] points = new double[eastNorth.length / 2][];
        for (int i = 0; i < points.length; i++) {
            points[i] = new double[] {eastNorth[2 * i], eastNorth[2 * i + 1]};
        }
        return points;
    }

    private static double[] r(double... values) {
        return values;
    }

    static Stream<Worked> workedCases() {
        double[][] two = at(0, 0, 100, 0);
        return Stream.of(
                worked(at(), at(), 100, r(0, 0, 0), r(0, 0, 0)),
                worked(at(), at(0, 0), 100, r(100, 0, 100), r(100, 0, 100)),
                worked(at(0, 0), at(3, 4), 100, r(5, 5, 0), r(5, 5, 0)),
                worked(two, at(3, 4, 100, 12), 100, r(8.5, 8.5, 0), r(9.192388155425117, 9.192388155425117, 0)),
                worked(two, at(3, 4, 100, 12, 500, 500), 100,
                        r(39, 17.0 / 3, 100.0 / 3), r(58.22084391922421, 7.505553499465135, 57.735026918962575)),
                worked(at(0, 0), at(300, 400), 100, r(100, 100, 0), r(100, 100, 0)),
                worked(at(0, 0, 10, 0), at(10, 1, 0, 1), 100, r(1, 1, 0), r(1, 1, 0)),
                // Whoever takes the nearest pair first gets 7 and 9.22.
                worked(at(0, 0, 10, 0), at(9, 0, 13, 0), 20, r(6, 6, 0), r(6.708203932499369, 6.708203932499369, 0)),
                worked(at(0, 0, 50, 0, 0, 50), at(6, 8), 50,
                        r(36.666666666666664, 10.0 / 3, 100.0 / 3),
                        r(41.23105625617661, 5.773502691896258, 40.824829046386306)));
    }

    @ParameterizedTest
    @MethodSource("workedCases")
    void workedCasesComeOut(Worked c) {
        Ospa.Score first = new Ospa(c.cut, 1).between(c.truth, c.estimates);
        Ospa.Score second = new Ospa(c.cut, 2).between(c.truth, c.estimates);
        assertThat(r(first.distance(), first.localisation(), first.cardinality()))
                .containsExactly(c.first, within(TOLERANCE));
        assertThat(r(second.distance(), second.localisation(), second.cardinality()))
                .containsExactly(c.second, within(TOLERANCE));
    }

    @Test
    void itIsAMetricNoGreaterThanTheCut() {
        SplittableRandom random = new SplittableRandom(2008);
        double[] orders = {1, 2, 3.5};
        for (int n = 0; n < 3000; n++) {
            double cut = 5 + 60 * random.nextDouble();
            Ospa ospa = new Ospa(cut, orders[n % 3]);
            double[][] x = random(random);
            double[][] y = random(random);
            double[][] z = random(random);
            String about = "case " + n + " of seed 2008";
            assertThat(ospa.between(x, x).distance()).as(about).isZero();
            double xy = ospa.between(x, y).distance();
            assertThat(xy)
                    .as(about)
                    .isCloseTo(ospa.between(y, x).distance(), within(1e-9))
                    .isBetween(0.0, cut * (1 + 1e-12));
            assertThat(ospa.between(x, z).distance())
                    .as(about)
                    .isLessThanOrEqualTo(xy + ospa.between(y, z).distance() + 1e-9);
            if (x.length != y.length) {
                assertThat(xy).as(about).isPositive();
            }
        }
    }

    @Test
    void thePartsMakeTheWholeAndNoPermutationIsNearer() {
        SplittableRandom random = new SplittableRandom(56);
        for (int n = 0; n < 1000; n++) {
            double order = 1 + random.nextInt(3);
            Ospa ospa = new Ospa(40, order);
            double[][] x = random(random);
            double[][] y = random(random);
            Ospa.Score score = ospa.between(x, y);
            assertThat(StrictMath.pow(score.localisation(), order) + StrictMath.pow(score.cardinality(), order))
                    .as("case %s of seed 56", n)
                    .isCloseTo(StrictMath.pow(score.distance(), order), within(1e-8));
            assertThat(score.distance())
                    .as("case %s of seed 56", n)
                    .isCloseTo(byPermutations(x, y, 40, order), within(1e-9));
        }
    }

    @Test
    void aCutOfNothingIsRefused() {
        assertThatThrownBy(() -> new Ospa(0, 1)).hasMessageContaining("cut 0.0 m");
        assertThatThrownBy(() -> new Ospa(10, 0.5)).hasMessageContaining("order 0.5");
    }

    private static double[][] random(SplittableRandom random) {
        double[][] points = new double[random.nextInt(6)][];
        for (int i = 0; i < points.length; i++) {
            points[i] = new double[] {60 * random.nextDouble(), 60 * random.nextDouble()};
        }
        return points;
    }

    /** The textbook formula, going through all permutations. */
    private static double byPermutations(double[][] x, double[][] y, double cut, double order) {
        double[][] fewer = x.length <= y.length ? x : y;
        double[][] more = x.length <= y.length ? y : x;
        if (more.length == 0) {
            return 0;
        }
        double pairs = least(fewer, more, 0, new boolean[more.length], cut, order);
        double alone = StrictMath.pow(cut, order) * (more.length - fewer.length);
        return StrictMath.pow((pairs + alone) / more.length, 1 / order);
    }

    private static double least(double[][] fewer, double[][] more, int i, boolean[] used, double cut, double order) {
        if (i == fewer.length) {
            return 0;
        }
        double least = Double.POSITIVE_INFINITY;
        for (int j = 0; j < more.length; j++) {
            if (!used[j]) {
                used[j] = true;
                double d = StrictMath.hypot(fewer[i][0] - more[j][0], fewer[i][1] - more[j][1]);
                double here = StrictMath.pow(Math.min(cut, d), order);
                least = Math.min(least, here + least(fewer, more, i + 1, used, cut, order));
                used[j] = false;
            }
        }
        return least;
    }
}
