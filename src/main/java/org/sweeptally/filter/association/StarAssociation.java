package org.sweeptally.filter.association;

/**
 * The closed form for a cluster of one row: at most one of its columns is the row's.
 *
 * <p>With d the row's missed weight and W = w / c of each pair, all events together weigh d + sum of W times the
 * product of c. A column that cannot be nobody's (c = 0) must be the row's; two of them are impossible.
 */
final class StarAssociation {
    private double[] before = new double[16];

    /** Writes the answer into the cluster; false, and nothing written, where every event has weight zero. */
    boolean solve(Cluster cluster) {
        int forced = -1;
        int forcedCount = 0;
        for (int j = 0; j < cluster.columns; j++) {
            if (cluster.nobodyWeight[j] == 0) {
                forced = j;
                forcedCount++;
            }
        }
        if (forcedCount > 1) {
            return false;
        }
        return forcedCount == 1 ? take(cluster, forced) : share(cluster);
    }

    private static boolean take(Cluster cluster, int forced) {
        cluster.missed[0] = 0;
        for (int p = 0; p < cluster.columns; p++) {
            boolean taken = cluster.column[p] == forced;
            cluster.pair[p] = taken ? 1 : 0;
            cluster.nobody[cluster.column[p]] = taken ? 0 : 1;
            if (taken) {
                cluster.scale.times(cluster.weight[p]);
            }
        }
        return true;
    }

    /** A column's nobody's weight is the sum over all others, from both ends: a difference would lose small ones. */
    private boolean share(Cluster cluster) {
        int n = cluster.columns;
        if (before.length < n + 1) {
            before = new double[2 * n + 1];
        }
        before[0] = cluster.missedWeight[0];
        for (int p = 0; p < n; p++) {
            cluster.pair[p] = cluster.weight[p] / cluster.nobodyWeight[cluster.column[p]];
            before[p + 1] = before[p] + cluster.pair[p];
        }
        double total = before[n];
        if (total == 0) {
            return false;
        }
        double after = 0;
        for (int p = n - 1; p >= 0; p--) {
            cluster.nobody[cluster.column[p]] = (before[p] + after) / total;
            after += cluster.pair[p];
            cluster.pair[p] /= total;
        }
        cluster.missed[0] = cluster.missedWeight[0] / total;
        cluster.scale.times(total);
        return true;
    }
}
