package org.sweeptally.filter;

import org.sweeptally.model.Gaussian;

/**
 * A term of the unseen part: what is left of a component whose existence fell low, with its history as a tag.
 */
final class UnseenTerm {

    /** Expected number of objects in the term, below 1. */
    double weight;

    final Bank bank;
    Detectability detectability;
    final ObjectHistory tag;

    /** Greatest standard deviation of the position, metres; of the density as it is now. */
    double sigmaMetres;

    /** Probability that the scan at hand detects it, averaged over its density. */
    double detection;

    /** What a miss of the scan at hand leaves of its detectability. */
    Detectability thoughMissed;

    UnseenTerm(double weight, Bank bank, Detectability detectability, ObjectHistory tag) {
        this.weight = weight;
        this.bank = bank;
        this.detectability = detectability;
        this.tag = tag;
        this.sigmaMetres = density().largestPositionSigma();
    }

    Gaussian density() {
        return bank.overall();
    }
}
