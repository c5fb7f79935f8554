package org.sweeptally.stream.attack;

import java.time.Duration;
import java.util.function.BooleanSupplier;
import java.util.function.Supplier;

/** Waits for what another process brings about. */
final class Waiting {

    /** Long beyond what any single step takes on a busy machine. */
    static final Duration PATIENCE = Duration.ofSeconds(90);

    private Waiting() {}

    /** @param said tells what happened, where the wait was in vain */
    static void until(String what, BooleanSupplier holds, Supplier<String> said) throws InterruptedException {
        long end = System.nanoTime() + PATIENCE.toNanos();
        while (!holds.getAsBoolean()) {
            if (System.nanoTime() > end) {
                throw new AssertionError("not within " + PATIENCE.toSeconds() + " s: " + what + "\n" + said.get());
            }
            Thread.sleep(50);
        }
    }

    /** Waits until an operator runs. */
    static void untilRunning(OperatorProcess operator) throws InterruptedException {
        untilSoOrEnded("running", operator::hasRun, operator);
    }

    /** Waits until so many more records than now have come to a topic. */
    static void untilMore(OperatorProcess operator, String topic, long records) throws InterruptedException {
        try (RecordCount count = RecordCount.fromNow(topic)) {
            untilSoOrEnded(records + " more records in " + topic, () -> count.now() >= records, operator);
        }
    }

    /** Waits until a topic of an operator holds as many records as it must in the end. */
    static void untilComplete(OperatorProcess operator, String topic, long records) throws InterruptedException {
        try (RecordCount count = RecordCount.ofAll(topic)) {
            untilSoOrEnded(records + " records in " + topic, () -> count.now() >= records, operator);
        }
    }

    private static void untilSoOrEnded(String what, BooleanSupplier holds, OperatorProcess operator)
            throws InterruptedException {
        until(what, () -> !operator.isAlive() || holds.getAsBoolean(), operator::text);
        if (!operator.isAlive()) {
            throw new AssertionError("the operator has ended by itself; it said\n" + operator.text());
        }
    }
}
