package org.sweeptally.model;

/**
 * How large a squared distance may be for a gate of so many standard deviations. With two numbers measured that is the
 * square of the standard deviations; with three it is what leaves out an object's own detection with the same
 * probability, exp(-g^2 / 2), so that a range rate does not narrow the gate.
 */
final class GateRule {

    private static final double ROOT_2_OVER_PI = Math.sqrt(2 / StrictMath.PI);
    private static final int FRACTION_TERMS = 400;
    private static final int HALVINGS = 60;

    private double gateSigmas = Double.NaN;
    private double ofThree;

    /** The largest squared distance within the gate; remembers the last answer. */
    double ofThree(double sigmas) {
        if (sigmas != gateSigmas) {
            gateSigmas = sigmas;
            double root = root(sigmas);
            ofThree = root * root;
        }
        return ofThree;
    }

    /**
     * The x for which a chi-square variable with three degrees of freedom exceeds x^2 with probability exp(-g^2 / 2).
     * Its tail is exp(-x^2 / 2) sqrt(2 / pi) (x + M(x)), with M the ratio of Mills (1926).
     */
    private static double root(double sigmas) {
        double low = sigmas;
        double high = sigmas + 1;
        for (int i = 0; i < HALVINGS; i++) {
            double x = 0.5 * (low + high);
            double logTail = -0.5 * x * x + StrictMath.log(ROOT_2_OVER_PI * (x + millsRatio(x)));
            if (logTail > -0.5 * sigmas * sigmas) {
                low = x;
            } else {
                high = x;
            }
        }
        return 0.5 * (low + high);
    }

    /** (1 - Phi(x)) / phi(x) by the continued fraction of Laplace (1805), 1 / (x + 1 / (x + 2 / (x + ...))). */
    private static double millsRatio(double x) {
        double fraction = x;
        for (int k = FRACTION_TERMS; k > 0; k--) {
            fraction = x + k / fraction;
        }
        return 1 / fraction;
    }
}
