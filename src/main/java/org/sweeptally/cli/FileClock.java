package org.sweeptally.cli;

import java.util.OptionalLong;

/**
 * The time of a recording that is read faster than it was made: the largest log time so far. One sensor alone may not
 * move it far, or a sensor whose clock runs ahead would make all others look silent: a leap is believed when a second
 * sensor confirms it, or when no other sensor has spoken at all.
 */
final class FileClock {

    /** It strikes at most once a second of the recording. */
    private static final long PERIOD_MICROS = 1_000_000;

    private final long leapMicros;
    private String onlySensor;
    private boolean severalSensors;
    private String leaper;
    private long latestMicros = Long.MIN_VALUE;
    private long struckMicros = Long.MIN_VALUE;

    /** @param leapSeconds how far ahead a sensor's clock may run before it is not believed alone */
    FileClock(double leapSeconds) {
        this.leapMicros = Math.round(leapSeconds * 1e6);
    }

    /** Hears a part; the time to strike now, if a second has passed. */
    OptionalLong hear(String sensor, long logTimeMicros) {
        severalSensors |= onlySensor != null && !onlySensor.equals(sensor);
        onlySensor = sensor;
        if (isBelieved(sensor, logTimeMicros)) {
            latestMicros = Math.max(latestMicros, logTimeMicros);
        }
        if (struckMicros != Long.MIN_VALUE && latestMicros - struckMicros < PERIOD_MICROS) {
            return OptionalLong.empty();
        }
        struckMicros = latestMicros;
        return OptionalLong.of(latestMicros);
    }

    private boolean isBelieved(String sensor, long logTimeMicros) {
        boolean leap = latestMicros != Long.MIN_VALUE && logTimeMicros - latestMicros > leapMicros;
        if (!leap || !severalSensors) {
            return true;
        }
        boolean confirmed = leaper != null && !leaper.equals(sensor);
        leaper = confirmed ? null : sensor;
        return confirmed;
    }
}
