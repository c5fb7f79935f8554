package org.sweeptally.filter;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.SortedMap;
import java.util.SortedSet;
import java.util.TreeMap;
import org.sweeptally.filter.Detectability.Prospect;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.model.Gaussian;
import org.sweeptally.model.Look;
import org.sweeptally.model.Measurement;
import org.sweeptally.model.MotionProfile;

/**
 * The Poisson part: the intensity of objects that no component stands for. Never detected ones are in the grid; what is
 * left of components whose existence fell low are terms, each tagged with who it was ("recycling", Williams
 * 2012, "Hybrid Poisson and multi-Bernoulli filters"). Mass only moves between the two, or out of the area heard.
 */
final class Unseen {

    private final PlaneArea core;
    private double apronMetres;
    private final Counters counters;
    private final BankGate gate = new BankGate();

    private FilterSettings settings;
    private Modes modes;
    private FirstSight sight;

    /** By profile. */
    private List<UnseenGrid> grids;

    private List<UnseenTerm> terms = new ArrayList<>();

    /** Terms that this scan brings; it has been counted for them already, so they are not thinned by it. */
    private final List<UnseenTerm> entering = new ArrayList<>();

    Unseen(FilterSettings settings, Modes modes, PlaneArea core, double apronMetres, Counters counters) {
        this.settings = settings;
        this.modes = modes;
        this.sight = new FirstSight(modes);
        this.core = core;
        this.apronMetres = apronMetres;
        this.counters = counters;
        grids = grids(settings.initialPerSquareMetre());
    }

    private List<UnseenGrid> grids(double perSquareMetre) {
        List<UnseenGrid> filled = new ArrayList<>();
        for (MotionProfile profile : modes.profiles()) {
            UnseenGrid grid = new UnseenGrid(settings, core, apronMetres);
            grid.fill(profile.share() * perSquareMetre);
            filled.add(grid);
        }
        return filled;
    }

    List<UnseenGrid> grids() {
        return grids;
    }

    List<UnseenTerm> terms() {
        return terms;
    }

    /** Goes on with other settings; the mass of all kinds stays, and is shared out anew where the kinds are others. */
    void settings(FilterSettings changed, Modes changedModes, double changedApronMetres) {
        boolean otherRaster = changed.unseenCellMetres() != settings.unseenCellMetres()
                || changedApronMetres != apronMetres;
        boolean otherKinds = !changedModes.isLaidOutAs(modes);
        List<UnseenGrid> before = grids;
        settings = changed;
        apronMetres = changedApronMetres;
        modes = changedModes;
        sight = new FirstSight(modes);
        if (otherKinds) {
            UnseenGrid all = before.get(0);
            before.subList(1, before.size()).forEach(all::add);
            grids = grids(changed.outsidePerSquareMetre());
            for (int p = 0; p < grids.size(); p++) {
                grids.get(p).takeFrom(all, modes.profiles().get(p).share());
            }
            terms.replaceAll(term -> new UnseenTerm(
                    term.weight, modes.begin(term.density()), term.detectability, term.tag));
        } else if (otherRaster) {
            grids = grids(changed.outsidePerSquareMetre());
            for (int p = 0; p < grids.size(); p++) {
                grids.get(p).takeFrom(before.get(p), 1);
            }
        }
    }

    void predict(double[] survival, double seconds) {
        for (int p = 0; p < grids.size(); p++) {
            grids.get(p).predict(settings, modes.profiles().get(p), seconds);
        }
        for (UnseenTerm term : terms) {
            term.weight *= modes.survive(term.bank, survival);
            modes.move(term.bank, seconds);
            term.sigmaMetres = term.density().largestPositionSigma();
        }
    }

    /** What the unseen part says of each observation. */
    UnseenEvidence evidence(Scan scan, long logTimeMicros, DetectionIndex index) {
        List<Observation> observations = scan.observations();
        UnseenEvidence evidence = new UnseenEvidence(observations.size(), grids.size());
        for (int j = 0; j < observations.size(); j++) {
            Measurement z = observations.get(j).measurement();
            double detection = scan.look().probabilityOfDetection(z);
            for (int p = 0; p < grids.size(); p++) {
                double density = detection > 0 ? detection * grids.get(p).density(z.east(), z.north()) : 0;
                evidence.addGrid(j, p, density > 0 ? density * sight.gridRatio(z, p) : density);
            }
        }
        for (int t = 0; t < terms.size(); t++) {
            evidence(evidence, scan, logTimeMicros, index, t);
        }
        counters.add(Counters.Name.GATED_TERM_PAIRS, evidence.pairs());
        evidence.sort();
        return evidence;
    }

    private void evidence(UnseenEvidence evidence, Scan scan, long logTimeMicros, DetectionIndex index, int t) {
        UnseenTerm term = terms.get(t);
        Gaussian density = term.density();
        double everywhere = scan.look().constantNear(density.east(), density.north(), term.sigmaMetres);
        double atPlace = Double.isNaN(everywhere) ? scan.look().averageOver(density) : everywhere;
        Prospect prospect = term.detectability.prospect(scan, logTimeMicros, atPlace);
        double times = prospect.times();
        term.thoughMissed = prospect.tells()
                ? term.detectability.with(scan.sensor(), prospect.thoughMissed(), logTimeMicros)
                : term.detectability;
        term.detection = atPlace * times;
        if (term.detection == 0) {
            return;
        }
        gate.open(term.bank, scan, index, settings.gateSigmas(), counters);
        for (int c = 0; c < gate.count(); c++) {
            if (evidence.pairs() == settings.gatedPairs()) {
                counters.add(Counters.Name.PAIRS_OVER_BOUND, 1);
                continue;
            }
            double detection = everywhere;
            if (Double.isNaN(everywhere)) {
                Measurement z = scan.observations().get(gate.observation(c)).measurement();
                detection = scan.look().probabilityOfDetection(z);
            }
            detection = times == 1 ? detection : Math.min(1, detection * times);
            evidence.addTerm(gate.observation(c), t, term.weight * detection * gate.likelihood(c));
        }
    }

    /** The bank of an object first seen by an observation: the unseen part, updated by it. */
    Bank firstSeen(Scan scan, UnseenEvidence evidence, int j) {
        sight.begin(scan.observations().get(j).measurement());
        for (int p = 0; p < grids.size(); p++) {
            sight.addGrid(evidence.fromGrid(j, p), p);
        }
        for (int pair = evidence.firstPair(j); pair < evidence.endPair(j); pair++) {
            sight.addTerm(evidence.value(pair), terms.get(evidence.term(pair)).bank);
        }
        return sight.bank();
    }

    /** The tag from which over half of the evidence for an observation comes, with its share; null if there is none. */
    Heir heir(UnseenEvidence evidence, int j) {
        double half = 0.5 * evidence.total(j);
        SortedMap<Identity, Double> sums = new TreeMap<>();
        for (int pair = evidence.firstPair(j); pair < evidence.endPair(j); pair++) {
            ObjectHistory tag = terms.get(evidence.term(pair)).tag;
            double sum = sums.merge(tag.identity(), evidence.value(pair), Double::sum);
            if (sum > half) {
                Detectability detectability = terms.get(evidence.term(pair)).detectability;
                return new Heir(tag, detectability, share(evidence, j, tag.identity()));
            }
        }
        return null;
    }

    private double share(UnseenEvidence evidence, int j, Identity identity) {
        double sum = 0;
        for (int pair = evidence.firstPair(j); pair < evidence.endPair(j); pair++) {
            if (terms.get(evidence.term(pair)).tag.identity().equals(identity)) {
                sum += evidence.value(pair);
            }
        }
        return sum / evidence.total(j);
    }

    /** A history that may go on in a new component, and the share of the component that comes from it. */
    record Heir(ObjectHistory tag, Detectability detectability, double share) {}

    /** Thins the unseen part by the look whose {@link #evidence} was taken, which could have detected what is in it. */
    void missed(Look look) {
        double[] probability = grids.get(0).probabilityByCell(look);
        for (UnseenGrid grid : grids) {
            grid.missed(probability);
        }
        for (UnseenTerm term : terms) {
            term.weight *= 1 - term.detection;
            term.detectability = term.thoughMissed;
        }
        terms.addAll(entering);
        entering.clear();
    }

    /** Takes in what is left of a component. */
    void recycle(Component component) {
        double existence = component.existence();
        if (existence > 0) {
            terms.add(new UnseenTerm(existence, component.bank, component.detectability, component.history));
        }
    }

    /** What is known of the detectability of an object that a look has just detected. */
    static Detectability detected(Detectability before, Scan scan, long logTimeMicros) {
        boolean runs = scan.look().sensor().misses().hiddenSeconds() > 0;
        return runs ? before.with(scan.sensor(), 1, logTimeMicros) : before;
    }

    /**
     * Takes back an object that an observation speaks for too weakly to make it a component. The terms that it would be
     * mixed from stay apart, each with its own history: a Poisson intensity may have any number of terms, and which of
     * them was right shows with the next observations.
     *
     * @param existence probability of the object, split by what it comes from
     * @param fresh     history of an object that begins here
     * @param alive     identities that live components have
     */
    void seen(
            Scan scan,
            long logTimeMicros,
            UnseenEvidence evidence,
            int j,
            double existence,
            ObjectHistory fresh,
            SortedSet<Identity> alive) {
        Measurement z = scan.observations().get(j).measurement();
        double perEvidence = existence / evidence.total(j);
        double fromGrid = 0;
        for (int p = 0; p < grids.size(); p++) {
            fromGrid += perEvidence * evidence.fromGrid(j, p);
        }
        if (fromGrid >= settings.leastTermWeight()) {
            sight.begin(z);
            for (int p = 0; p < grids.size(); p++) {
                sight.addGrid(evidence.fromGrid(j, p), p);
            }
            Detectability detectability = detected(Detectability.UNKNOWN, scan, logTimeMicros);
            entering.add(new UnseenTerm(fromGrid, sight.bank(), detectability, fresh));
        } else {
            counters.add(Counters.Name.TERMS_TOO_LIGHT, 1);
            for (int p = 0; p < grids.size(); p++) {
                grids.get(p).deposit(z.east(), z.north(), perEvidence * evidence.fromGrid(j, p));
            }
        }
        for (int pair = evidence.firstPair(j); pair < evidence.endPair(j); pair++) {
            double weight = perEvidence * evidence.value(pair);
            UnseenTerm prior = terms.get(evidence.term(pair));
            if (entering.size() >= settings.unseenTerms()) {
                counters.add(Counters.Name.TERMS_OVER_BOUND, 1);
                deposit(z.east(), z.north(), weight, prior.bank);
            } else if (weight >= settings.leastTermWeight()) {
                boolean taken = alive.contains(prior.tag.identity());
                sight.begin(z);
                sight.addTerm(weight, prior.bank);
                if (sight.weight() > 0) {
                    entering.add(new UnseenTerm(
                            weight,
                            sight.bank(),
                            detected(prior.detectability, scan, logTimeMicros),
                            taken ? fresh : prior.tag.detected(logTimeMicros)));
                }
            } else {
                counters.add(Counters.Name.TERMS_TOO_LIGHT, 1);
                deposit(z.east(), z.north(), weight, prior.bank);
            }
        }
    }

    /** Gives mass to the grids, to each as much as the bank is of its kind; false outside them. */
    private boolean deposit(double east, double north, double weight, Bank bank) {
        boolean heard = true;
        for (int p = 0; p < grids.size(); p++) {
            double share = 0;
            for (int m = modes.firstOf(p); m < modes.endOf(p); m++) {
                share += bank.weights[m];
            }
            heard &= grids.get(p).deposit(east, north, weight * share);
        }
        return heard;
    }

    /** Lets go of terms that left, and gives terms back to the grid that are too wide, too faint or too many. */
    void tidy() {
        List<UnseenTerm> kept = new ArrayList<>(terms.size());
        for (UnseenTerm term : terms) {
            if (!core.isAtLeast(-apronMetres, term.density().east(), term.density().north())) {
                counters.add(Counters.Name.TERMS_GONE, 1);
            } else if (term.sigmaMetres > settings.unseenCellMetres()) {
                give(term, Counters.Name.TERMS_RETURNED_WIDE);
            } else if (isFaint(term)) {
                give(term, Counters.Name.TERMS_RETURNED_FAINT);
            } else {
                kept.add(term);
            }
        }
        if (kept.size() > settings.unseenTerms()) {
            kept = heaviest(kept);
        }
        terms = kept;
    }

    /** Whether even at its peak it is thinner than the grid: then it can no longer decide who a new object is. */
    private boolean isFaint(UnseenTerm term) {
        double area = 2 * StrictMath.PI * Math.sqrt(term.density().positionDeterminant());
        double grid = 0;
        for (UnseenGrid kind : grids) {
            grid += kind.density(term.density().east(), term.density().north());
        }
        return term.weight < area * grid;
    }

    private void give(UnseenTerm term, Counters.Name why) {
        boolean heard = deposit(term.density().east(), term.density().north(), term.weight, term.bank);
        counters.add(heard ? why : Counters.Name.TERMS_GONE, 1);
    }

    private List<UnseenTerm> heaviest(List<UnseenTerm> all) {
        List<UnseenTerm> byWeight = new ArrayList<>(all);
        byWeight.sort(Comparator.comparingDouble(term -> -term.weight));
        double least = byWeight.get(settings.unseenTerms() - 1).weight;
        List<UnseenTerm> kept = new ArrayList<>(settings.unseenTerms());
        for (UnseenTerm term : all) {
            if (term.weight >= least && kept.size() < settings.unseenTerms()) {
                kept.add(term);
            } else {
                give(term, Counters.Name.TERMS_OVER_BOUND);
            }
        }
        return kept;
    }

    /** Expected number of objects of the unseen part in the core. */
    double expectedInCore() {
        double expected = 0;
        for (UnseenGrid grid : grids) {
            expected += grid.inCore();
        }
        for (UnseenTerm term : terms) {
            expected += term.weight * InsideShare.of(term.density(), core);
        }
        return expected;
    }
}
