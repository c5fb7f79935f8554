package org.sweeptally.score;

/**
 * How far a set of estimated places is from the set of true ones: the optimal subpattern assignment metric of
 * Schuhmacher, Vo and Vo 2008, "A consistent metric for performance evaluation of multi-object filters", IEEE TSP
 * 56(8):3447-3457. With m &lt;= n points, d the Euclidean distance and d_c = min(d, c):
 *
 * <pre>
 *   OSPA = ( (1/n) ( min over assignments of sum d_c^p  +  c^p (n - m) ) )^(1/p)
 * </pre>
 *
 * Two empty sets are at distance 0, an empty set and another at distance c.
 *
 * @param cutMetres c: the price of a point that has no partner, and the most that a pair may cost
 * @param order     p, 1 or more: the greater, the more the worst pair weighs
 */
public record Ospa(double cutMetres, double order) {

    /**
     * A distance and its two parts, metres; distance^p = localisation^p + cardinality^p.
     *
     * @param localisation from pairs
     * @param cardinality  from points without a partner
     */
    public record Score(double distance, double localisation, double cardinality) {}

    public Ospa {
        if (!(cutMetres > 0 && order >= 1)) {
            throw new IllegalArgumentException("cut " + cutMetres + " m and order " + order
                    + ": a cut above 0 and an order of 1 or more needed");
        }
    }

    /**
     * The distance between two sets of points; it is symmetric.
     *
     * @param one   points, each [east, north], metres
     * @param other points, each [east, north], metres
     */
    public Score between(double[][] one, double[][] other) {
        double[][] fewer = one.length <= other.length ? one : other;
        double[][] more = one.length <= other.length ? other : one;
        int n = more.length;
        if (n == 0) {
            return new Score(0, 0, 0);
        }
        double[][] cost = new double[fewer.length][n];
        for (int i = 0; i < fewer.length; i++) {
            for (int j = 0; j < n; j++) {
                cost[i][j] = power(Math.min(cutMetres, distance(fewer[i], more[j])));
            }
        }
        double pairs = 0;
        int[] partner = OptimalAssignment.of(cost);
        for (int i = 0; i < partner.length; i++) {
            pairs += cost[i][partner[i]];
        }
        double alone = power(cutMetres) * (n - fewer.length);
        return new Score(root((pairs + alone) / n), root(pairs / n), root(alone / n));
    }

    private static double distance(double[] a, double[] b) {
        double east = a[0] - b[0];
        double north = a[1] - b[1];
        return Math.sqrt(east * east + north * north);
    }

    private double power(double x) {
        return order == 1 ? x : order == 2 ? x * x : StrictMath.pow(x, order);
    }

    private double root(double x) {
        return order == 1 ? x : order == 2 ? Math.sqrt(x) : StrictMath.pow(x, 1 / order);
    }
}
