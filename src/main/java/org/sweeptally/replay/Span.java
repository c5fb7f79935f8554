package org.sweeptally.replay;

import org.sweeptally.region.intake.Times;

/**
 * A span of log time.
 *
 * @param fromMicros its beginning, itself included, microseconds since 1970-01-01T00:00:00Z
 * @param toMicros   its end, itself excluded
 */
public record Span(long fromMicros, long toMicros) {

    /** All of time. */
    public static final Span ALL = new Span(Long.MIN_VALUE, Long.MAX_VALUE);

    boolean holds(long micros) {
        return micros >= fromMicros && micros < toMicros;
    }

    /** For a person. */
    public String text() {
        return "from " + (fromMicros == Long.MIN_VALUE ? "the beginning" : Times.text(fromMicros)) + " to "
                + (toMicros == Long.MAX_VALUE ? "the end" : Times.text(toMicros));
    }
}
