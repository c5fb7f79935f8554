package org.sweeptally.bench;

import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.DataInputStream;
import java.io.DataOutputStream;
import java.io.IOException;
import java.util.List;
import org.sweeptally.filter.Counters;
import org.sweeptally.filter.FilterScene;
import org.sweeptally.filter.FilterSettings;
import org.sweeptally.filter.ObjectFilter;
import org.sweeptally.filter.Scan;
import org.sweeptally.geo.PlaneArea;
import org.sweeptally.model.Look;
import org.sweeptally.model.MotionProfile;
import org.sweeptally.world.ModelRun;
import org.sweeptally.world.SimulatedScan;
import org.sweeptally.world.SimulatedWorld;
import org.sweeptally.world.WorldSettings;

/**
 * A filter that has run for a while, and its next scan: as many objects as asked for and as much clutter, at a density
 * of 20 objects on 16 square kilometres.
 */
final class ScanScene {

    /** Scans before the measured one: the unseen part has settled, components are as many as objects. */
    private static final int SCANS_BEFORE = 8;

    private static final double MARGIN_METRES = 200;

    /** What a site's default is for the square with 1,000 objects; the same for all, so that all grows alike. */
    private static final double CELL_METRES = 590;

    private final FilterSettings settings;
    private final PlaneArea core;
    private final Scan before;
    private final Scan scan;
    private final double seconds;
    private final byte[] state;

    ScanScene(int objects, long seed) {
        this(objects, seed, SceneSight.DISC, SceneMotion.STRAIGHT);
    }

    ScanScene(int objects, long seed, SceneSight sight, SceneMotion motion) {
        WorldSettings world =
                WorldSettings.fourKilometres(MARGIN_METRES, 20).grownTo(objects).withScans(SCANS_BEFORE + 1);
        core = FilterScene.square(world.sideMetres() / 2);
        FilterSettings plain = ModelRun.settings(world, 0.5, 0.4);
        settings = with(plain, motion.of(plain.profiles().get(0)), CELL_METRES);
        seconds = world.periodSeconds();
        Look look = sight.of(ModelRun.look(world, core), world, core);
        List<SimulatedScan> scans = SimulatedWorld.scans(world, seed);
        ObjectFilter filter = new ObjectFilter(settings, core, MARGIN_METRES);
        for (int k = 0; k < SCANS_BEFORE - 1; k++) {
            filter.predict(k == 0 ? 0 : seconds);
            filter.update(ModelRun.scan(world, scans.get(k), look), scans.get(k).micros());
        }
        state = bytes(filter);
        before = ModelRun.scan(world, scans.get(SCANS_BEFORE - 1), look);
        scan = ModelRun.scan(world, scans.get(SCANS_BEFORE), look);
    }

    /** A filter that has just taken in the scan before the measured one, as in steady work. */
    ObjectFilter filter() {
        try {
            DataInputStream in = new DataInputStream(new ByteArrayInputStream(state));
            ObjectFilter filter = ObjectFilter.read(in, settings, core, MARGIN_METRES);
            filter.predict(seconds);
            filter.update(before, before.scanTimeMicros());
            return filter;
        } catch (IOException e) {
            throw new IllegalStateException("a filter that was just written cannot be read", e);
        }
    }

    Scan scan() {
        return scan;
    }

    /** Time between scans. */
    double seconds() {
        return seconds;
    }

    /** The measured work: predict, update, count; gives the expected number of objects. */
    double step(ObjectFilter filter) {
        filter.predict(seconds);
        filter.update(scan, scan.scanTimeMicros());
        return filter.count().mean() + filter.expectedUnseen();
    }

    /** Pairs of a component or a recycled term with a detection in its gate, in the measured scan. */
    int gatedPairs() {
        ObjectFilter filter = filter();
        long before = pairs(filter);
        step(filter);
        return (int) (pairs(filter) - before);
    }

    private static long pairs(ObjectFilter filter) {
        return filter.counters().get(Counters.Name.GATED_COMPONENT_PAIRS)
                + filter.counters().get(Counters.Name.GATED_TERM_PAIRS);
    }

    private static byte[] bytes(ObjectFilter filter) {
        ByteArrayOutputStream bytes = new ByteArrayOutputStream();
        try {
            filter.write(new DataOutputStream(bytes));
        } catch (IOException e) {
            throw new IllegalStateException("memory cannot be written to", e);
        }
        return bytes.toByteArray();
    }

    private static FilterSettings with(FilterSettings s, List<MotionProfile> profiles, double cellMetres) {
        return new FilterSettings(
                profiles, s.birthsPerSquareMetrePerSecond(),
                s.outsidePerSquareMetre(), s.initialPerSquareMetre(), s.confirming(), s.ending(), s.recyclingBelow(),
                s.gateSigmas(), cellMetres, s.components(), s.unseenTerms(), s.exactAssociationSteps(),
                s.propagationSweeps(), s.leastTermWeight(), s.gatedPairs());
    }
}
