package org.sweeptally.filter;

import java.util.List;

/**
 * Why the existence of one component is after a scan what it is. All of it is in natural log-odds: before plus the
 * steps is after, and for a component that this scan began the steps alone are.
 *
 * @param before                 log-odds of existence after the scan before; NaN where this scan began it
 * @param steps                  what changed them, in order
 * @param after                  log-odds of existence after this scan
 * @param probabilityOfDetection with which this look would have detected it, if it exists; NaN where this scan began it
 * @param detectable             probability that it was detectable for the sensor; NaN where its misses have no runs
 * @param whenDetectable         probability with which the look detects a detectable object; NaN likewise
 * @param gated                  detections that may have been its
 * @param beginning              how it began; null where it was there before
 */
public record ObjectEvidence(
        Identity identity,
        double before,
        List<Step> steps,
        double after,
        double probabilityOfDetection,
        double detectable,
        double whenDetectable,
        List<Gated> gated,
        Beginning beginning,
        Fate fate,
        boolean confirmed) {

    /** What may change existence. */
    public enum Kind {
        /** Time passed, in which it may have ceased to be there: ln(s r / (1 - s r)) - ln(r / (1 - r)). */
        SURVIVAL,
        /** A look that should have detected it had nothing in its gate: ln(1 - pd). */
        MISSED,
        /** Detections in its gate, as if no other object were there: ln(1 - pd + sum of likelihood ratios). */
        DETECTED,
        /** Other objects may have caused the same detections. */
        COMPETITION,
        /** Detections could not tell it from objects close by, and what is known of all of them was dealt out anew. */
        EXCHANGE,
        /** A detection of no known object began it: ln(e / c), new objects against false detections there. */
        BEGAN,
        /** The same, mostly from what was left of an object of this identity when it was recycled. */
        RETURNED
    }

    /** A change of log-odds. */
    public record Step(Kind kind, double change) {}

    /**
     * A detection in the gate.
     *
     * @param part            number of the part that brought it
     * @param index           its place in the part as sent
     * @param id              the sender's own name for it, or null
     * @param probability     that this object exists and caused it, in the light of all objects and detections
     * @param distanceSigmas  from where the object was expected
     * @param likelihoodRatio how much more probable it is as this object's than as a false detection or a new object:
     *                        pd l / (c + e)
     * @param nobodys         probability that no known object caused it
     * @param others          other objects that may have caused it, each with at least a probability of 0.01
     */
    public record Gated(
            int part,
            int index,
            String id,
            double probability,
            double distanceSigmas,
            double likelihoodRatio,
            double nobodys,
            List<Other> others) {}

    /** Another object, and the probability that it caused a detection. */
    public record Other(Identity identity, double probability) {}

    /**
     * How a component began.
     *
     * @param unseen  density of objects that would be seen for the first time there, per square metre
     * @param clutter density of false detections there, per square metre
     * @param nobodys probability that no known object caused the detection
     */
    public record Beginning(int part, int index, String id, double unseen, double clutter, double nobodys) {}

    /** What became of a component after the scan. */
    public enum Fate {
        KEPT,
        /** Its existence fell low: it went back into the unseen part, which remembers who it was. */
        RECYCLED,
        /** It left the area in which the region hears. */
        LEFT
    }

    public ObjectEvidence {
        steps = List.copyOf(steps);
        gated = List.copyOf(gated);
    }
}
