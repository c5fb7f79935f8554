package org.sweeptally.filter;

import java.util.Arrays;
import java.util.List;
import org.sweeptally.filter.Detectability.Prospect;
import org.sweeptally.filter.association.Association;
import org.sweeptally.filter.association.AssociationBounds;
import org.sweeptally.filter.association.AssociationCounts;
import org.sweeptally.filter.association.AssociationMarginals;
import org.sweeptally.filter.association.AssociationProblem;
import org.sweeptally.model.Look;
import org.sweeptally.model.Measurement;

/**
 * Which component may have caused which observation of a scan, and how probable each pair is in the light of all
 * others.
 *
 * <p>With existence r, probability of detection pd and likelihood l: a pair weighs r pd l(z), a missed component
 * 1 - r pd, an observation of nobody's clutter + e (Williams 2015). The marginal probabilities of one-to-one
 * associations with these weights come from {@link Association}; what they make of the components is up to {@link
 * Posteriors}.
 */
final class ScanHypotheses {

    private final List<Component> components;
    private final Scan scan;
    private final long logTimeMicros;
    private final FilterSettings settings;
    private final Counters counters;
    private final AssociationProblem problem;
    private final AssociationMarginals marginals;
    private final BankGate gate = new BankGate();
    private final int modes;

    /** Existence of each component before the scan, and its complement. */
    private final double[] existence;

    private final double[] absence;

    /**
     * Probability that the scan detects each component, if it exists: averaged over its density and its
     * detectability.
     */
    private final double[] detection;

    /** What the scan may find of each component, by what is known of its detectability. */
    private final Prospect[] prospects;

    /** Probabilities of the modes given a pair, modes of one pair side by side. */
    private double[] modeShares = new double[64];

    /** Probability of each observation that some component caused it, summed so that small ones stay exact. */
    private final double[] somebodys;

    /**
     * @param clutter     density of false detections at each observation, per square metre
     * @param association solves the problem, in storage that both keep for the next scan
     */
    ScanHypotheses(
            List<Component> components,
            Scan scan,
            long logTimeMicros,
            DetectionIndex index,
            double[] clutter,
            UnseenEvidence evidence,
            FilterSettings settings,
            int modes,
            Counters counters,
            Association association,
            AssociationProblem problem) {
        this.components = components;
        this.scan = scan;
        this.logTimeMicros = logTimeMicros;
        this.settings = settings;
        this.modes = modes;
        this.counters = counters;
        this.problem = problem;
        existence = new double[components.size()];
        absence = new double[components.size()];
        detection = new double[components.size()];
        prospects = new Prospect[components.size()];
        problem.clear();
        for (int j = 0; j < scan.observations().size(); j++) {
            problem.addColumn(clutter[j] + evidence.total(j));
        }
        for (int i = 0; i < detection.length; i++) {
            gate(components.get(i), i, index);
        }
        counters.add(Counters.Name.GATED_COMPONENT_PAIRS, problem.pairs());
        marginals = association.solve(
                problem, new AssociationBounds(settings.exactAssociationSteps(), settings.propagationSweeps()));
        count(marginals.counts());
        somebodys = new double[problem.columns()];
        for (int pair = 0; pair < problem.pairs(); pair++) {
            somebodys[problem.column(pair)] += marginals.pair(pair);
        }
    }

    /**
     * Adds component i's row to the problem. Near an edge the probability of detection of a pair is taken where the
     * sensor measured, since that decided whether it would report it: of two looks side by side the one that reported
     * has it.
     */
    private void gate(Component component, int i, DetectionIndex index) {
        Look look = scan.look();
        double constant = look.constantOver(component.density());
        existence[i] = component.existence();
        absence[i] = LogOdds.complement(component.logOdds);
        double atPlace = Double.isNaN(constant) ? look.averageOver(component.density()) : constant;
        prospects[i] = component.detectability.prospect(scan, logTimeMicros, atPlace);
        double times = prospects[i].times();
        detection[i] = atPlace * times;
        problem.addRow(absence[i] + existence[i] * (1 - detection[i]));
        if (detection[i] == 0) {
            return;
        }
        gate.open(component.bank, scan, index, settings.gateSigmas(), counters);
        for (int c = 0; c < gate.count(); c++) {
            if (problem.pairs() == settings.gatedPairs()) {
                counters.add(Counters.Name.PAIRS_OVER_BOUND, 1);
                continue;
            }
            int j = gate.observation(c);
            double there = constant;
            if (Double.isNaN(constant)) {
                there = look.probabilityOfDetection(
                        scan.observations().get(j).measurement());
            }
            there = times == 1 ? there : Math.min(1, there * times);
            int at = problem.pairs() * modes;
            if (at + modes > modeShares.length) {
                modeShares = Arrays.copyOf(modeShares, 2 * (at + modes));
            }
            gate.modeShares(c, modeShares, at);
            problem.addPair(j, existence[i] * there * gate.likelihood(c));
        }
    }

    private void count(AssociationCounts counts) {
        counters.add(Counters.Name.CLUSTERS_CLOSED_FORM, counts.closed());
        counters.add(Counters.Name.CLUSTERS_EXACT, counts.exact());
        counters.add(Counters.Name.CLUSTERS_PROPAGATED, counts.propagated());
        counters.add(Counters.Name.PROPAGATION_SWEEPS, counts.sweeps());
        counters.add(Counters.Name.PROPAGATION_CAPPED, counts.sweepCapHits());
        counters.add(Counters.Name.CLUSTERS_IMPOSSIBLE, counts.impossible());
        counters.add(Counters.Name.CLUSTERS_UNDERFLOWED, counts.underflows());
    }

    Scan scan() {
        return scan;
    }

    List<Component> components() {
        return components;
    }

    /** Marginal probability that no component caused an observation. */
    double nobodys(int j) {
        return marginals.nobody(j);
    }

    /** Marginal probability that some component caused it. */
    double somebodys(int j) {
        return somebodys[j];
    }

    /** First pair of component i; the pairs of i end where those of i + 1 start. */
    int firstPair(int i) {
        return problem.rowStart(i);
    }

    int endPair(int i) {
        return problem.rowStart(i + 1);
    }

    /** The observation of a pair. */
    int observationOf(int pair) {
        return problem.column(pair);
    }

    Measurement measurementOf(int pair) {
        return scan.observations().get(problem.column(pair)).measurement();
    }

    /** Marginal probability of a pair. */
    double probability(int pair) {
        return marginals.pair(pair);
    }

    /** Probability of a mode given a pair. */
    double modeShare(int pair, int mode) {
        return modeShares[pair * modes + mode];
    }

    /** Marginal probability that component i exists and was missed. */
    double missedThere(int i) {
        double hidden = existence[i] * (1 - detection[i]);
        return absence[i] + hidden > 0 ? marginals.missed(i) * (hidden / (absence[i] + hidden)) : 0;
    }

    /** Marginal probability that component i does not exist. */
    double missedAbsent(int i) {
        double hidden = existence[i] * (1 - detection[i]);
        return absence[i] + hidden > 0
                ? marginals.missed(i) * (absence[i] / (absence[i] + hidden))
                : marginals.missed(i);
    }

    /** Probability that the scan detects component i, if it exists. */
    double detection(int i) {
        return detection[i];
    }

    /** How much more probable a pair's observation is if component i exists than if nobody known caused it. */
    double likelihoodRatio(int i, int pair) {
        return problem.weight(pair) / existence[i] / problem.nobodyWeight(problem.column(pair));
    }

    /** The component of a pair. */
    int rowOf(int pair) {
        int low = 0;
        int high = components.size();
        while (high - low > 1) {
            int middle = (low + high) / 2;
            low = problem.rowStart(middle) <= pair ? middle : low;
            high = problem.rowStart(middle) <= pair ? high : middle;
        }
        return low;
    }

    /** What the scan may find of component i, by what is known of its detectability. */
    Prospect prospect(int i) {
        return prospects[i];
    }
}
