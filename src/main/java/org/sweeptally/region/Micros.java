package org.sweeptally.region;

import java.math.BigDecimal;
import org.sweeptally.region.intake.Times;

/** Times in microseconds since 1970-01-01T00:00:00Z, with one before all others and one after all others. */
final class Micros {

    static final long BEFORE_ALL = Long.MIN_VALUE;
    static final long AFTER_ALL = Long.MAX_VALUE;

    private static final long SECOND = 1_000_000L;

    private Micros() {}

    static long ofSeconds(double seconds) {
        return Math.round(seconds * SECOND);
    }

    static double toSeconds(long micros) {
        return (double) micros / SECOND;
    }

    /** Sum of a time and a span; the two ends of time stay where they are, and nothing goes beyond them. */
    static long plus(long time, long span) {
        if (time == BEFORE_ALL || time == AFTER_ALL) {
            return time;
        }
        long sum = time + span;
        if (((time ^ sum) & (span ^ sum)) < 0) {
            return span > 0 ? AFTER_ALL : BEFORE_ALL;
        }
        return sum;
    }

    /** A time as a sentence names it. */
    static String text(long micros) {
        if (micros == BEFORE_ALL) {
            return "the beginning";
        }
        if (micros == AFTER_ALL) {
            return "the end";
        }
        return Times.text(micros);
    }

    /** A time as a record holds it: null at either end. */
    static Long finite(long micros) {
        return micros == BEFORE_ALL || micros == AFTER_ALL ? null : Long.valueOf(micros);
    }

    /** Seconds as a sentence names them: no more than 6 decimals, and no zeros at their end. */
    static String secondsText(long micros) {
        return BigDecimal.valueOf(micros, 6).stripTrailingZeros().toPlainString() + " s";
    }
}
