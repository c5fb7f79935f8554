package org.sweeptally.filter.association;

/**
 * Marginal probabilities of one {@link AssociationProblem}, by its numbers of rows, columns and pairs.
 *
 * <p>Every probability of an exact cluster is a ratio of sums without cancellation, so small ones are accurate
 * relatively. A row's missed probability and its pairs sum to 1, a column's nobody's probability and its pairs too
 * (after belief propagation as far as the messages settled).
 */
public final class AssociationMarginals {
    private double[] missed = new double[64];
    private double[] nobody = new double[64];
    private double[] pair = new double[256];
    private double logWeight;
    private AssociationCounts counts = AssociationCounts.NONE;

    /** Probability that the row's component has no detection in the scan. */
    public double missed(int row) {
        return missed[row];
    }

    /** Probability that the pair's detection is its component's. */
    public double pair(int pair) {
        return this.pair[pair];
    }

    /** Probability that the column's detection is no component's: clutter or a new object. */
    public double nobody(int column) {
        return nobody[column];
    }

    /**
     * Natural logarithm of the summed weight of all events: the likelihood of the scan. A cluster solved by belief
     * propagation adds its Bethe value; an impossible one makes it negative infinity.
     */
    public double logWeight() {
        return logWeight;
    }

    public AssociationCounts counts() {
        return counts;
    }

    void begin(AssociationProblem problem) {
        missed = atLeast(missed, problem.rows());
        nobody = atLeast(nobody, problem.columns());
        pair = atLeast(pair, problem.pairs());
    }

    void setMissed(int row, double probability) {
        missed[row] = probability;
    }

    void setPair(int pair, double probability) {
        this.pair[pair] = probability;
    }

    void setNobody(int column, double probability) {
        nobody[column] = probability;
    }

    void finish(double logWeight, AssociationCounts counts) {
        this.logWeight = logWeight;
        this.counts = counts;
    }

    private static double[] atLeast(double[] array, int length) {
        return array.length >= length ? array : new double[Math.max(length, 2 * array.length)];
    }
}
