package org.sweeptally.site;

import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;
import java.util.OptionalDouble;
import java.util.regex.Pattern;

/** Numbers as settings write them. */
final class Numbers {

    /** Decimal, without the hexadecimal, octal and sexagesimal forms in which YAML reads a slip as a number. */
    private static final Pattern DECIMAL = Pattern.compile("[-+]?(\\d+\\.?\\d*|\\.\\d+)([eE][-+]?\\d{1,4})?");

    /** Enough to tell any two doubles apart. */
    private static final int MOST_DIGITS = 17;

    /** Beyond so many places before or after the point a number is written with an exponent. */
    private static final int PLAIN_PLACES = 15;

    private Numbers() {}

    /** The finite number that a text writes, if it writes one. */
    static OptionalDouble parse(String text) {
        if (text == null || !DECIMAL.matcher(text).matches()) {
            return OptionalDouble.empty();
        }
        double value = Double.parseDouble(text);
        // Adding 0 makes -0 a plain 0, which is what is written back.
        return Double.isInfinite(value) ? OptionalDouble.empty() : OptionalDouble.of(value + 0.0);
    }

    /**
     * The shortest decimal text that reads back as the same double. Double.toString is not it: its digits differ
     * between Java releases, and the text of settings must not.
     */
    static String shortest(double value) {
        if (Double.isNaN(value) || Double.isInfinite(value)) {
            throw new IllegalArgumentException("settings hold finite numbers, not " + value);
        }
        BigDecimal exact = new BigDecimal(value);
        for (int digits = 1; digits < MOST_DIGITS; digits++) {
            // Above a power of two doubles are farther apart than below: only the farther rounding may read back.
            for (RoundingMode mode : new RoundingMode[] {RoundingMode.HALF_EVEN, RoundingMode.UP}) {
                BigDecimal rounded = exact.round(new MathContext(digits, mode));
                if (rounded.doubleValue() == value) {
                    return written(rounded);
                }
            }
        }
        return written(exact.round(new MathContext(MOST_DIGITS, RoundingMode.HALF_EVEN)));
    }

    private static String written(BigDecimal number) {
        BigDecimal bare = number.stripTrailingZeros();
        boolean plain = bare.scale() <= PLAIN_PLACES && bare.scale() >= -PLAIN_PLACES;
        return plain ? bare.toPlainString() : bare.toString();
    }
}
