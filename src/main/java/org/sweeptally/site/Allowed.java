package org.sweeptally.site;

import java.util.function.DoublePredicate;

/**
 * The numbers that a setting may have.
 *
 * @param words completes "must be" and "must be a number"
 */
record Allowed(String words, DoublePredicate test) {

    static final Allowed LATITUDE = from(-90, 90);
    static final Allowed LONGITUDE = from(-180, 180);

    /** Neither impossible nor certain: what a sensor says is never proof. */
    static final Allowed PROBABILITY = new Allowed("more than 0 and less than 1", x -> x > 0 && x < 1);

    static Allowed moreThanZero(double most) {
        return new Allowed("more than 0, at most " + Numbers.shortest(most), x -> x > 0 && x <= most);
    }

    static Allowed from(double least, double most) {
        return new Allowed(
                "from " + Numbers.shortest(least) + " to " + Numbers.shortest(most), x -> x >= least && x <= most);
    }

    boolean holds(double value) {
        return test.test(value);
    }
}
