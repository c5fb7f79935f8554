package org.sweeptally.filter.association;

import java.util.Random;

/** A small association problem as a matrix, for tests: easy to permute, to scale, to turn and to enumerate. */
record DenseAssociation(double[][] w, double[] d, double[] c) {
    static final AssociationBounds EXACT = new AssociationBounds(1L << 24, 1);
    static final AssociationBounds PROPAGATED = new AssociationBounds(0, 100_000);

    /** Answer in the same shape: p[i][j], missed[i], nobody[j], ln of the summed weight. */
    record Answer(double[][] p, double[] missed, double[] nobody, double logWeight, AssociationCounts counts) {}

    static DenseAssociation ofRatios(double[]... w) {
        double[] d = new double[w.length];
        double[] c = new double[w[0].length];
        java.util.Arrays.fill(d, 1);
        java.util.Arrays.fill(c, 1);
        return new DenseAssociation(w, d, c);
    }

    /**
     * Log-normal weights.
     *
     * @param zeroShare share of weights that are zero, pairs and alone
     */
    static DenseAssociation random(Random random, int rows, int columns, double density, double zeroShare) {
        double[][] w = new double[rows][columns];
        double[] d = new double[rows];
        double[] c = new double[columns];
        for (int i = 0; i < rows; i++) {
            d[i] = random.nextDouble() < zeroShare ? 0 : StrictMath.exp(2 * random.nextGaussian() - 1);
            for (int j = 0; j < columns; j++) {
                w[i][j] = random.nextDouble() < density ? StrictMath.exp(2 * random.nextGaussian()) : 0;
            }
        }
        for (int j = 0; j < columns; j++) {
            c[j] = random.nextDouble() < zeroShare ? 0 : StrictMath.exp(2 * random.nextGaussian() - 1);
        }
        return new DenseAssociation(w, d, c);
    }

    int rows() {
        return w.length;
    }

    int columns() {
        return c.length;
    }

    AssociationProblem problem() {
        AssociationProblem problem = new AssociationProblem();
        problem.clear();
        for (double weight : c) {
            problem.addColumn(weight);
        }
        for (int i = 0; i < rows(); i++) {
            problem.addRow(d[i]);
            for (int j = 0; j < columns(); j++) {
                if (w[i][j] > 0) {
                    problem.addPair(j, w[i][j]);
                }
            }
        }
        return problem;
    }

    Answer solve(AssociationBounds bounds) {
        AssociationProblem problem = problem();
        return spread(problem, new Association().solve(problem, bounds));
    }

    /** Belief propagation over a problem of one cluster, whatever its shape, to the limit of rounding. */
    Answer propagate(int mostSweeps) {
        AssociationProblem problem = problem();
        Clusters clusters = new Clusters();
        clusters.split(problem);
        Cluster cluster = new Cluster();
        cluster.load(problem, clusters, 0);
        PropagatedAssociation propagation = new PropagatedAssociation(1e-14);
        propagation.solve(cluster, mostSweeps);
        AssociationMarginals marginals = new AssociationMarginals();
        marginals.begin(problem);
        cluster.store(marginals);
        marginals.finish(cluster.scale.log(), new AssociationCounts(
                0, 0, 0, 1, propagation.sweeps(), propagation.settled() ? 0 : 1, 0, 0, 0));
        return spread(problem, marginals);
    }

    Answer spread(AssociationProblem problem, AssociationMarginals marginals) {
        double[][] p = new double[rows()][columns()];
        double[] missed = new double[rows()];
        double[] nobody = new double[columns()];
        for (int i = 0; i < rows(); i++) {
            missed[i] = marginals.missed(i);
            for (int pair = problem.rowStart(i); pair < problem.rowStart(i + 1); pair++) {
                p[i][problem.column(pair)] = marginals.pair(pair);
            }
        }
        for (int j = 0; j < columns(); j++) {
            nobody[j] = marginals.nobody(j);
        }
        return new Answer(p, missed, nobody, marginals.logWeight(), marginals.counts());
    }

    DenseAssociation turned() {
        double[][] t = new double[columns()][rows()];
        for (int i = 0; i < rows(); i++) {
            for (int j = 0; j < columns(); j++) {
                t[j][i] = w[i][j];
            }
        }
        return new DenseAssociation(t, c, d);
    }

    /** Row i of the result is row rowOrder[i] of this, likewise columns. */
    DenseAssociation permuted(int[] rowOrder, int[] columnOrder) {
        double[][] q = new double[rows()][columns()];
        double[] e = new double[rows()];
        double[] b = new double[columns()];
        for (int i = 0; i < rows(); i++) {
            e[i] = d[rowOrder[i]];
            for (int j = 0; j < columns(); j++) {
                q[i][j] = w[rowOrder[i]][columnOrder[j]];
                b[j] = c[columnOrder[j]];
            }
        }
        return new DenseAssociation(q, e, b);
    }

    DenseAssociation scaled(double[] rowFactor, double[] columnFactor) {
        double[][] q = new double[rows()][columns()];
        double[] e = new double[rows()];
        double[] b = new double[columns()];
        for (int i = 0; i < rows(); i++) {
            e[i] = d[i] * rowFactor[i];
            for (int j = 0; j < columns(); j++) {
                q[i][j] = w[i][j] * rowFactor[i] * columnFactor[j];
                b[j] = c[j] * columnFactor[j];
            }
        }
        return new DenseAssociation(q, e, b);
    }

    static int[] shuffledOrder(Random random, int n) {
        int[] order = new int[n];
        for (int i = 0; i < n; i++) {
            int j = random.nextInt(i + 1);
            order[i] = order[j];
            order[j] = i;
        }
        return order;
    }
}
