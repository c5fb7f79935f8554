package org.sweeptally.filter.association;

/**
 * A product of many factors that neither overflows nor underflows, read as its logarithm: one logarithm in all instead
 * of one a factor. Relative error of the product about one rounding a factor.
 */
final class LogProduct {
    private static final double LN_2 = StrictMath.log(2);
    private static final double TWO_60 = 0x1p60;

    private double mantissa = 1;
    private long exponent;

    void clear() {
        mantissa = 1;
        exponent = 0;
    }

    /** Multiplies by a factor that is finite and not negative. */
    void times(double factor) {
        double scaled = factor;
        if (factor < Double.MIN_NORMAL) {
            scaled = factor * TWO_60;
            exponent -= 60;
        }
        if (scaled == 0) {
            mantissa = 0;
            return;
        }
        int shift = Math.getExponent(scaled);
        mantissa *= Math.scalb(scaled, -shift);
        exponent += shift;
        if (mantissa > TWO_60) {
            mantissa /= TWO_60;
            exponent += 60;
        }
    }

    void timesPowerOfTwo(long power) {
        exponent += power;
    }

    void times(LogProduct other) {
        times(other.mantissa);
        exponent += other.exponent;
    }

    /** Negative infinity where a factor was zero. */
    double log() {
        return mantissa == 0 ? Double.NEGATIVE_INFINITY : StrictMath.log(mantissa) + exponent * LN_2;
    }
}
