package org.sweeptally.filter;

import java.util.Comparator;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;

/**
 * Which object a component may really be: identities with their probabilities, most probable first. Where two objects
 * came so close that detections could not tell them apart, an identity goes on with both. Never changed.
 */
public final class Lineage {

    /** So many identities are kept; of others nothing is said. */
    private static final int MOST = 4;

    private static final double LEAST = 0.01;

    /** Over this much it is certain, and costs nothing. */
    private static final double CERTAIN = 1 - 1e-6;

    /** An identity and its probability. */
    public record Share(Identity identity, double probability) {}

    private final List<Share> shares;

    Lineage(List<Share> shares) {
        this.shares = List.copyOf(shares);
    }

    List<Share> shares() {
        return shares;
    }

    double probabilityOf(Identity identity) {
        for (Share share : shares) {
            if (share.identity().equals(identity)) {
                return share.probability();
            }
        }
        return 0;
    }

    /** Sums up shares of several components' lineages. */
    static final class Sum {

        private final Map<Identity, Double> sums = new TreeMap<>();

        void add(double share, Component of) {
            if (of.lineage == null) {
                sums.merge(of.identity(), share, Double::sum);
            } else {
                for (Share part : of.lineage.shares()) {
                    sums.merge(part.identity(), share * part.probability(), Double::sum);
                }
            }
        }

        /** The lineage of a component that has an identity; null where that is certain. */
        Lineage of(Identity identity) {
            if (sums.getOrDefault(identity, 0.0) > CERTAIN) {
                return null;
            }
            List<Share> kept = sums.entrySet().stream()
                    .filter(e -> e.getValue() >= LEAST)
                    .map(e -> new Share(e.getKey(), Math.min(1, e.getValue())))
                    .sorted(Comparator.comparingDouble(share -> -share.probability()))
                    .limit(MOST)
                    .toList();
            return new Lineage(kept);
        }
    }
}
