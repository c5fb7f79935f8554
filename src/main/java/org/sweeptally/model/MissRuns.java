package org.sweeptally.model;

/**
 * Why misses of a sensor come in runs: an object is detectable for the sensor or hidden from it (behind something, end
 * on, faded), and stays so for a while. Hidden it is never detected; the share of time that it is detectable is tied
 * to the probability of detection at its place, so that this stays what it was on average.
 *
 * @param hiddenSeconds         how long it stays hidden, on average; 0: every look is a matter of its own
 * @param detectableProbability probability of detection of a detectable object; where the probability of detection is
 *                              more than that, objects are always detectable
 */
public record MissRuns(double hiddenSeconds, double detectableProbability) {

    /** Every look is a matter of its own. */
    public static final MissRuns NONE = new MissRuns(0, 1);
}
