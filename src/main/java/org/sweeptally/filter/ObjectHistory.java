package org.sweeptally.filter;

/**
 * What is remembered of an object besides where it is: it goes with a component into the unseen part and back.
 *
 * @param identity            who it is
 * @param firstSeenMicros     time of the detection with which it began, microseconds since 1970-01-01T00:00:00Z
 * @param lastDetectedMicros  log time of the last scan that probably detected it
 * @param bornBefore          whether its birth has ever been published
 * @param declared            what it calls itself, or null
 * @param declaredProbability probability that it is the one that declared so
 */
public record ObjectHistory(
        Identity identity,
        long firstSeenMicros,
        long lastDetectedMicros,
        boolean bornBefore,
        String declared,
        double declaredProbability) {

    ObjectHistory detected(long timeMicros) {
        return new ObjectHistory(identity, firstSeenMicros, timeMicros, bornBefore, declared, declaredProbability);
    }

    ObjectHistory born() {
        return new ObjectHistory(identity, firstSeenMicros, lastDetectedMicros, true, declared, declaredProbability);
    }

    /** After it took, with a probability, a detection that calls itself so. The surer of two names stays. */
    ObjectHistory declaredAs(String name, double probability) {
        if (name.equals(declared)) {
            double together = 1 - (1 - declaredProbability) * (1 - probability);
            return new ObjectHistory(identity, firstSeenMicros, lastDetectedMicros, bornBefore, name, together);
        }
        double kept = declared == null ? 0 : declaredProbability * (1 - probability);
        return probability > kept
                ? new ObjectHistory(identity, firstSeenMicros, lastDetectedMicros, bornBefore, name, probability)
                : new ObjectHistory(identity, firstSeenMicros, lastDetectedMicros, bornBefore, declared, kept);
    }
}
