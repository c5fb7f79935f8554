package org.sweeptally.filter.association;

/**
 * A product of many factors that neither overflows nor underflows, read as its logarithm: one logarithm in all instead
 * of one a factor. Relative error of the product about one rounding a factor.
 */
final class LogProduct {
    private static final double LN_2 = StrictMath.log(2);
    private static final double TWO_60 = 0x1p60;
    private static final int FRACTION_BITS = 52;
    private static final long FRACTION = (1L << FRACTION_BITS) - 1;
    private static final long ONE = Double.doubleToRawLongBits(1);

    private double mantissa = 1;
    private long exponent;

    void clear() {
        mantissa = 1;
        exponent = 0;
    }

    void set(LogProduct other) {
        mantissa = other.mantissa;
        exponent = other.exponent;
    }

    /** Multiplies by a factor that is finite and not negative. */
    void times(double factor) {
        double scaled = factor;
        if (factor < Double.MIN_NORMAL) {
            if (factor == 0) {
                mantissa = 0;
                return;
            }
            scaled = factor * TWO_60;
            exponent -= 60;
        }
        long bits = Double.doubleToRawLongBits(scaled);
        exponent += (bits >>> FRACTION_BITS) - Double.MAX_EXPONENT;
        mantissa *= Double.longBitsToDouble(bits & FRACTION | ONE);
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

    /** Divides by a product without a factor of zero. */
    void over(LogProduct other) {
        mantissa /= other.mantissa;
        exponent -= other.exponent;
        double whole = mantissa;
        mantissa = 1;
        times(whole);
    }

    /** Negative infinity where a factor was zero. */
    double log() {
        return mantissa == 0 ? Double.NEGATIVE_INFINITY : StrictMath.log(mantissa) + exponent * LN_2;
    }
}
