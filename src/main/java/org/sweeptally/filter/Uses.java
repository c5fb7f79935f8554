package org.sweeptally.filter;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;

/** Which observations a component used, and how probably. */
final class Uses {

    /** Detections used with less than this probability are not named in what is published. */
    private static final double LEAST_USE = 0.01;

    private final Scan scan;

    private int[] observations = new int[8];
    private double[] probabilities = new double[8];
    private int count;

    Uses(Scan scan) {
        this.scan = scan;
    }

    void add(int observation, double probability) {
        for (int k = 0; k < count; k++) {
            if (observations[k] == observation) {
                probabilities[k] += probability;
                return;
            }
        }
        if (count == observations.length) {
            observations = Arrays.copyOf(observations, 2 * count);
            probabilities = Arrays.copyOf(probabilities, 2 * count);
        }
        int at = count++;
        while (at > 0 && observations[at - 1] > observation) {
            observations[at] = observations[at - 1];
            probabilities[at] = probabilities[at - 1];
            at--;
        }
        observations[at] = observation;
        probabilities[at] = probability;
    }

    void divide(double by) {
        for (int k = 0; k < count; k++) {
            probabilities[k] /= by;
        }
    }

    void into(Component component) {
        List<Component.Use> used = new ArrayList<>();
        for (int k = 0; k < count; k++) {
            if (probabilities[k] >= LEAST_USE) {
                Observation observation = scan.observations().get(observations[k]);
                double probability = Math.min(1, probabilities[k]);
                used.add(new Component.Use(
                        observation.part(), observation.index(), observation.id(), probability));
                if (observation.declared() != null) {
                    component.history = component.history.declaredAs(observation.declared(), probability);
                }
            }
        }
        component.used = List.copyOf(used);
    }
}
