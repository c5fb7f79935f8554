package org.sweeptally.bench;

import java.util.Random;
import org.sweeptally.filter.association.AssociationProblem;

/**
 * An invented cluster of close objects and their detections, in units of the innovation's standard deviation:
 * existence 0.95, probability of detection 0.9, 0.001 clutter in a unit square.
 */
final class AssociationScene {
    private static final double EXISTENCE = .95;
    private static final double DETECTED = .9;
    private static final double CLUTTER = .001;

    private AssociationScene() {}

    /** As many objects as detections, in a square of side 3, each with each: the shape named {@code dense-k}. */
    static AssociationProblem dense(int objects, long seed) {
        Random random = new Random(seed);
        double[][] place = new double[objects][2];
        double[][] detection = new double[objects][2];
        for (int i = 0; i < objects; i++) {
            for (int axis = 0; axis < 2; axis++) {
                place[i][axis] = 3 * random.nextDouble();
                detection[i][axis] = place[i][axis] + random.nextGaussian();
            }
        }
        return problem(place, detection, objects);
    }

    /** Objects 1.5 apart on a line, each with the detections of its neighbours within half the width. */
    static AssociationProblem chain(int objects, int width, long seed) {
        Random random = new Random(seed);
        double[][] place = new double[objects][2];
        double[][] detection = new double[objects][2];
        for (int i = 0; i < objects; i++) {
            place[i][0] = 1.5 * i;
            detection[i][0] = place[i][0] + random.nextGaussian();
            detection[i][1] = random.nextGaussian();
        }
        return problem(place, detection, width);
    }

    /** Shapes {@code dense-k} and {@code chain-rows-width}. */
    static AssociationProblem of(String shape, long seed) {
        String[] part = shape.split("-");
        return part[0].equals("dense")
                ? dense(Integer.parseInt(part[1]), seed)
                : chain(Integer.parseInt(part[1]), Integer.parseInt(part[2]), seed);
    }

    /** Row i has the columns from i - width / 2 to i + (width + 1) / 2; with width the number of objects, all. */
    private static AssociationProblem problem(double[][] place, double[][] detection, int width) {
        int n = place.length;
        boolean all = width >= n;
        AssociationProblem problem = new AssociationProblem();
        for (int j = 0; j < n; j++) {
            problem.addColumn(CLUTTER);
        }
        for (int i = 0; i < n; i++) {
            problem.addRow(1 - EXISTENCE * DETECTED);
            int first = all ? 0 : Math.max(0, i - width / 2);
            int last = all ? n - 1 : Math.min(n - 1, i + (width + 1) / 2);
            for (int j = first; j <= last; j++) {
                double east = detection[j][0] - place[i][0];
                double north = detection[j][1] - place[i][1];
                double likelihood = StrictMath.exp(-(east * east + north * north) / 2) / (2 * Math.PI);
                problem.addPair(j, EXISTENCE * DETECTED * likelihood);
            }
        }
        return problem;
    }

    /** Several hundred to thousands of objects, strewn: about the given number of columns gated by each. */
    static AssociationProblem field(int objects, int clutter, double gatedByEach, long seed) {
        Random random = new Random(seed);
        double gate = 4;
        double side = Math.sqrt(Math.PI * gate * gate * (objects + clutter) / gatedByEach);
        double[][] place = new double[objects][2];
        double[][] detection = new double[objects + clutter][2];
        for (int i = 0; i < objects + clutter; i++) {
            for (int axis = 0; axis < 2; axis++) {
                double at = side * random.nextDouble();
                detection[i][axis] = at;
                if (i < objects) {
                    place[i][axis] = at;
                    detection[i][axis] += random.nextGaussian();
                }
            }
        }
        AssociationProblem problem = new AssociationProblem();
        for (int j = 0; j < objects + clutter; j++) {
            problem.addColumn(Math.max(CLUTTER, clutter / (side * side)));
        }
        for (int i = 0; i < objects; i++) {
            problem.addRow(1 - EXISTENCE * DETECTED);
            for (int j = 0; j < objects + clutter; j++) {
                double east = detection[j][0] - place[i][0];
                double north = detection[j][1] - place[i][1];
                double square = east * east + north * north;
                if (square < gate * gate) {
                    problem.addPair(j, EXISTENCE * DETECTED * StrictMath.exp(-square / 2) / (2 * Math.PI));
                }
            }
        }
        return problem;
    }
}
