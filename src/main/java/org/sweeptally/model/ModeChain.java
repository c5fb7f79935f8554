package org.sweeptally.model;

import java.util.List;

/**
 * How an object changes between the modes of one profile: a Markov chain in continuous time. It leaves a mode at the
 * rate 1 / dwellSeconds, for one of the others in proportion to their shares; a mode beside others of no share at all
 * is never left.
 *
 * <p>Its transition matrix over t seconds, exp(Q t), is found by uniformisation (Jensen 1953): with the greatest rate
 * L, S = I + Q / L has no negative entry, and exp(Q t) is proportional to the sum over k of (L t)^k / k! S^k, all
 * terms of which are 0 or more, so nothing cancels. Scaling and squaring keeps L t small in the series (Moler and Van
 * Loan 2003, SIAM Review 45:3-49, method 3). Rows are made to sum to 1 after each squaring, or their error would
 * double each time.
 */
public final class ModeChain {

    /** Terms of the series; with {@link #LARGEST_STEP} the first one left out is below 1e-19. */
    private static final int TERMS = 14;

    private static final double LARGEST_STEP = 0.5;

    private final int modes;
    private final double largestRate;

    /** S, by row. */
    private final double[][] jump;

    private double lastSeconds = Double.NaN;
    private double[][] last;

    /** @param modes of one profile */
    public ModeChain(List<MotionMode> modes) {
        this.modes = modes.size();
        double rate = 0;
        for (int i = 0; i < this.modes; i++) {
            rate = Math.max(rate, rateOut(modes, i));
        }
        largestRate = rate;
        jump = new double[this.modes][this.modes];
        for (int i = 0; i < this.modes; i++) {
            double leaves = rate == 0 ? 0 : rateOut(modes, i) / rate;
            double others = shareOfOthers(modes, i);
            for (int j = 0; j < this.modes; j++) {
                jump[i][j] = i == j ? 1 - leaves : leaves == 0 ? 0 : leaves * modes.get(j).share() / others;
            }
        }
    }

    /** How many modes there are. */
    public int size() {
        return modes;
    }

    /**
     * Probabilities that an object in the mode of the row is in the mode of the column some seconds later. The array
     * stands until the next call and is not to be changed.
     *
     * @param seconds 0 or more, finite
     */
    public double[][] transition(double seconds) {
        if (seconds != lastSeconds) {
            if (!(seconds >= 0) || Double.isInfinite(seconds)) {
                throw new IllegalArgumentException("a chain of modes goes on for 0 seconds or more, not " + seconds);
            }
            last = exponential(largestRate * seconds);
            lastSeconds = seconds;
        }
        return last;
    }

    private double[][] exponential(double jumps) {
        int squarings = 0;
        double step = jumps;
        while (step > LARGEST_STEP) {
            step /= 2;
            squarings++;
        }
        double[][] result = series(step);
        for (int i = 0; i < squarings; i++) {
            result = product(result, result);
            normalise(result);
        }
        return result;
    }

    /** Horner's scheme: I + x S (I + x/2 S (I + x/3 S ...)). */
    private double[][] series(double x) {
        double[][] sum = identity(modes);
        for (int k = TERMS; k >= 1; k--) {
            sum = product(jump, sum);
            for (int i = 0; i < modes; i++) {
                for (int j = 0; j < modes; j++) {
                    sum[i][j] = (i == j ? 1 : 0) + x / k * sum[i][j];
                }
            }
        }
        normalise(sum);
        return sum;
    }

    private static double rateOut(List<MotionMode> modes, int mode) {
        return shareOfOthers(modes, mode) > 0 ? 1 / modes.get(mode).dwellSeconds() : 0;
    }

    private static double shareOfOthers(List<MotionMode> modes, int mode) {
        double sum = 0;
        for (int i = 0; i < modes.size(); i++) {
            sum += i == mode ? 0 : modes.get(i).share();
        }
        return sum;
    }

    private static double[][] identity(int size) {
        double[][] matrix = new double[size][size];
        for (int i = 0; i < size; i++) {
            matrix[i][i] = 1;
        }
        return matrix;
    }

    private static double[][] product(double[][] a, double[][] b) {
        int size = a.length;
        double[][] product = new double[size][size];
        for (int i = 0; i < size; i++) {
            for (int j = 0; j < size; j++) {
                double sum = 0;
                for (int k = 0; k < size; k++) {
                    sum += a[i][k] * b[k][j];
                }
                product[i][j] = sum;
            }
        }
        return product;
    }

    private static void normalise(double[][] matrix) {
        for (double[] row : matrix) {
            double sum = 0;
            for (double entry : row) {
                sum += entry;
            }
            for (int j = 0; j < row.length; j++) {
                row[j] /= sum;
            }
        }
    }
}
