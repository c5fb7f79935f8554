package org.sweeptally.stream;

import java.time.Duration;
import java.util.ArrayDeque;
import java.util.Deque;
import java.util.Optional;

/**
 * Tells failures of a thread that another one may survive from those that it would only repeat. What is known to be
 * beyond help ends the operator at once; what comes again and again ends it too, or it would go round for ever.
 */
final class Failures {

    private static final int REPLACEMENTS = 5;
    private static final Duration WITHIN = Duration.ofMinutes(10);

    private final Deque<Long> replacedNanos = new ArrayDeque<>();

    /** The sentence about a failure after which the operator must not go on; empty if a new thread may. */
    synchronized Optional<String> fatal(Throwable thrown) {
        for (Throwable cause = thrown; cause != null; cause = cause.getCause()) {
            if (cause instanceof OperatorStoppedException stop) {
                return Optional.of(stop.getMessage());
            }
            if (cause instanceof Error) {
                return Optional.of("out of what the machine can give: " + cause);
            }
        }
        long now = System.nanoTime();
        while (!replacedNanos.isEmpty() && now - replacedNanos.peekFirst() > WITHIN.toNanos()) {
            replacedNanos.removeFirst();
        }
        if (replacedNanos.size() == REPLACEMENTS) {
            return Optional.of(REPLACEMENTS + " failed threads were replaced within " + WITHIN.toMinutes()
                    + " minutes, and one more failed: " + words(thrown));
        }
        replacedNanos.addLast(now);
        return Optional.empty();
    }

    /** What went wrong, by the innermost cause, which is the one that says it. */
    static String words(Throwable thrown) {
        Throwable innermost = thrown;
        while (innermost.getCause() != null) {
            innermost = innermost.getCause();
        }
        return innermost.getClass().getSimpleName() + ": " + innermost.getMessage();
    }
}
