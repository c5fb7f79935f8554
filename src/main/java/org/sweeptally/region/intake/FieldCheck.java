package org.sweeptally.region.intake;

/** Checks of single values, each with the sentence that tells field, value and what is allowed. */
final class FieldCheck {

    /** Longest text that a sender may put into a field; texts go out again with every track. */
    static final int LONGEST_TEXT_CHARACTERS = 1000;

    private static final char REPLACEMENT = '\uFFFD';

    private FieldCheck() {}

    /** A number from {@code least} to {@code most}, both included; {@code allowed} says so with its unit. */
    static boolean within(FaultSink sink, String field, double value, double least, double most, String allowed) {
        if (value >= least && value <= most) {
            return true;
        }
        sink.add(field, () -> field + " is " + Shown.number(value) + ": " + allowed);
        return false;
    }

    static boolean latitude(FaultSink sink, String field, double value) {
        return within(sink, field, value, -90, 90, "degrees north from -90 to 90 are allowed");
    }

    static boolean longitude(FaultSink sink, String field, double value) {
        return within(sink, field, value, -180, 180, "degrees east from -180 to 180 are allowed");
    }

    static boolean azimuth(FaultSink sink, String field, Double valueOrNull) {
        return valueOrNull == null || within(sink, field, valueOrNull, 0, 360,
                "degrees clockwise from true north from 0 to 360 are allowed");
    }

    static boolean finite(FaultSink sink, String field, Double valueOrNull) {
        return valueOrNull == null || within(sink, field, valueOrNull, -Double.MAX_VALUE, Double.MAX_VALUE,
                "a finite number is expected");
    }

    static boolean time(FaultSink sink, String field, Long microsOrNull) {
        if (microsOrNull == null || Times.plausible(microsOrNull)) {
            return true;
        }
        sink.add(field, () -> field + " is " + microsOrNull + " microseconds after 1970 began: " + Times.ALLOWED);
        return false;
    }

    /** A text that every reader of the output can show: not endless, and text throughout. */
    static boolean text(FaultSink sink, String field, String valueOrNull) {
        if (valueOrNull == null) {
            return true;
        }
        if (valueOrNull.length() > LONGEST_TEXT_CHARACTERS) {
            sink.add(field, () -> field + " is " + Shown.text(valueOrNull) + ": at most " + LONGEST_TEXT_CHARACTERS
                    + " characters are allowed");
            return false;
        }
        if (!wellFormed(valueOrNull)) {
            sink.add(field, () -> field + " is " + Shown.text(valueOrNull) + ": text in UTF-8 is expected");
            return false;
        }
        return true;
    }

    /** No half of a surrogate pair, and no replacement character: decoders put it where the bytes were no UTF-8. */
    static boolean wellFormed(String value) {
        for (int i = 0; i < value.length(); i++) {
            char c = value.charAt(i);
            if (i + 1 < value.length() && Character.isSurrogatePair(c, value.charAt(i + 1))) {
                i++;
            } else if (Character.isSurrogate(c) || c == REPLACEMENT) {
                return false;
            }
        }
        return true;
    }
}
