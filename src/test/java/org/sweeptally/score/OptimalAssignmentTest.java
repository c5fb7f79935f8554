package org.sweeptally.score;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.SplittableRandom;
import org.jgrapht.alg.matching.KuhnMunkresMinimalWeightBipartitePerfectMatching;
import org.jgrapht.graph.DefaultWeightedEdge;
import org.jgrapht.graph.SimpleWeightedGraph;
import org.junit.jupiter.api.Test;

class OptimalAssignmentTest {

    @Test
    void noOrderOfColumnsIsCheaper() {
        SplittableRandom random = new SplittableRandom(41);
        for (int n = 0; n < 2000; n++) {
            int rows = random.nextInt(6);
            int columns = rows + random.nextInt(3);
            double[][] cost = random(random, rows, columns);
            assertThat(total(cost, OptimalAssignment.of(cost)))
                    .as("case %s of seed 41", n)
                    .isCloseTo(cheapest(cost, 0, new boolean[columns]), within(1e-12));
        }
    }

    /** Second opinion: the Kuhn-Munkres matching of JGraphT, an independent library. */
    @Test
    void anIndependentLibraryFindsTheSameTotal() {
        SplittableRandom random = new SplittableRandom(42);
        for (int n = 0; n < 20; n++) {
            int size = 1 + random.nextInt(30);
            double[][] cost = random(random, size, size);
            assertThat(total(cost, OptimalAssignment.of(cost)))
                    .as("case %s of seed 42, %s x %s", n, size, size)
                    .isCloseTo(byLibrary(cost), within(1e-9));
        }
    }

    @Test
    void tiesAndEqualCostsAreNoTrouble() {
        assertThat(OptimalAssignment.of(new double[][] {{1, 1, 1}, {1, 1, 1}, {1, 1, 1}}))
                .containsExactlyInAnyOrder(0, 1, 2);
        assertThat(OptimalAssignment.of(new double[0][])).isEmpty();
    }

    @Test
    void whatCannotBeAssignedIsRefused() {
        assertThatThrownBy(() -> OptimalAssignment.of(new double[][] {{1}, {2}}))
                .hasMessageContaining("2 rows, but only 1 columns");
        assertThatThrownBy(() -> OptimalAssignment.of(new double[][] {{Double.NaN}}))
                .hasMessageContaining("not finite");
    }

    private static double[][] random(SplittableRandom random, int rows, int columns) {
        double[][] cost = new double[rows][columns];
        for (double[] row : cost) {
            for (int j = 0; j < columns; j++) {
                row[j] = random.nextInt(4) == 0 ? random.nextInt(5) : 100 * random.nextDouble();
            }
        }
        return cost;
    }

    private static double total(double[][] cost, int[] columnOf) {
        double sum = 0;
        boolean[] used = new boolean[cost.length == 0 ? 0 : cost[0].length];
        for (int i = 0; i < cost.length; i++) {
            assertThat(used[columnOf[i]]).isFalse();
            used[columnOf[i]] = true;
            sum += cost[i][columnOf[i]];
        }
        return sum;
    }

    private static double cheapest(double[][] cost, int row, boolean[] used) {
        if (row == cost.length) {
            return 0;
        }
        double least = Double.POSITIVE_INFINITY;
        for (int j = 0; j < used.length; j++) {
            if (!used[j]) {
                used[j] = true;
                least = Math.min(least, cost[row][j] + cheapest(cost, row + 1, used));
                used[j] = false;
            }
        }
        return least;
    }

    private static double byLibrary(double[][] cost) {
        SimpleWeightedGraph<Integer, DefaultWeightedEdge> graph = new SimpleWeightedGraph<>(DefaultWeightedEdge.class);
        List<Integer> left = new ArrayList<>();
        List<Integer> right = new ArrayList<>();
        for (int i = 0; i < cost.length; i++) {
            left.add(i);
            right.add(1000 + i);
            graph.addVertex(i);
            graph.addVertex(1000 + i);
        }
        for (int i = 0; i < cost.length; i++) {
            for (int j = 0; j < cost.length; j++) {
                graph.setEdgeWeight(graph.addEdge(i, 1000 + j), cost[i][j]);
            }
        }
        return new KuhnMunkresMinimalWeightBipartitePerfectMatching<>(
                        graph, new LinkedHashSet<>(left), new LinkedHashSet<>(right))
                .getMatching()
                .getWeight();
    }
}
