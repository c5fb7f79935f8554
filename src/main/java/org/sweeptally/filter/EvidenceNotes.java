package org.sweeptally.filter;

import java.util.ArrayList;
import java.util.List;
import java.util.SortedSet;
import java.util.TreeSet;
import org.sweeptally.filter.Detectability.Prospect;
import org.sweeptally.filter.ObjectEvidence.Beginning;
import org.sweeptally.filter.ObjectEvidence.Fate;
import org.sweeptally.filter.ObjectEvidence.Gated;
import org.sweeptally.filter.ObjectEvidence.Kind;
import org.sweeptally.filter.ObjectEvidence.Step;
import org.sweeptally.model.MeasurementUpdate;

/**
 * Notes of one scan why existence changes, beside the recursion: it reads what that has worked out, and changes
 * nothing. With log-odds l after survival, and the marginal probabilities of association, an update makes them
 * ln(there / absent); what a lone object would have come to parts this into its own detections and the others' claims.
 */
final class EvidenceNotes {

    /** Other objects that caused a detection with less than this probability are not named. */
    private static final double LEAST_OTHER = 0.01;

    /** What is left over and smaller is rounding, and no evidence. */
    private static final double ROUNDING = 1e-11;

    private final List<Component> components;
    private final List<Note> notes = new ArrayList<>();
    private final List<Component> begun = new ArrayList<>();
    private final List<Note> begunNotes = new ArrayList<>();

    /** What is known of a component's evidence before its posterior is. */
    private static final class Note {
        double before;
        final List<Step> steps = new ArrayList<>();
        double noted;
        double detection = Double.NaN;
        Prospect prospect = Prospect.AS_USUAL;
        List<Gated> gated = List.of();
        Beginning beginning;

        void step(Kind kind, double change) {
            boolean remainder = kind == Kind.COMPETITION || kind == Kind.EXCHANGE;
            boolean tells = remainder ? Math.abs(change) > ROUNDING : change != 0 || kind == Kind.DETECTED;
            if (tells && !Double.isNaN(change)) {
                steps.add(new Step(kind, change));
                noted += change;
            }
        }
    }

    /** @param before log-odds of each component before survival */
    EvidenceNotes(List<Component> components, double[] before) {
        this.components = List.copyOf(components);
        for (int i = 0; i < components.size(); i++) {
            Note note = new Note();
            note.before = before[i];
            note.noted = before[i];
            note.step(Kind.SURVIVAL, components.get(i).logOdds - before[i]);
            notes.add(note);
        }
    }

    /** Notes what the associations say, before the components take it in. */
    void associated(ScanHypotheses hypotheses) {
        List<List<Integer>> pairsOf = pairsByObservation(hypotheses);
        for (int i = 0; i < notes.size(); i++) {
            Note note = notes.get(i);
            note.detection = hypotheses.detection(i);
            note.prospect = hypotheses.prospect(i);
            note.gated = gated(hypotheses, i, pairsOf);
            steps(hypotheses, i, note);
        }
    }

    private static void steps(ScanHypotheses hypotheses, int i, Note note) {
        double alone = 1 - note.detection;
        double there = hypotheses.missedThere(i);
        for (int pair = hypotheses.firstPair(i); pair < hypotheses.endPair(i); pair++) {
            alone += hypotheses.likelihoodRatio(i, pair);
            there += hypotheses.probability(pair);
        }
        note.step(note.gated.isEmpty() ? Kind.MISSED : Kind.DETECTED, StrictMath.log(alone));
        if (!note.gated.isEmpty()) {
            double together = LogOdds.ofRatio(there, hypotheses.missedAbsent(i));
            if (Double.isFinite(together)) {
                note.step(Kind.COMPETITION, together - note.noted);
            }
        }
    }

    private static List<List<Integer>> pairsByObservation(ScanHypotheses hypotheses) {
        List<List<Integer>> pairs = new ArrayList<>();
        for (int j = 0; j < hypotheses.scan().observations().size(); j++) {
            pairs.add(new ArrayList<>());
        }
        for (int i = 0; i < hypotheses.components().size(); i++) {
            for (int pair = hypotheses.firstPair(i); pair < hypotheses.endPair(i); pair++) {
                pairs.get(hypotheses.observationOf(pair)).add(pair);
            }
        }
        return pairs;
    }

    private List<Gated> gated(ScanHypotheses hypotheses, int i, List<List<Integer>> pairsOf) {
        List<Gated> gated = new ArrayList<>();
        MeasurementUpdate update = new MeasurementUpdate();
        update.prior(components.get(i).density());
        for (int pair = hypotheses.firstPair(i); pair < hypotheses.endPair(i); pair++) {
            int j = hypotheses.observationOf(pair);
            Observation observation = hypotheses.scan().observations().get(j);
            double distance = update.measure(observation.measurement())
                    ? Math.sqrt(update.distanceSquared())
                    : Double.NaN;
            gated.add(new Gated(observation.part(), observation.index(), observation.id(),
                    hypotheses.probability(pair), distance, hypotheses.likelihoodRatio(i, pair),
                    hypotheses.nobodys(j), others(hypotheses, i, pairsOf.get(j))));
        }
        return gated;
    }

    private List<ObjectEvidence.Other> others(ScanHypotheses hypotheses, int i, List<Integer> pairs) {
        List<ObjectEvidence.Other> others = new ArrayList<>();
        for (int pair : pairs) {
            boolean own = pair >= hypotheses.firstPair(i) && pair < hypotheses.endPair(i);
            if (!own && hypotheses.probability(pair) >= LEAST_OTHER) {
                Identity identity = components.get(hypotheses.rowOf(pair)).identity();
                others.add(new ObjectEvidence.Other(identity, hypotheses.probability(pair)));
            }
        }
        return others;
    }

    /** Notes a component that an observation begins. */
    void begun(
            Component component, Observation observation, boolean returned, double unseen, double clutter,
            double nobodys) {
        Note note = new Note();
        note.before = Double.NaN;
        note.beginning = new Beginning(
                observation.part(), observation.index(), observation.id(), unseen, clutter, nobodys);
        double alone = LogOdds.ofRatio(unseen, clutter);
        if (Double.isFinite(alone)) {
            note.step(returned ? Kind.RETURNED : Kind.BEGAN, alone);
            note.step(Kind.COMPETITION, component.logOdds - note.noted);
        } else {
            note.step(returned ? Kind.RETURNED : Kind.BEGAN, component.logOdds);
        }
        begun.add(component);
        begunNotes.add(note);
    }

    /** All of it, when the scan is done. */
    ScanEvidence finish(Scan scan, long logTimeMicros, ScanResult result) {
        SortedSet<Identity> recycled = identities(result.recycled());
        SortedSet<Identity> gone = identities(result.gone());
        List<ObjectEvidence> objects = new ArrayList<>();
        for (int i = 0; i < notes.size(); i++) {
            notes.get(i).step(Kind.EXCHANGE, components.get(i).logOdds - notes.get(i).noted);
            objects.add(evidence(components.get(i), notes.get(i), recycled, gone));
        }
        for (int i = 0; i < begun.size(); i++) {
            objects.add(evidence(begun.get(i), begunNotes.get(i), recycled, gone));
        }
        return new ScanEvidence(scan.sensor(), scan.scanTimeMicros(), logTimeMicros, objects);
    }

    private static SortedSet<Identity> identities(List<Component> components) {
        SortedSet<Identity> identities = new TreeSet<>();
        components.forEach(component -> identities.add(component.identity()));
        return identities;
    }

    private static ObjectEvidence evidence(
            Component component, Note note, SortedSet<Identity> recycled, SortedSet<Identity> gone) {
        Identity identity = component.identity();
        Fate fate = recycled.contains(identity) ? Fate.RECYCLED : gone.contains(identity) ? Fate.LEFT : Fate.KEPT;
        return new ObjectEvidence(identity, note.before, note.steps, component.logOdds, note.detection,
                note.prospect.detectable(), note.prospect.whenDetectable(), note.gated, note.beginning, fate,
                component.confirmed());
    }
}
