package org.sweeptally.filter;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import org.sweeptally.model.Gaussian;
import org.sweeptally.model.Measurement;

/**
 * What a scan makes of the components. Existence is what the associations leave of it: detected by some observation, or
 * missed and there all the same. The density of each mode is the Gaussian with the moments of the mixture over
 * associations. Components that share observations are first {@linkplain BestFit dealt out anew}.
 */
final class Posteriors {

    /** Detections used with less than this probability are not named in what is published. */
    private static final double LEAST_USE = 0.01;

    /** Two components are close if both caused one observation with at least this probability. */
    private static final double LEAST_SHARED = 0.1;

    private final ScanHypotheses hypotheses;
    private final List<Component> components;
    private final Modes modes;
    private final long logTimeMicros;
    private final BankSum sum;
    private final Weighted weighted = new Weighted();

    Posteriors(ScanHypotheses hypotheses, Modes modes, long logTimeMicros) {
        this.hypotheses = hypotheses;
        this.components = hypotheses.components();
        this.modes = modes;
        this.logTimeMicros = logTimeMicros;
        this.sum = new BankSum(modes);
    }

    void update() {
        int[] crowdOf = crowds();
        int[] sizes = new int[crowdOf.length];
        for (int crowd : crowdOf) {
            sizes[crowd]++;
        }
        for (int i = 0; i < crowdOf.length; i++) {
            if (sizes[i] == 1) {
                alone(i);
            } else if (sizes[i] > 1) {
                together(members(crowdOf, i, sizes[i]));
            }
        }
    }

    // Who is close to whom.

    /** For each component the first one of its crowd: itself, if it shares no observation with an earlier one. */
    private int[] crowds() {
        int[] crowd = new int[components.size()];
        int[] firstUser = new int[hypotheses.scan().observations().size()];
        Arrays.fill(firstUser, -1);
        for (int i = 0; i < crowd.length; i++) {
            crowd[i] = i;
            for (int pair = hypotheses.firstPair(i); pair < hypotheses.endPair(i); pair++) {
                if (hypotheses.probability(pair) >= LEAST_SHARED) {
                    int j = hypotheses.observationOf(pair);
                    if (firstUser[j] < 0) {
                        firstUser[j] = i;
                    } else {
                        unite(crowd, firstUser[j], i);
                    }
                }
            }
        }
        for (int i = 0; i < crowd.length; i++) {
            crowd[i] = root(crowd, i);
        }
        return crowd;
    }

    private static void unite(int[] crowd, int a, int b) {
        int rootA = root(crowd, a);
        int rootB = root(crowd, b);
        crowd[Math.max(rootA, rootB)] = Math.min(rootA, rootB);
    }

    private static int root(int[] crowd, int i) {
        int at = i;
        while (crowd[at] != at) {
            at = crowd[at];
        }
        return at;
    }

    private static int[] members(int[] crowdOf, int first, int count) {
        int[] members = new int[count];
        int at = 0;
        for (int i = first; at < count; i++) {
            if (crowdOf[i] == first) {
                members[at++] = i;
            }
        }
        return members;
    }

    // A component that nobody else's observations concern.

    private void alone(int i) {
        Component component = components.get(i);
        double missedThere = hypotheses.missedThere(i);
        sum.reset(component.bank);
        sum.add(missedThere, component.bank);
        double detected = 0;
        for (int pair = hypotheses.firstPair(i); pair < hypotheses.endPair(i); pair++) {
            detected += hypotheses.probability(pair);
        }
        weighted.all(i);
        sum.add(component.bank, weighted);
        double there = sum.weight();
        component.logOdds = LogOdds.ofRatio(there, hypotheses.missedAbsent(i));
        component.used = List.of();
        if (there > 0) {
            component.bank = sum.matched();
            Uses uses = new Uses();
            for (int pair = hypotheses.firstPair(i); pair < hypotheses.endPair(i); pair++) {
                uses.add(hypotheses.observationOf(pair), hypotheses.probability(pair) / there);
            }
            uses.into(component);
            if (detected > 0.5 * there) {
                component.history = component.history.detected(logTimeMicros);
            }
            if (hypotheses.tellsDetectability(i)) {
                double detectable = missedThere * hypotheses.detectableThoughMissed(i) + detected;
                learn(component, detectable / there);
            }
        }
    }

    private void learn(Component component, double detectable) {
        component.detectability = component.detectability.with(
                hypotheses.scan().sensor(), Math.max(0, Math.min(1, detectable)), logTimeMicros);
    }

    // Components that share observations.

    private void together(int[] members) {
        Pasts pasts = new Pasts(members);
        List<Bank> banks = new ArrayList<>();
        for (int member : members) {
            banks.add(components.get(member).bank);
        }
        List<Gaussian> before = banks.stream().map(Bank::overall).toList();
        double[][] shares =
                new BestFit(pasts.there, pasts.absent, pasts.densities, pasts.owners, before).solve();
        Lineage[] lineages = new Lineage[members.length];
        for (int a = 0; a < members.length; a++) {
            lineages[a] = lineage(pasts, shares, a, members);
        }
        for (int a = 0; a < members.length; a++) {
            takeShare(pasts, shares, a, members, banks);
            components.get(members[a]).lineage = lineages[a];
        }
    }

    /**
     * Everything that may have become of the members of a crowd: for each, that it was missed, then its
     * observations.
     */
    private final class Pasts {

        final int count;
        final double[] there;
        final double[] absent;
        final Gaussian[] densities;
        final int[] owners;

        /** The pair of a past; -1 where it was missed. */
        final int[] pairs;

        Pasts(int[] members) {
            int total = members.length;
            for (int i : members) {
                total += hypotheses.endPair(i) - hypotheses.firstPair(i);
            }
            count = total;
            there = new double[total];
            absent = new double[total];
            densities = new Gaussian[total];
            owners = new int[total];
            pairs = new int[total];
            int h = 0;
            for (int a = 0; a < members.length; a++) {
                int i = members[a];
                Component component = components.get(i);
                owners[h] = a;
                pairs[h] = -1;
                there[h] = hypotheses.missedThere(i);
                absent[h] = hypotheses.missedAbsent(i);
                densities[h++] = component.density();
                for (int pair = hypotheses.firstPair(i); pair < hypotheses.endPair(i); pair++) {
                    owners[h] = a;
                    pairs[h] = pair;
                    there[h] = hypotheses.probability(pair);
                    densities[h++] = detected(component, pair);
                }
            }
        }

        private Gaussian detected(Component component, int pair) {
            sum.reset(component.bank);
            weighted.one(pair);
            sum.add(component.bank, weighted);
            return sum.weight() > 0 ? sum.matched().overall() : component.density();
        }
    }

    private Lineage lineage(Pasts pasts, double[][] shares, int a, int[] members) {
        double there = 0;
        for (int h = 0; h < pasts.count; h++) {
            there += shares[h][a] * pasts.there[h];
        }
        Component component = components.get(members[a]);
        if (there <= 0) {
            return component.lineage;
        }
        Lineage.Sum lineage = new Lineage.Sum();
        for (int h = 0; h < pasts.count; h++) {
            double share = shares[h][a] * pasts.there[h] / there;
            if (share > 0) {
                lineage.add(share, components.get(members[pasts.owners[h]]));
            }
        }
        return lineage.of(component.identity());
    }

    private void takeShare(Pasts pasts, double[][] shares, int a, int[] members, List<Bank> banks) {
        Component component = components.get(members[a]);
        sum.reset(banks.get(a));
        double absent = 0;
        double detected = 0;
        double detectable = 0;
        Uses uses = new Uses();
        int h = 0;
        while (h < pasts.count) {
            int owner = pasts.owners[h];
            double missed = shares[h][a] * pasts.there[h];
            absent += shares[h][a] * pasts.absent[h];
            detectable += hypotheses.tellsDetectability(members[owner])
                    ? missed * hypotheses.detectableThoughMissed(members[owner])
                    : 0;
            sum.add(missed, banks.get(owner));
            int first = h + 1;
            for (h = first; h < pasts.count && pasts.owners[h] == owner; h++) {
                double mass = shares[h][a] * pasts.there[h];
                detected += mass;
                uses.add(hypotheses.observationOf(pasts.pairs[h]), mass);
            }
            weighted.some(pasts, first, h, shares, a);
            sum.add(banks.get(owner), weighted);
        }
        double there = sum.weight();
        component.logOdds = LogOdds.ofRatio(there, absent);
        component.used = List.of();
        if (there > 0) {
            component.bank = sum.matched();
            uses.divide(there);
            uses.into(component);
            if (detected > 0.5 * there) {
                component.history = component.history.detected(logTimeMicros);
            }
            if (hypotheses.tellsDetectability(members[a])) {
                learn(component, (detectable + detected) / there);
            }
        }
    }

    /** Pairs with the weights that they are to have in a sum. */
    private final class Weighted implements BankSum.Pairs {

        private int first;
        private int count;
        private Pasts pasts;
        private double[][] shares;
        private int member;

        /** All pairs of component i as probable as they are. */
        void all(int i) {
            first = hypotheses.firstPair(i);
            count = hypotheses.endPair(i) - first;
            pasts = null;
        }

        void one(int pair) {
            first = pair;
            count = 1;
            pasts = null;
        }

        /** A member's shares of another's pasts. */
        void some(Pasts all, int from, int to, double[][] dealt, int receiver) {
            pasts = all;
            first = from;
            count = to - from;
            shares = dealt;
            member = receiver;
        }

        @Override
        public int count() {
            return count;
        }

        private int pair(int i) {
            return pasts == null ? first + i : pasts.pairs[first + i];
        }

        @Override
        public double weight(int i, int mode) {
            int pair = pair(i);
            double probability = hypotheses.probability(pair) * hypotheses.modeShare(pair, mode);
            return pasts == null ? probability : shares[first + i][member] * probability;
        }

        @Override
        public Measurement measurement(int i) {
            return hypotheses.measurementOf(pair(i));
        }
    }

    /** Which observations a component used, and how probably. */
    private final class Uses {

        private int[] observations = new int[8];
        private double[] probabilities = new double[8];
        private int count;

        void add(int observation, double probability) {
            for (int k = 0; k < count; k++) {
                if (observations[k] == observation) {
                    probabilities[k] += probability;
                    return;
                }
            }
            if (count == observations.length) {
                observations = Arrays.copyOf(observations, 2 * count);
                probabilities = Arrays.copyOf(probabilities, 2 * count);
            }
            int at = count++;
            while (at > 0 && observations[at - 1] > observation) {
                observations[at] = observations[at - 1];
                probabilities[at] = probabilities[at - 1];
                at--;
            }
            observations[at] = observation;
            probabilities[at] = probability;
        }

        void divide(double by) {
            for (int k = 0; k < count; k++) {
                probabilities[k] /= by;
            }
        }

        void into(Component component) {
            List<Component.Use> used = new ArrayList<>();
            for (int k = 0; k < count; k++) {
                if (probabilities[k] >= LEAST_USE) {
                    Observation observation = hypotheses.scan().observations().get(observations[k]);
                    double probability = Math.min(1, probabilities[k]);
                    used.add(new Component.Use(
                            observation.part(), observation.index(), observation.id(), probability));
                    if (observation.declared() != null) {
                        component.history = component.history.declaredAs(observation.declared(), probability);
                    }
                }
            }
            component.used = List.copyOf(used);
        }
    }
}
