package org.sweeptally.stream;

import java.time.Duration;
import java.util.function.BooleanSupplier;

/** Waits for what another thread or process brings about. */
final class Waiting {

    private Waiting() {}

    static void until(String what, Duration atMost, BooleanSupplier holds) throws InterruptedException {
        long end = System.nanoTime() + atMost.toNanos();
        while (!holds.getAsBoolean()) {
            if (System.nanoTime() > end) {
                throw new AssertionError("not within " + atMost.toSeconds() + " s: " + what);
            }
            Thread.sleep(200);
        }
    }
}
