package org.sweeptally.region;

/** What must always hold of a region's state. */
final class Invariant {

    private Invariant() {}

    /** @throws IllegalStateException with the sentence, if it does not hold */
    static void holds(boolean truth, String sentence, Object... values) {
        if (!truth) {
            throw new IllegalStateException("a region's state contradicts itself: " + String.format(sentence, values));
        }
    }
}
