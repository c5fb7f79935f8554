package org.sweeptally.filter;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.SortedMap;
import java.util.SortedSet;
import java.util.TreeMap;
import org.ejml.data.DMatrix4x4;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.model.Gaussian;
import org.sweeptally.model.Look;
import org.sweeptally.model.NearlyConstantVelocity;
import org.sweeptally.model.Measurement;
import org.sweeptally.model.MeasurementUpdate;

/**
 * The Poisson part: the intensity of objects that no component stands for. Never detected ones are in the grid; what is
 * left of components whose existence fell low are Gaussian terms, each tagged with who it was ("recycling", Williams
 * 2012, "Hybrid Poisson and multi-Bernoulli filters"). Mass only moves between the two, or out of the area heard.
 */
final class Unseen {

    private final PlaneArea core;
    private double apronMetres;
    private final Counters counters;
    private final MeasurementUpdate update = new MeasurementUpdate();
    private final Mixture mixture = new Mixture();
    private final double[] step = new double[4];

    private FilterSettings settings;
    private UnseenGrid grid;
    private List<UnseenTerm> terms = new ArrayList<>();

    /** Terms that this scan brings; it has been counted for them already, so they are not thinned by it. */
    private final List<UnseenTerm> entering = new ArrayList<>();

    Unseen(FilterSettings settings, PlaneArea core, double apronMetres, Counters counters) {
        this.settings = settings;
        this.core = core;
        this.apronMetres = apronMetres;
        this.counters = counters;
        grid = new UnseenGrid(settings, core, apronMetres);
        grid.fill(settings.initialPerSquareMetre());
    }

    UnseenGrid grid() {
        return grid;
    }

    List<UnseenTerm> terms() {
        return terms;
    }

    void settings(FilterSettings changed, double changedApronMetres) {
        if (changed.unseenCellMetres() != settings.unseenCellMetres() || changedApronMetres != apronMetres) {
            UnseenGrid other = new UnseenGrid(changed, core, changedApronMetres);
            other.fill(changed.outsidePerSquareMetre());
            other.takeFrom(grid);
            grid = other;
        }
        settings = changed;
        apronMetres = changedApronMetres;
    }

    void predict(NearlyConstantVelocity motion, double survival, double seconds) {
        grid.predict(settings, seconds);
        for (UnseenTerm term : terms) {
            term.weight *= survival;
            motion.predict(term.density, seconds);
            term.sigmaMetres = term.density.largestPositionSigma();
        }
    }

    /** What the unseen part says of each observation. */
    UnseenEvidence evidence(Scan scan, DetectionIndex index) {
        List<Observation> observations = scan.observations();
        UnseenEvidence evidence = new UnseenEvidence(observations.size());
        for (int j = 0; j < observations.size(); j++) {
            Measurement z = observations.get(j).measurement();
            double detection = scan.look().probabilityOfDetection(z);
            evidence.addGrid(j, detection > 0 ? detection * grid.density(z.east(), z.north()) : 0);
        }
        double gate = settings.gateSigmas() * settings.gateSigmas();
        for (int t = 0; t < terms.size(); t++) {
            UnseenTerm term = terms.get(t);
            double everywhere =
                    scan.look().constantNear(term.density.east(), term.density.north(), term.sigmaMetres);
            term.detection = Double.isNaN(everywhere) ? scan.look().averageOver(term.density) : everywhere;
            int candidates = term.detection > 0 ? index.query(term.density, settings.gateSigmas()) : 0;
            if (candidates == 0) {
                continue;
            }
            update.prior(term.density);
            for (int c = 0; c < candidates; c++) {
                int j = index.found(c);
                Measurement z = observations.get(j).measurement();
                if (!update.measure(z)) {
                    counters.add(Counters.Name.INNOVATIONS_NOT_POSITIVE, 1);
                } else if (update.distanceSquared() <= gate) {
                    if (evidence.pairs() == settings.gatedPairs()) {
                        counters.add(Counters.Name.PAIRS_OVER_BOUND, 1);
                        continue;
                    }
                    double detection = Double.isNaN(everywhere)
                            ? scan.look().probabilityOfDetection(z)
                            : everywhere;
                    evidence.addTerm(j, t, term.weight * detection * update.likelihood());
                }
            }
        }
        counters.add(Counters.Name.GATED_TERM_PAIRS, evidence.pairs());
        evidence.sort();
        return evidence;
    }

    /** The density of an object first seen by an observation: the unseen part, updated by it. */
    Gaussian firstSeen(Scan scan, UnseenEvidence evidence, int j) {
        Measurement z = scan.observations().get(j).measurement();
        mixture.reset(z.east(), z.north(), 0, 0);
        if (evidence.fromGrid(j) > 0) {
            step[0] = step[1] = step[2] = step[3] = 0;
            mixture.add(evidence.fromGrid(j), step, 0, fromGrid(z).covariance);
        }
        for (int pair = evidence.firstPair(j); pair < evidence.endPair(j); pair++) {
            Gaussian prior = terms.get(evidence.term(pair)).density;
            update.prior(prior);
            update.measure(z);
            update.step(step, 0);
            step[0] += prior.mean.a1 - z.east();
            step[1] += prior.mean.a2 - z.north();
            step[2] += prior.mean.a3;
            step[3] += prior.mean.a4;
            mixture.add(evidence.value(pair), step, 0, update.updatedCovariance());
        }
        return mixture.matched();
    }

    /** An object from the grid, seen some time ago at z: since then it moved on with its unknown velocity. */
    private Gaussian fromGrid(Measurement z) {
        Gaussian density = Gaussian.atRest(
                z.east(), z.north(), z.varEast(), z.covEastNorth(), z.varNorth(), settings.speedSigma());
        DMatrix4x4 p = density.covariance;
        double cross = z.lagSeconds() * p.a33;
        p.a11 += z.lagSeconds() * cross;
        p.a22 += z.lagSeconds() * cross;
        p.a13 = p.a31 = p.a24 = p.a42 = cross;
        return density;
    }

    /** The tag from which over half of the evidence for an observation comes, with its share; null if there is none. */
    Heir heir(UnseenEvidence evidence, int j) {
        double half = 0.5 * evidence.total(j);
        SortedMap<Identity, Double> sums = new TreeMap<>();
        for (int pair = evidence.firstPair(j); pair < evidence.endPair(j); pair++) {
            ObjectHistory tag = terms.get(evidence.term(pair)).tag;
            double sum = sums.merge(tag.identity(), evidence.value(pair), Double::sum);
            if (sum > half) {
                return new Heir(tag, share(evidence, j, tag.identity()));
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
    record Heir(ObjectHistory tag, double share) {}

    /** Thins the unseen part by the look whose {@link #evidence} was taken, which could have detected what is in it. */
    void missed(Look look) {
        grid.missed(look);
        for (UnseenTerm term : terms) {
            term.weight *= 1 - term.detection;
        }
        terms.addAll(entering);
        entering.clear();
    }

    /** Takes in what is left of a component. */
    void recycle(double existence, Gaussian density, ObjectHistory history) {
        if (existence > 0) {
            terms.add(new UnseenTerm(existence, density, history));
        }
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
        double fromGrid = perEvidence * evidence.fromGrid(j);
        if (isHeavy(fromGrid, z)) {
            entering.add(new UnseenTerm(fromGrid, fromGrid(z), fresh));
        }
        for (int pair = evidence.firstPair(j); pair < evidence.endPair(j); pair++) {
            double weight = perEvidence * evidence.value(pair);
            if (entering.size() >= settings.unseenTerms()) {
                counters.add(Counters.Name.TERMS_OVER_BOUND, 1);
                grid.deposit(z.east(), z.north(), weight);
            } else if (isHeavy(weight, z)) {
                UnseenTerm prior = terms.get(evidence.term(pair));
                boolean taken = alive.contains(prior.tag.identity());
                update.prior(prior.density);
                update.measure(z);
                entering.add(new UnseenTerm(
                        weight, update.updated(), taken ? fresh : prior.tag.detected(logTimeMicros)));
            }
        }
    }

    /** Whether it is worth a term; else it goes to the grid at once. */
    private boolean isHeavy(double weight, Measurement z) {
        if (weight >= settings.leastTermWeight()) {
            return true;
        }
        counters.add(Counters.Name.TERMS_TOO_LIGHT, 1);
        grid.deposit(z.east(), z.north(), weight);
        return false;
    }

    /** Lets go of terms that left, and gives terms back to the grid that are too wide, too faint or too many. */
    void tidy() {
        List<UnseenTerm> kept = new ArrayList<>(terms.size());
        for (UnseenTerm term : terms) {
            if (!core.isAtLeast(-apronMetres, term.density.east(), term.density.north())) {
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
        double area = 2 * StrictMath.PI * Math.sqrt(term.density.positionDeterminant());
        return term.weight < area * grid.density(term.density.east(), term.density.north());
    }

    private void give(UnseenTerm term, Counters.Name why) {
        boolean heard = grid.deposit(term.density.east(), term.density.north(), term.weight);
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
        double sum = grid.inCore();
        for (UnseenTerm term : terms) {
            sum += term.weight * InsideShare.of(term.density, core);
        }
        return sum;
    }
}
