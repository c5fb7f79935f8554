package org.sweeptally.filter;

import java.util.ArrayList;
import java.util.List;
import org.sweeptally.filter.Detectability.Prospect;
import org.sweeptally.model.Gaussian;
import org.sweeptally.model.Measurement;

/**
 * What a scan makes of the components. Existence is what the associations leave of it: detected by some observation, or
 * missed and there all the same. The density of each mode is the Gaussian with the moments of the mixture over
 * associations. Components that share observations are first {@linkplain BestFit dealt out anew}.
 */
final class Posteriors {

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
        for (int[] members : Crowds.of(hypotheses)) {
            if (members.length == 1) {
                alone(members[0]);
            } else {
                together(members);
            }
        }
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
            Uses uses = new Uses(hypotheses.scan());
            for (int pair = hypotheses.firstPair(i); pair < hypotheses.endPair(i); pair++) {
                uses.add(hypotheses.observationOf(pair), hypotheses.probability(pair) / there);
            }
            uses.into(component);
            if (detected > 0.5 * there) {
                component.history = component.history.detected(logTimeMicros);
            }
            if (hypotheses.prospect(i).tells()) {
                double detectable = missedThere * hypotheses.prospect(i).thoughMissed() + detected;
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
        Uses uses = new Uses(hypotheses.scan());
        int h = 0;
        while (h < pasts.count) {
            int owner = pasts.owners[h];
            double missed = shares[h][a] * pasts.there[h];
            absent += shares[h][a] * pasts.absent[h];
            Prospect prospect = hypotheses.prospect(members[owner]);
            detectable += prospect.tells() ? missed * prospect.thoughMissed() : 0;
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
            if (hypotheses.prospect(members[a]).tells()) {
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
}
