package org.sweeptally.filter;

/**
 * Existence as natural log-odds l = ln(r / (1 - r)), which keeps apart 0.999999 and 0.9999999 as well as 0.1 and 0.2.
 * Impossible is minus infinity, certain is infinity; no method returns NaN for a log-odds that is none.
 */
public final class LogOdds {

    private LogOdds() {}

    /** Log-odds of a probability. */
    public static double of(double probability) {
        return StrictMath.log(probability) - StrictMath.log1p(-probability);
    }

    /** Log-odds of an event whose probability and complement stand in this ratio; both may be scaled, one may be 0. */
    public static double ofRatio(double probability, double complement) {
        if (probability <= 0) {
            return Double.NEGATIVE_INFINITY;
        }
        return complement <= 0
                ? Double.POSITIVE_INFINITY
                : StrictMath.log(probability) - StrictMath.log(complement);
    }

    /** The probability r. */
    public static double probability(double logOdds) {
        return 1 / (1 + StrictMath.exp(-logOdds));
    }

    /** The complement 1 - r, exact where r is nearly 1. */
    public static double complement(double logOdds) {
        return 1 / (1 + StrictMath.exp(logOdds));
    }

    /** After surviving with a probability: odds become s r / (1 - s r). */
    public static double survive(double logOdds, double survival) {
        return ofRatio(survival, StrictMath.exp(-logOdds) + (1 - survival));
    }
}
