package org.sweeptally.filter;

import java.util.List;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.ejml.dense.fixed.CommonOps_DDF4;
import org.sweeptally.model.Gaussian;

/**
 * Deals out what may have become of a few close objects so that each component's share is as compact as can be.
 *
 * <p>After a scan, component i is a mixture over the observations that it may have caused. Where two objects are so
 * close that each may have caused either of two observations, both mixtures have the same two humps, and their means
 * fall together although nobody believes that the objects do. But a set of objects has no order: which component
 * stands for which hump is ours to choose. So all pasts (component, observation or missed), with their marginal
 * probabilities, are dealt out anew among the components, shares q of past h for component j with sums kept both ways,
 * to make
 *
 * <pre>
 *   sum over h, j of q(h, j) * (cross-entropy of h's Bernoulli to component j's)
 * </pre>
 *
 * least: the variational best-fitting multi-Bernoulli of Williams 2015, "An efficient, variational approximation of the
 * best fitting multi-Bernoulli filter", IEEE TSP 63(1):258-273. Shares and components' moments are improved by turns,
 * neither of which can make the sum greater; the shares (a transport problem) by exchange between two components at a
 * time.
 *
 * <p>Between two that sail alike only places are compared: their velocities then hold no more than the noise of earlier
 * choices, and would go on with these. Two that cross are compared with their velocities, which keep them apart.
 */
final class BestFit {

    private static final int MOST_ROUNDS = 10;
    private static final int MOST_SWEEPS = 6;

    /** Existence is kept so far from 0 and 1 in the cost, that one scan's certainty cannot outweigh all places. */
    private static final double LEAST_EXISTENCE = 1e-3;

    private static final double SETTLED = 1e-9;

    /** Velocities that differ by more than so many standard deviations tell two objects apart. */
    private static final double ALIKE_SIGMAS = 3;

    private final double[] there;
    private final double[] absent;
    private final Gaussian[] densities;
    private final int members;
    private final double[][] shares;
    private final boolean[][] alike;

    /** Cost of each past to each component, by place alone and by place and velocity. */
    private final double[][] placeCosts;

    private final double[][] wholeCosts;

    /**
     * @param there     by past: probability of it with the object existing
     * @param absent    by past: probability of it with the object not existing
     * @param densities by past; of no account where the object cannot exist
     * @param owners    by past: the component whose past it is, by its place in the next list
     * @param before    the components' densities before the scan
     */
    BestFit(double[] there, double[] absent, Gaussian[] densities, int[] owners, List<Gaussian> before) {
        this.there = there;
        this.absent = absent;
        this.densities = densities;
        this.members = before.size();
        shares = new double[there.length][members];
        placeCosts = new double[there.length][members];
        wholeCosts = new double[there.length][members];
        alike = new boolean[members][members];
        for (int a = 0; a < members; a++) {
            for (int b = 0; b < members; b++) {
                alike[a][b] = sailAlike(before.get(a), before.get(b));
            }
        }
        for (int h = 0; h < there.length; h++) {
            shares[h][owners[h]] = 1;
        }
    }

    /** Whether two velocities may be the same, as far as is known. */
    private static boolean sailAlike(Gaussian a, Gaussian b) {
        double east = a.mean.a3 - b.mean.a3;
        double north = a.mean.a4 - b.mean.a4;
        double s11 = a.covariance.a33 + b.covariance.a33;
        double s12 = a.covariance.a34 + b.covariance.a34;
        double s22 = a.covariance.a44 + b.covariance.a44;
        double determinant = s11 * s22 - s12 * s12;
        double squared = s22 * east * east - 2 * s12 * east * north + s11 * north * north;
        return squared <= ALIKE_SIGMAS * ALIKE_SIGMAS * determinant;
    }

    /** Share of each past (row) that goes to each component (column); rows sum to 1. */
    double[][] solve() {
        for (int round = 0; round < MOST_ROUNDS; round++) {
            for (int j = 0; j < members; j++) {
                cost(j);
            }
            if (!deal()) {
                break;
            }
        }
        return shares;
    }

    /** The cost of each past to component j as it is now: -(1 - r) log(1 - R) - r (log R + E log density). */
    private void cost(int j) {
        Mixture mixture = new Mixture();
        double exists = 0;
        double not = 0;
        boolean begun = false;
        for (int h = 0; h < there.length; h++) {
            double weight = shares[h][j] * there[h];
            not += shares[h][j] * absent[h];
            if (weight > 0) {
                DMatrix4 mean = densities[h].mean;
                if (!begun) {
                    mixture.reset(mean.a1, mean.a2, mean.a3, mean.a4);
                    begun = true;
                }
                mixture.add(weight, densities[h]);
                exists += weight;
            }
        }
        double existence = exists / (exists + not);
        double bounded = Math.max(LEAST_EXISTENCE, Math.min(1 - LEAST_EXISTENCE, existence));
        double ofAbsence = -StrictMath.log(1 - bounded);
        double ofExistence = -StrictMath.log(bounded);
        CrossEntropy entropy = begun ? new CrossEntropy(mixture.matched()) : null;
        for (int h = 0; h < there.length; h++) {
            boolean compares = entropy != null && there[h] > 0;
            double existing = absent[h] * ofAbsence + there[h] * ofExistence;
            placeCosts[h][j] = existing + (compares ? there[h] * entropy.ofPlace(densities[h]) : 0);
            wholeCosts[h][j] = existing + (compares ? there[h] * entropy.ofAll(densities[h]) : 0);
        }
    }

    /** Exchanges between components until no exchange pays; whether any did. */
    private boolean deal() {
        boolean any = false;
        for (int sweep = 0; sweep < MOST_SWEEPS; sweep++) {
            boolean changed = false;
            for (int a = 0; a < members; a++) {
                for (int b = a + 1; b < members; b++) {
                    changed |= exchange(a, b);
                }
            }
            any |= changed;
            if (!changed) {
                break;
            }
        }
        return any;
    }

    /** Gives a, of all that a and b have, what is cheaper for it than for b, until it has as much as before. */
    private boolean exchange(int a, int b) {
        int[] order = new int[there.length];
        int count = 0;
        double room = 0;
        for (int h = 0; h < there.length; h++) {
            if (shares[h][a] + shares[h][b] > 0 && there[h] + absent[h] > 0) {
                order[count++] = h;
                room += shares[h][a] * (there[h] + absent[h]);
            }
        }
        sortByAdvantage(order, count, a, b);
        boolean changed = false;
        for (int k = 0; k < count; k++) {
            int h = order[k];
            double both = shares[h][a] + shares[h][b];
            double mass = there[h] + absent[h];
            double toA = Math.max(0, Math.min(both, room / mass));
            room -= toA * mass;
            changed |= Math.abs(toA - shares[h][a]) * mass > SETTLED;
            shares[h][a] = toA;
            shares[h][b] = both - toA;
        }
        return changed;
    }

    /** Insertion sort: few pasts, mostly in order, and equal ones keep theirs. */
    private void sortByAdvantage(int[] order, int count, int a, int b) {
        double[][] costs = alike[a][b] ? placeCosts : wholeCosts;
        double[] advantage = new double[there.length];
        for (int k = 0; k < count; k++) {
            int h = order[k];
            advantage[h] = (costs[h][a] - costs[h][b]) / (there[h] + absent[h]);
        }
        for (int k = 1; k < count; k++) {
            int h = order[k];
            int at = k;
            while (at > 0 && advantage[order[at - 1]] > advantage[h]) {
                order[at] = order[at - 1];
                at--;
            }
            order[at] = h;
        }
    }

    /**
     * Expected -log density of a Gaussian g under another f, but for a constant: (log |G| + tr(G^-1 (F + d d'))) /
     * 2.
     */
    private static final class CrossEntropy {

        private final DMatrix4 mean;
        private final DMatrix4x4 inverse = new DMatrix4x4();
        private final double logDeterminant;
        private final DMatrix4x4 placeInverse = new DMatrix4x4();
        private final double placeLogDeterminant;

        CrossEntropy(Gaussian g) {
            mean = g.mean;
            CommonOps_DDF4.invert(g.covariance, inverse);
            logDeterminant = StrictMath.log(CommonOps_DDF4.det(g.covariance));
            double determinant = g.positionDeterminant();
            placeInverse.a11 = g.covariance.a22 / determinant;
            placeInverse.a12 = placeInverse.a21 = -g.covariance.a12 / determinant;
            placeInverse.a22 = g.covariance.a11 / determinant;
            placeLogDeterminant = StrictMath.log(determinant);
        }

        double ofPlace(Gaussian f) {
            return 0.5 * (placeLogDeterminant + trace(f, placeInverse, 2));
        }

        double ofAll(Gaussian f) {
            return 0.5 * (logDeterminant + trace(f, inverse, 4));
        }

        private double trace(Gaussian f, DMatrix4x4 by, int size) {
            double[] d = {
                f.mean.a1 - mean.a1, f.mean.a2 - mean.a2, f.mean.a3 - mean.a3, f.mean.a4 - mean.a4
            };
            double sum = 0;
            for (int i = 0; i < size; i++) {
                for (int j = 0; j < size; j++) {
                    sum += by.get(i, j) * (f.covariance.get(i, j) + d[i] * d[j]);
                }
            }
            return sum;
        }
    }
}
