package org.sweeptally.filter;

import org.sweeptally.model.Gaussian;

/**
 * A Gaussian term of the unseen part: what is left of a component whose existence fell low, with its history as a tag.
 */
final class UnseenTerm {

    /** Expected number of objects in the term, below 1. */
    double weight;

    final Gaussian density;
    final ObjectHistory tag;

    /** Greatest standard deviation of the position, metres; of the density as it is now. */
    double sigmaMetres;

    /** Probability that the scan at hand detects it, averaged over its density. */
    double detection;

    UnseenTerm(double weight, Gaussian density, ObjectHistory tag) {
        this.weight = weight;
        this.density = density;
        this.tag = tag;
        this.sigmaMetres = density.largestPositionSigma();
    }
}
