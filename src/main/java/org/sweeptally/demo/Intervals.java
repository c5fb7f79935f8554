package org.sweeptally.demo;

import java.time.Duration;

/** Tells that a while has passed, and then begins the next one. */
final class Intervals {

    private final long nanos;
    private long sinceNanos = System.nanoTime();

    Intervals(Duration length) {
        this.nanos = length.toNanos();
    }

    boolean hasPassed() {
        if (System.nanoTime() - sinceNanos < nanos) {
            return false;
        }
        restart();
        return true;
    }

    void restart() {
        sinceNanos = System.nanoTime();
    }
}
