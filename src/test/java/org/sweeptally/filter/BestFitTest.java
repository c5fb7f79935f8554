package org.sweeptally.filter;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.SplittableRandom;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.junit.jupiter.api.Test;
import org.sweeptally.model.Gaussian;

class BestFitTest {

    /**
     * Two components between two observations, each as likely to have caused either: each gets one observation
     * whole.
     */
    @Test
    void twoCoinTossesBecomeTwoPlaces() {
        Gaussian[] densities = {at(-10, 0), at(10, 0), at(-10.5, 0), at(9.5, 0)};
        double[][] shares = new BestFit(
                        new double[] {0.5, 0.5, 0.5, 0.5}, new double[4], densities, new int[] {0, 0, 1, 1},
                        List.of(at(0.2, 0), at(-0.2, 0)))
                .solve();
        int first = shares[0][0] > 0.5 ? 0 : 1;
        assertThat(shares[0][first]).isCloseTo(1, within(1e-9));
        assertThat(shares[2][first]).isCloseTo(1, within(1e-9));
        assertThat(shares[1][1 - first]).isCloseTo(1, within(1e-9));
        assertThat(shares[3][1 - first]).isCloseTo(1, within(1e-9));
    }

    @Test
    void whatIsNobodyElsesStaysWhereItIs() {
        Gaussian[] densities = {at(0, 0), at(5, 0), at(400, 0), at(404, 0)};
        double[][] shares = new BestFit(
                        new double[] {0.1, 0.8, 0.2, 0.8}, new double[] {0.1, 0, 0, 0}, densities, new int[] {0, 0, 1, 1},
                        List.of(at(0, 0), at(400, 0)))
                .solve();
        assertStay(shares);
    }

    private static void assertStay(double[][] shares) {
        for (int h = 0; h < shares.length; h++) {
            assertThat(shares[h][h / 2]).as("past %s", h).isCloseTo(1, within(1e-9));
        }
    }

    /** Of a crossing pair the velocities tell which is which, however near they are to each other. */
    @Test
    void twoThatCrossAreNotExchanged() {
        Gaussian east = moving(0, 0, 8, 0);
        Gaussian north = moving(1, 1, 0, 8);
        Gaussian[] densities = {moving(2, 0, 8, 0.2), moving(0, 2, 7.8, 0.1), moving(0, 2, 0.1, 8), moving(2, 0, 0, 8)};
        double[][] shares = new BestFit(
                        new double[] {0.5, 0.5, 0.5, 0.5}, new double[4], densities, new int[] {0, 0, 1, 1},
                        List.of(east, north))
                .solve();
        assertStay(shares);
    }

    /**
     * Whatever is dealt out: pasts go out whole, every component keeps its whole probability, and so existence its
     * sum.
     */
    @Test
    void nothingIsLostInDealing() {
        for (long seed = 1; seed <= 300; seed++) {
            SplittableRandom random = new SplittableRandom(seed);
            int members = 2 + random.nextInt(4);
            int each = 1 + random.nextInt(4);
            int pasts = members * each;
            double[] there = new double[pasts];
            double[] absent = new double[pasts];
            Gaussian[] densities = new Gaussian[pasts];
            int[] owners = new int[pasts];
            for (int a = 0; a < members; a++) {
                double sum = 0;
                for (int h = a * each; h < (a + 1) * each; h++) {
                    there[h] = random.nextDouble();
                    absent[h] = h == a * each ? random.nextDouble() : 0;
                    sum += there[h] + absent[h];
                    densities[h] = at(40 * random.nextDouble(), 40 * random.nextDouble());
                    owners[h] = a;
                }
                for (int h = a * each; h < (a + 1) * each; h++) {
                    there[h] /= sum;
                    absent[h] /= sum;
                }
            }
            List<Gaussian> before = java.util.stream.IntStream.range(0, members)
                    .mapToObj(a -> at(40 * random.nextDouble(), 40 * random.nextDouble()))
                    .toList();
            double[][] shares = new BestFit(there, absent, densities, owners, before).solve();
            for (int h = 0; h < pasts; h++) {
                double row = 0;
                for (double share : shares[h]) {
                    assertThat(share).as("seed %s", seed).isBetween(0.0, 1 + 1e-12);
                    row += share;
                }
                assertThat(row).as("seed %s, past %s", seed, h).isCloseTo(1, within(1e-9));
            }
            for (int a = 0; a < members; a++) {
                double column = 0;
                for (int h = 0; h < pasts; h++) {
                    column += shares[h][a] * (there[h] + absent[h]);
                }
                assertThat(column).as("seed %s, component %s", seed, a).isCloseTo(1, within(1e-9));
            }
        }
    }

    private static Gaussian at(double east, double north) {
        return Gaussian.atRest(east, north, 25, 0, 25, 3);
    }

    private static Gaussian moving(double east, double north, double eastVelocity, double northVelocity) {
        return new Gaussian(
                new DMatrix4(east, north, eastVelocity, northVelocity),
                new DMatrix4x4(25, 0, 0, 0, 0, 25, 0, 0, 0, 0, 0.5, 0, 0, 0, 0, 0.5));
    }
}
