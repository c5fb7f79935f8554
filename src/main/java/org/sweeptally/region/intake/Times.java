package org.sweeptally.region.intake;

import java.time.DateTimeException;
import java.time.LocalDateTime;
import java.time.ZoneOffset;
import java.util.OptionalLong;
import java.util.regex.Matcher;
import java.util.regex.Pattern;

/** Times as text: ISO 8601 with an offset, to the microsecond. */
public final class Times {

    /** 1970-01-01T00:00:00Z, the earliest time that a part may name. */
    public static final long EARLIEST_MICROS = 0;

    /** 2200-01-01T00:00:00Z, the latest. */
    public static final long LATEST_MICROS = 7_258_118_400_000_000L;

    /** What is allowed, for the sentences that refuse something else. */
    public static final String ALLOWED = "a time from 1970 to 2199 is allowed";

    /** How a time is written, for the same sentences. */
    public static final String FORM =
            "a time with its offset is expected, such as 2031-05-01T04:00:42.5Z or 2031-05-01T06:00:42.5+02:00";

    private static final Pattern TIME = Pattern.compile(
            "(\\d{4})-(\\d\\d)-(\\d\\d)T(\\d\\d):(\\d\\d):(\\d\\d)(?:[.,](\\d{1,30}))?(Z|[+-]\\d\\d:\\d\\d)");

    private Times() {}

    /** Whether a part may name this time. */
    public static boolean plausible(long micros) {
        return micros >= EARLIEST_MICROS && micros < LATEST_MICROS;
    }

    /** Such as 2031-05-01T04:00:42.500000Z: always UTC and six digits, so that texts sort as the times do. */
    public static String text(long micros) {
        LocalDateTime time = LocalDateTime.ofEpochSecond(
                Math.floorDiv(micros, 1_000_000L), Math.floorMod(micros, 1_000_000) * 1000, ZoneOffset.UTC);
        StringBuilder out = new StringBuilder(27);
        out.append(time.toLocalDate()).append('T');
        digits(out, time.getHour(), 2).append(':');
        digits(out, time.getMinute(), 2).append(':');
        digits(out, time.getSecond(), 2).append('.');
        return digits(out, time.getNano() / 1000, 6).append('Z').toString();
    }

    /**
     * Microseconds since 1970-01-01T00:00:00Z; empty if the text is no such time. Digits beyond the sixth are cut off,
     * not rounded, so that a time never moves into the next second.
     */
    public static OptionalLong parse(String text) {
        Matcher match = TIME.matcher(text);
        if (!match.matches()) {
            return OptionalLong.empty();
        }
        try {
            LocalDateTime time = LocalDateTime.of(
                    number(match, 1), number(match, 2), number(match, 3),
                    number(match, 4), number(match, 5), number(match, 6));
            long seconds = time.toEpochSecond(ZoneOffset.of(match.group(8)));
            return OptionalLong.of(seconds * 1_000_000 + micros(match.group(7)));
        } catch (DateTimeException e) {
            return OptionalLong.empty();
        }
    }

    private static int number(Matcher match, int group) {
        return Integer.parseInt(match.group(group));
    }

    private static long micros(String fraction) {
        return fraction == null ? 0 : Long.parseLong((fraction + "00000").substring(0, 6));
    }

    private static StringBuilder digits(StringBuilder out, int value, int width) {
        String text = Integer.toString(value);
        return out.append("0".repeat(width - text.length())).append(text);
    }
}
