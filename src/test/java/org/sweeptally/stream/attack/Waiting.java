package org.sweeptally.stream.attack;

import java.time.Duration;
import java.util.function.BooleanSupplier;
import java.util.function.Supplier;

/** Waits for what another process brings about. */
final class Waiting {

    private Waiting() {}

    /** @param said tells what happened, where the wait was in vain */
    static void until(String what, Duration atMost, BooleanSupplier holds, Supplier<String> said)
            throws InterruptedException {
        long end = System.nanoTime() + atMost.toNanos();
        while (!holds.getAsBoolean()) {
            if (System.nanoTime() > end) {
                throw new AssertionError("not within " + atMost.toSeconds() + " s: " + what + "\n" + said.get());
            }
            Thread.sleep(100);
        }
    }

    /** Waits until a topic of an operator holds as many records as it must in the end. */
    static void untilComplete(OperatorProcess operator, String topic, long records) throws InterruptedException {
        until(records + " records in " + topic, Duration.ofSeconds(90),
                () -> !operator.isAlive() || Bus.committed(topic).size() >= records, operator::text);
        if (!operator.isAlive()) {
            throw new AssertionError("the operator has ended by itself; it said\n" + operator.text());
        }
    }
}
