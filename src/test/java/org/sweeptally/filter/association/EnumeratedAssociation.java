package org.sweeptally.filter.association;

/** The textbook way: every event in turn, by recursion over rows. The fast methods are compared with it. */
final class EnumeratedAssociation {
    private final DenseAssociation problem;
    private final int[] columnOfRow;
    private final boolean[] used;
    private final double[][] p;
    private final double[] missed;
    private final double[] nobody;
    private double total;
    private long events;

    private EnumeratedAssociation(DenseAssociation problem) {
        this.problem = problem;
        columnOfRow = new int[problem.rows()];
        used = new boolean[problem.columns()];
        p = new double[problem.rows()][problem.columns()];
        missed = new double[problem.rows()];
        nobody = new double[problem.columns()];
    }

    /** Probabilities; the logarithm of the weight is negative infinity, and they are NaN, where nothing is possible. */
    static DenseAssociation.Answer solve(DenseAssociation problem) {
        EnumeratedAssociation sums = new EnumeratedAssociation(problem);
        sums.row(0, 1);
        for (int i = 0; i < problem.rows(); i++) {
            sums.missed[i] /= sums.total;
            for (int j = 0; j < problem.columns(); j++) {
                sums.p[i][j] /= sums.total;
            }
        }
        for (int j = 0; j < problem.columns(); j++) {
            sums.nobody[j] /= sums.total;
        }
        double logWeight = StrictMath.log(sums.total);
        return new DenseAssociation.Answer(sums.p, sums.missed, sums.nobody, logWeight, AssociationCounts.NONE);
    }

    static long events(DenseAssociation problem) {
        EnumeratedAssociation sums = new EnumeratedAssociation(problem);
        sums.row(0, 1);
        return sums.events;
    }

    private void row(int i, double weight) {
        if (i == problem.rows()) {
            event(weight);
            return;
        }
        columnOfRow[i] = -1;
        row(i + 1, weight * problem.d()[i]);
        for (int j = 0; j < problem.columns(); j++) {
            if (!used[j] && problem.w()[i][j] > 0) {
                used[j] = true;
                columnOfRow[i] = j;
                row(i + 1, weight * problem.w()[i][j]);
                used[j] = false;
            }
        }
    }

    private void event(double weightOfRows) {
        double weight = weightOfRows;
        for (int j = 0; j < problem.columns(); j++) {
            weight *= used[j] ? 1 : problem.c()[j];
        }
        events++;
        total += weight;
        for (int i = 0; i < problem.rows(); i++) {
            if (columnOfRow[i] < 0) {
                missed[i] += weight;
            } else {
                p[i][columnOfRow[i]] += weight;
            }
        }
        for (int j = 0; j < problem.columns(); j++) {
            nobody[j] += used[j] ? 0 : weight;
        }
    }
}
