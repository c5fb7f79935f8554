package org.sweeptally.region.intake;

import com.fasterxml.jackson.core.io.NumberOutput;

/** Values as the sentences of a reject show them: the same text on every machine and every Java. */
public final class Shown {

    private static final int LONGEST_TEXT = 60;

    private Shown() {}

    /** The shortest text that is this number and no other. Not Double.toString: it differs between Java versions. */
    public static String number(double value) {
        return NumberOutput.toString(value, true);
    }

    /** The name of a field, of which a sender may have invented any; of a long one the beginning. */
    public static String name(String name) {
        return name.length() <= LONGEST_TEXT ? printable(name) : printable(name.substring(0, LONGEST_TEXT)) + "...";
    }

    /** A text in quotes; of a long one the beginning, with its length. */
    public static String text(String value) {
        if (value.length() <= LONGEST_TEXT) {
            return '"' + printable(value) + '"';
        }
        return '"' + printable(value.substring(0, LONGEST_TEXT)) + "...\" (" + value.length() + " characters)";
    }

    private static String printable(String value) {
        StringBuilder out = new StringBuilder(value.length());
        for (int i = 0; i < value.length(); i++) {
            char c = value.charAt(i);
            out.append(c < ' ' || c == 0x7F || Character.isSurrogate(c) ? '?' : c);
        }
        return out.toString();
    }
}
