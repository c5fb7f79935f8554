package org.sweeptally.filter;

import java.util.ArrayList;
import java.util.List;
import java.util.SortedMap;
import java.util.SortedSet;
import java.util.TreeMap;
import java.util.TreeSet;
import org.sweeptally.filter.Unseen.Heir;

/**
 * Begins a component at every observation of a scan, from the unseen part. Alone in the world, observation j would be
 * an object seen for the first time with probability e / (clutter + e) (Williams 2015); here it is that times the
 * marginal probability that no component caused it.
 */
final class NewComponents {

    private final Scan scan;
    private final long logTimeMicros;
    private final Unseen unseen;
    private final UnseenEvidence evidence;
    private final double[] clutter;
    private final double recyclingBelow;
    private final Counters counters;
    private final SortedSet<Identity> alive = new TreeSet<>();

    /** Null where nobody wants to know. */
    private final EvidenceNotes notes;

    NewComponents(
            Scan scan,
            long logTimeMicros,
            Unseen unseen,
            UnseenEvidence evidence,
            double[] clutter,
            List<Component> components,
            FilterSettings settings,
            Counters counters,
            EvidenceNotes notes) {
        this.scan = scan;
        this.logTimeMicros = logTimeMicros;
        this.unseen = unseen;
        this.evidence = evidence;
        this.clutter = clutter;
        this.recyclingBelow = settings.recyclingBelow();
        this.counters = counters;
        this.notes = notes;
        for (Component component : components) {
            alive.add(component.identity());
        }
    }

    List<Component> begin(ScanHypotheses hypotheses) {
        SortedMap<Identity, Integer> heirs = heirs(hypotheses);
        List<Component> begun = new ArrayList<>();
        for (int j = 0; j < scan.observations().size(); j++) {
            double existence = existence(hypotheses, j);
            if (existence > 0 && existence >= recyclingBelow) {
                begun.add(component(hypotheses, j, heirs));
            } else if (existence > 0) {
                unseen.seen(scan, logTimeMicros, evidence, j, existence, fresh(scan.observations().get(j)), alive);
            }
        }
        return begun;
    }

    /** Which observation goes on with which tag: the greatest contribution, then the lower index. */
    private SortedMap<Identity, Integer> heirs(ScanHypotheses hypotheses) {
        SortedMap<Identity, Integer> heirs = new TreeMap<>();
        SortedMap<Identity, Double> contributions = new TreeMap<>();
        for (int j = 0; j < scan.observations().size(); j++) {
            double existence = existence(hypotheses, j);
            Heir heir = existence < recyclingBelow ? null : unseen.heir(evidence, j);
            if (heir == null || alive.contains(heir.tag().identity())) {
                continue;
            }
            double contribution = existence * heir.share();
            Double before = contributions.get(heir.tag().identity());
            if (before == null || contribution > before) {
                contributions.put(heir.tag().identity(), contribution);
                heirs.put(heir.tag().identity(), j);
            }
        }
        return heirs;
    }

    private double existence(ScanHypotheses hypotheses, int j) {
        double e = evidence.total(j);
        return e > 0 ? hypotheses.nobodys(j) * (e / (clutter[j] + e)) : 0;
    }

    private Component component(ScanHypotheses hypotheses, int j, SortedMap<Identity, Integer> heirs) {
        Observation observation = scan.observations().get(j);
        double e = evidence.total(j);
        double logOdds = LogOdds.ofRatio(hypotheses.nobodys(j) * e, clutter[j] + e * hypotheses.somebodys(j));
        Component.Use use = new Component.Use(observation.part(), observation.index(), observation.id(), 1);
        Heir heir = unseen.heir(evidence, j);
        boolean inherits = heir != null && Integer.valueOf(j).equals(heirs.get(heir.tag().identity()));
        Component component = new Component(
                history(observation, inherits ? heir : null),
                unseen.firstSeen(scan, evidence, j),
                Unseen.detected(
                        inherits ? heir.detectability() : Detectability.UNKNOWN, scan, logTimeMicros),
                logOdds,
                false,
                List.of(use));
        if (notes != null) {
            notes.begun(component, observation, inherits, e, clutter[j], hypotheses.nobodys(j));
        }
        return component;
    }

    private ObjectHistory history(Observation observation, Heir heir) {
        ObjectHistory history;
        if (heir != null) {
            history = heir.tag().detected(logTimeMicros);
            counters.add(Counters.Name.IDENTITIES_RETURNED, 1);
        } else {
            history = fresh(observation);
        }
        return observation.declared() == null ? history : history.declaredAs(observation.declared(), 1);
    }

    /** The history of an object that begins with an observation. */
    private ObjectHistory fresh(Observation observation) {
        Identity identity =
                new Identity(scan.sensor(), scan.scanTimeMicros(), observation.part(), observation.index());
        long seenMicros = logTimeMicros - Math.round(observation.measurement().lagSeconds() * 1e6);
        return new ObjectHistory(
                identity, seenMicros, logTimeMicros, false, observation.declared(), observation.declared() == null ? 0 : 1);
    }
}
