package org.sweeptally.filter;

import java.io.DataInput;
import java.io.DataOutput;
import java.io.IOException;
import java.util.ArrayList;
import java.util.Collections;
import java.util.Comparator;
import java.util.List;
import java.util.Optional;
import java.util.function.Consumer;
import org.sweeptally.filter.association.Association;
import org.sweeptally.filter.association.AssociationProblem;
import org.sweeptally.filter.count.NumberDistribution;
import org.sweeptally.filter.count.PoissonBinomial;
import org.sweeptally.geo.PlaneArea;

/**
 * The recursion of one region: a Poisson multi-Bernoulli filter. Objects that some detection speaks for are Bernoulli
 * {@linkplain Component components}; all others are the Poisson {@linkplain Unseen unseen part}. After each scan the
 * posterior, a mixture over all ways to associate, is put back into this form through the marginal probabilities of
 * association: the track-oriented marginal multi-Bernoulli/Poisson filter of Williams 2015, "Marginal multi-Bernoulli
 * filters: RFS derivation of MHT, JIPDA, and association-based MeMBer", IEEE TAES 51(3):1664-1687.
 *
 * <p>One scan is {@link #predict} and {@link #update}. No method reads a clock or a random source, and sums run in the
 * order of the lists, so that equal input gives equal state to the last bit.
 */
public final class ObjectFilter {

    /**
     * Probability of moving below which a moving object counts as still, and from which a still one counts as
     * moving.
     */
    private static final double STOPPED = 0.3;

    private static final double STARTED = 0.7;

    private final PlaneArea core;
    private double apronMetres;
    private final Counters counters = new Counters();
    private final Association association = new Association();
    private final AssociationProblem problem = new AssociationProblem();
    private final Unseen unseen;
    private final ClutterMap clutterMap;

    private FilterSettings settings;
    private Modes modes;
    private List<Component> components = new ArrayList<>();

    /** Null where nobody wants to know why existence changes; then nothing is noted. */
    private Consumer<ScanEvidence> observer;

    /** Log-odds of the components before time passed; only where they are observed. */
    private double[] beforeSurvival;

    /**
     * @param core        the area that the region answers for, in its plane
     * @param apronMetres how far around the core the region hears
     */
    public ObjectFilter(FilterSettings settings, PlaneArea core, double apronMetres) {
        this.settings = settings;
        this.core = core;
        this.apronMetres = apronMetres;
        this.modes = new Modes(settings.profiles());
        this.unseen = new Unseen(settings, modes, core, apronMetres, counters);
        this.clutterMap = new ClutterMap(core, apronMetres);
    }

    /** Goes on with other settings, and perhaps with another apron. */
    public void settings(FilterSettings changed, double changedApronMetres) {
        Modes changedModes = new Modes(changed.profiles());
        unseen.settings(changed, changedModes, changedApronMetres);
        clutterMap.apron(changedApronMetres);
        if (!changedModes.isLaidOutAs(modes)) {
            for (Component component : components) {
                component.bank = changedModes.begin(component.density());
            }
        }
        settings = changed;
        apronMetres = changedApronMetres;
        modes = changedModes;
    }

    /** The live components: those that were there in their old order, then new ones in the order of the scan. */
    public List<Component> components() {
        return Collections.unmodifiableList(components);
    }

    public Counters counters() {
        return counters;
    }

    /** What has been learned of the density of false detections. */
    ClutterMap clutterMap() {
        return clutterMap;
    }

    /**
     * From now on tells after every scan why existence changed; what the filter does stays the same to the last
     * bit.
     */
    public void observe(Consumer<ScanEvidence> evidence) {
        observer = evidence;
    }

    /** Lets time pass, 0 seconds or more: survival, motion, births, inflow. */
    public void predict(double seconds) {
        beforeSurvival = observer == null ? null : logOdds();
        double[] survival = modes.survival(seconds);
        for (Component component : components) {
            component.logOdds = LogOdds.survive(component.logOdds, modes.survive(component.bank, survival));
            modes.move(component.bank, seconds);
        }
        unseen.predict(survival, seconds);
    }

    private double[] logOdds() {
        double[] values = new double[components.size()];
        for (int i = 0; i < values.length; i++) {
            values[i] = components.get(i).logOdds;
        }
        return values;
    }

    /**
     * Takes in one scan, to whose log time the state must have been predicted.
     *
     * @return components that are no longer on the list
     */
    public ScanResult update(Scan scan, long logTimeMicros) {
        counters.add(Counters.Name.SCANS, 1);
        counters.add(Counters.Name.OBSERVATIONS, scan.observations().size());
        DetectionIndex index = new DetectionIndex(scan.observations());
        double[] clutter = clutterMap.clutterOf(scan);
        UnseenEvidence evidence = unseen.evidence(scan, logTimeMicros, index);
        ScanHypotheses hypotheses = new ScanHypotheses(
                components, scan, logTimeMicros, index, clutter, evidence, settings, modes.count(), counters, association,
                problem);
        clutterMap.learn(
                scan, j -> hypotheses.nobodys(j) * (clutter[j] / (clutter[j] + evidence.total(j))), logTimeMicros);

        EvidenceNotes notes = observer == null ? null : notes(hypotheses);
        List<Component> begun = new NewComponents(
                        scan, logTimeMicros, unseen, evidence, clutter, components, settings, counters, notes)
                .begin(hypotheses);
        new Posteriors(hypotheses, modes, logTimeMicros).update();
        unseen.missed(scan.look());

        counters.add(Counters.Name.COMPONENTS_BEGUN, begun.size());
        components.addAll(begun);
        ScanResult result = sortOut();
        unseen.tidy();
        if (notes != null) {
            observer.accept(notes.finish(scan, logTimeMicros, result));
        }
        return result;
    }

    private EvidenceNotes notes(ScanHypotheses hypotheses) {
        EvidenceNotes notes = new EvidenceNotes(components, beforeSurvival == null ? logOdds() : beforeSurvival);
        beforeSurvival = null;
        notes.associated(hypotheses);
        return notes;
    }

    /** Confirms, recycles and lets go. */
    private ScanResult sortOut() {
        double confirming = LogOdds.of(settings.confirming());
        double ending = LogOdds.of(settings.ending());
        double recycling = LogOdds.of(settings.recyclingBelow());
        List<Component> kept = new ArrayList<>(components.size());
        List<Component> recycled = new ArrayList<>();
        List<Component> gone = new ArrayList<>();
        for (Component component : components) {
            component.confirmed = component.logOdds >= (component.confirmed ? ending : confirming);
            if (modes.tellStill()) {
                component.moving = modes.moving(component.bank);
                component.movingShown = component.moving >= (component.movingShown ? STOPPED : STARTED);
            }
            if (isGone(component)) {
                gone.add(component);
            } else if (component.logOdds < recycling) {
                recycled.add(component);
            } else {
                kept.add(component);
            }
        }
        counters.add(Counters.Name.COMPONENTS_RECYCLED, recycled.size());
        counters.add(Counters.Name.COMPONENTS_GONE, gone.size());
        if (kept.size() > settings.components()) {
            kept = surest(kept, recycled);
        }
        for (Component component : recycled) {
            unseen.recycle(component);
        }
        components = kept;
        return new ScanResult(recycled, gone);
    }

    /** Beyond what the region hears it can only guess; whoever comes back from there comes as inflow. */
    private boolean isGone(Component component) {
        return !core.isAtLeast(-apronMetres, component.density().east(), component.density().north());
    }

    /** As many as the bound allows, in their order; the others are recycled. */
    private List<Component> surest(List<Component> all, List<Component> recycled) {
        List<Component> byExistence = new ArrayList<>(all);
        byExistence.sort(Comparator.comparingDouble(component -> -component.logOdds));
        double least = byExistence.get(settings.components() - 1).logOdds;
        List<Component> kept = new ArrayList<>(settings.components());
        for (Component component : all) {
            if (component.logOdds >= least && kept.size() < settings.components()) {
                kept.add(component);
            } else {
                recycled.add(component);
                counters.add(Counters.Name.COMPONENTS_OVER_BOUND, 1);
            }
        }
        return kept;
    }

    /**
     * Distribution of the number of components' objects in the core, each weighted with its probability of being
     * there.
     */
    public NumberDistribution count() {
        double[] probabilities = new double[components.size()];
        for (int i = 0; i < probabilities.length; i++) {
            Component component = components.get(i);
            probabilities[i] = component.existence() * InsideShare.of(component.density(), core);
        }
        return PoissonBinomial.of(probabilities);
    }

    /** The same of moving objects alone; empty where the site does not tell them from still ones. */
    public Optional<NumberDistribution> countMoving() {
        if (!modes.tellStill()) {
            return Optional.empty();
        }
        double[] probabilities = new double[components.size()];
        for (int i = 0; i < probabilities.length; i++) {
            Component component = components.get(i);
            probabilities[i] = component.existence() * component.moving * InsideShare.of(component.density(), core);
        }
        return Optional.of(PoissonBinomial.of(probabilities));
    }

    /** Whether the site tells still objects from moving ones. */
    public boolean tellsStill() {
        return modes.tellStill();
    }

    /** Expected number of objects in the core that no component stands for. */
    public double expectedUnseen() {
        return unseen.expectedInCore();
    }

    /** Writes the whole state, exact to the bit. */
    public void write(DataOutput out) throws IOException {
        FilterState.write(out, components, unseen, clutterMap, counters);
    }

    /**
     * Reads what {@link #write} wrote.
     *
     * @throws IOException if the bytes are no such state, or one of another area
     */
    public static ObjectFilter read(DataInput in, FilterSettings settings, PlaneArea core, double apronMetres)
            throws IOException {
        ObjectFilter filter = new ObjectFilter(settings, core, apronMetres);
        FilterState.read(
                in, filter.modes.count(), filter.components, filter.unseen, filter.clutterMap, filter.counters);
        return filter;
    }
}
