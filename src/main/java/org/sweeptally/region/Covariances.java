package org.sweeptally.region;

import org.ejml.data.DMatrix4x4;

/** Checks of 4 x 4 covariances. */
final class Covariances {

    /** Rounding may leave a pivot this much below 0, as a share of its own variance. */
    private static final double ROUNDING = 1e-9;

    private Covariances() {}

    static boolean isSymmetric(DMatrix4x4 p) {
        return p.a12 == p.a21 && p.a13 == p.a31 && p.a14 == p.a41 && p.a23 == p.a32 && p.a24 == p.a42 && p.a34 == p.a43;
    }

    /** Whether no direction has a negative variance, by the pivots of Gaussian elimination. */
    static boolean isPositive(DMatrix4x4 p) {
        double[][] a = rows(p);
        for (int k = 0; k < 4; k++) {
            double pivot = a[k][k];
            if (!(pivot >= -ROUNDING * p.get(k, k)) || Double.isInfinite(pivot)) {
                return false;
            }
            for (int i = k + 1; i < 4 && pivot > 0; i++) {
                double factor = a[i][k] / pivot;
                for (int j = k + 1; j < 4; j++) {
                    a[i][j] -= factor * a[k][j];
                }
            }
        }
        return true;
    }

    /** Row by row. */
    static double[][] rows(DMatrix4x4 p) {
        double[][] rows = new double[4][4];
        for (int i = 0; i < 4; i++) {
            for (int j = 0; j < 4; j++) {
                rows[i][j] = p.get(i, j);
            }
        }
        return rows;
    }
}
