package org.sweeptally.filter;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import org.sweeptally.filter.association.Association;
import org.sweeptally.filter.association.AssociationBounds;
import org.sweeptally.filter.association.AssociationCounts;
import org.sweeptally.filter.association.AssociationProblem;
import org.sweeptally.filter.association.AssociationMarginals;
import org.sweeptally.model.Gaussian;
import org.sweeptally.model.Look;
import org.sweeptally.model.Measurement;
import org.sweeptally.model.MeasurementUpdate;

/**
 * Which component may have caused which observation of a scan, how probable each pair is in the light of all others, and
 * what that makes of a component.
 *
 * <p>With existence r, probability of detection pd and likelihood l: a pair weighs r pd l(z), a missed component
 * 1 - r pd, an observation of nobody's clutter + e (Williams 2015). The marginal probabilities of one-to-one associations
 * with these weights come from {@link Association}.
 */
final class ScanHypotheses {

    /** Detections used with less than this probability are not named in what is published. */
    private static final double LEAST_USE = 0.01;

    private final Scan scan;
    private final FilterSettings settings;
    private final Counters counters;
    private final AssociationProblem problem;
    private final AssociationMarginals marginals;

    /** Existence of each component before the scan, and its complement. */
    private final double[] existence;

    private final double[] absence;

    /** Probability of detection of each component, averaged over its density. */
    private final double[] detection;

    /** Probability of each observation that some component caused it, summed so that small ones stay exact. */
    private final double[] somebodys;

    private final MeasurementUpdate update = new MeasurementUpdate();
    private final Mixture mixture = new Mixture();
    private final double[] step = new double[4];

    /**
     * @param clutter     density of false detections at each observation, per square metre
     * @param association solves the problem, in storage that both keep for the next scan
     */
    ScanHypotheses(
            List<Component> components,
            Scan scan,
            double[] clutter,
            DetectionIndex index,
            UnseenEvidence evidence,
            FilterSettings settings,
            Counters counters,
            Association association,
            AssociationProblem problem) {
        this.scan = scan;
        this.settings = settings;
        this.counters = counters;
        this.problem = problem;
        existence = new double[components.size()];
        absence = new double[components.size()];
        detection = new double[components.size()];
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
     * Adds component i's row to the problem. Near an edge the probability of detection of a pair is taken where the sensor
     * measured, since that decided whether it would report it: of two looks side by side the one that reported has it.
     */
    private void gate(Component component, int i, DetectionIndex index) {
        Look look = scan.look();
        Gaussian density = component.density;
        double constant = look.constantOver(density);
        existence[i] = component.existence();
        absence[i] = LogOdds.complement(component.logOdds);
        detection[i] = Double.isNaN(constant) ? look.averageOver(density) : constant;
        problem.addRow(absence[i] + existence[i] * (1 - detection[i]));
        if (detection[i] == 0) {
            return;
        }
        update.prior(density);
        double gate = settings.gateSigmas() * settings.gateSigmas();
        int candidates = index.query(density, settings.gateSigmas());
        for (int c = 0; c < candidates; c++) {
            int j = index.found(c);
            Measurement z = scan.observations().get(j).measurement();
            if (!update.measure(z)) {
                counters.add(Counters.Name.INNOVATIONS_NOT_POSITIVE, 1);
            } else if (update.distanceSquared() <= gate) {
                if (problem.pairs() == settings.gatedPairs()) {
                    counters.add(Counters.Name.PAIRS_OVER_BOUND, 1);
                    continue;
                }
                double there = Double.isNaN(constant) ? look.probabilityOfDetection(z) : constant;
                problem.addPair(j, existence[i] * there * update.likelihood());
            }
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

    /** Marginal probability that no component caused an observation. */
    double nobodys(int j) {
        return marginals.nobody(j);
    }

    /** Marginal probability that some component caused it. */
    double somebodys(int j) {
        return somebodys[j];
    }

    /**
     * Existence and density of component i after the scan. Existence is what the associations leave of it: detected by
     * some observation, or missed and there all the same. The density is the Gaussian with the moments of the mixture.
     */
    void update(Component component, int i, long logTimeMicros) {
        double absent = absence[i];
        double hidden = existence[i] * (1 - detection[i]);
        double missed = marginals.missed(i);
        double missedThere = absent + hidden > 0 ? missed * (hidden / (absent + hidden)) : 0;
        double missedAbsent = absent + hidden > 0 ? missed * (absent / (absent + hidden)) : missed;

        Gaussian prior = component.density;
        mixture.reset(prior.mean.a1, prior.mean.a2, prior.mean.a3, prior.mean.a4);
        Arrays.fill(step, 0);
        mixture.add(missedThere, step, 0, prior.covariance);
        update.prior(prior);
        double detected = 0;
        for (int pair = problem.rowStart(i); pair < problem.rowStart(i + 1); pair++) {
            double probability = marginals.pair(pair);
            detected += probability;
            update.measure(scan.observations().get(problem.column(pair)).measurement());
            update.step(step, 0);
            mixture.add(probability, step, 0, update.updatedCovariance());
        }
        double there = mixture.weight();
        component.logOdds = LogOdds.ofRatio(there, missedAbsent);
        component.used = List.of();
        if (there > 0) {
            component.density = mixture.matched();
            use(component, i, there);
            if (detected > 0.5 * there) {
                component.history = component.history.detected(logTimeMicros);
            }
        }
    }

    private void use(Component component, int i, double there) {
        List<Component.Use> used = new ArrayList<>();
        for (int pair = problem.rowStart(i); pair < problem.rowStart(i + 1); pair++) {
            double probability = marginals.pair(pair) / there;
            if (probability >= LEAST_USE) {
                Observation observation = scan.observations().get(problem.column(pair));
                used.add(new Component.Use(
                        observation.part(), observation.index(), observation.id(), Math.min(1, probability)));
                if (observation.declared() != null) {
                    component.history = component.history.declaredAs(observation.declared(), Math.min(1, probability));
                }
            }
        }
        component.used = List.copyOf(used);
    }
}
