package org.sweeptally.filter.association;

/**
 * Marginal association probabilities of one scan: for each component, that it was missed and that each gated detection
 * is its own; for each detection, that it is nobody's.
 *
 * <p>The problem falls apart into clusters that share no detection. A cluster of one row or one column has a closed
 * form; one whose {@link FrontierPlan} is affordable, by rows or by columns, whichever is cheaper, is solved exactly
 * ({@link FrontierAssociation}); the rest goes to {@link PropagatedAssociation belief propagation}.
 *
 * <p>A cluster whose every event has weight zero (two certain objects, always detected, with one detection
 * between them) is answered by its least impossible explanation: the limit as all its zero missed and nobody's
 * weights, beside row and column weights of order one, tend to zero together. It is counted, and the logarithm of the
 * weight is negative infinity. Belief propagation does not notice it.
 *
 * <p>An instance owns its storage and its answer: one thread, and an answer holds until the next call.
 */
public final class Association {
    private final Clusters clusters = new Clusters();
    private final Cluster cluster = new Cluster();
    private final Cluster turned = new Cluster();
    private final StarAssociation star = new StarAssociation();
    private final FrontierPlan byRows = new FrontierPlan();
    private final FrontierPlan byColumns = new FrontierPlan();
    private final FrontierAssociation frontier = new FrontierAssociation();
    private final PropagatedAssociation propagation =
            new PropagatedAssociation(PropagatedAssociation.TOLERANCE);
    private final AssociationMarginals marginals = new AssociationMarginals();

    private final LogProduct weight = new LogProduct();
    private long closed;
    private long exact;
    private long exactSteps;
    private long propagated;
    private long sweeps;
    private long sweepCapHits;
    private long impossible;
    private long underflows;
    private int widestFrontier;

    /** Solves the problem; the answer is this object's and holds until the next call. */
    public AssociationMarginals solve(AssociationProblem problem, AssociationBounds bounds) {
        begin();
        marginals.begin(problem);
        clusters.split(problem);
        answerLoneColumns(problem);
        for (int k = 0; k < clusters.count(); k++) {
            cluster.load(problem, clusters, k);
            solveCluster(bounds);
            cluster.store(marginals);
            weight.times(cluster.scale);
        }
        marginals.finish(weight.log(), new AssociationCounts(
                closed, exact, exactSteps, propagated, sweeps, sweepCapHits, impossible, underflows,
                widestFrontier));
        return marginals;
    }

    /** Columns without a pair are nobody's; pairs of weight zero never happen. */
    private void answerLoneColumns(AssociationProblem problem) {
        for (int j = 0; j < problem.columns(); j++) {
            if (!clusters.hasPair(j)) {
                marginals.setNobody(j, 1);
                weight.times(problem.nobodyWeight(j));
                impossible += problem.nobodyWeight(j) == 0 ? 1 : 0;
                closed++;
            }
        }
        for (int p = 0; p < problem.pairs(); p++) {
            if (problem.weight(p) == 0) {
                marginals.setPair(p, 0);
            }
        }
    }

    private void solveCluster(AssociationBounds bounds) {
        if (cluster.rows == 1) {
            solveStar(cluster);
        } else if (cluster.columns == 1) {
            turned.turn(cluster);
            solveStar(turned);
            cluster.takeTurned(turned);
        } else if (!solveExactly(bounds.exactSteps())) {
            propagate(bounds.propagationSweeps());
        }
    }

    private void solveStar(Cluster oneRow) {
        closed++;
        if (!star.solve(oneRow)) {
            oneRow.floorZeros();
            star.solve(oneRow);
            answerImpossible(oneRow);
        }
    }

    private boolean solveExactly(long exactSteps) {
        byRows.find(cluster, exactSteps);
        if (byRows.cost <= FrontierPlan.CHEAP) {
            return solveExactly(cluster, byRows);
        }
        turned.turn(cluster);
        byColumns.find(turned, Math.min(exactSteps, byRows.cost - 1));
        if (byColumns.cost < byRows.cost) {
            boolean solved = solveExactly(turned, byColumns);
            cluster.takeTurned(turned);
            return solved;
        }
        return byRows.cost != FrontierPlan.UNAFFORDABLE && solveExactly(cluster, byRows);
    }

    private boolean solveExactly(Cluster oriented, FrontierPlan plan) {
        boolean possible = frontier.solve(oriented, plan.order);
        boolean solved = possible || oriented.floorZeros() && frontier.solve(oriented, plan.order);
        if (!solved) {
            underflows++;
            return false;
        }
        if (!possible) {
            answerImpossible(oriented);
        }
        exact++;
        exactSteps += plan.cost;
        widestFrontier = Math.max(widestFrontier, plan.widest);
        return true;
    }

    private void propagate(int mostSweeps) {
        propagation.solve(cluster, mostSweeps);
        propagated++;
        sweeps += propagation.sweeps();
        sweepCapHits += propagation.settled() ? 0 : 1;
    }

    private void answerImpossible(Cluster answered) {
        impossible++;
        answered.scale.times(0);
    }

    private void begin() {
        weight.clear();
        closed = 0;
        exact = 0;
        exactSteps = 0;
        propagated = 0;
        sweeps = 0;
        sweepCapHits = 0;
        impossible = 0;
        underflows = 0;
        widestFrontier = 0;
    }
}
