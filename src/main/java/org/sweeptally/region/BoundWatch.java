package org.sweeptally.region;

import java.util.List;
import org.sweeptally.filter.Counters;

/**
 * Tells when a bound of the filter has bitten: the first time, and then each time that it has bitten twice as often as
 * when it was last told, so that a bound that bites in every scan does not flood the findings.
 */
final class BoundWatch {

    /** A bound as the site file names it, and what counts it. */
    private record Bound(String name, Counters.Name counter) {}

    private static final List<Bound> BOUNDS = List.of(
            new Bound("components", Counters.Name.COMPONENTS_OVER_BOUND),
            new Bound("gatedPairs", Counters.Name.PAIRS_OVER_BOUND),
            new Bound("unseenTerms", Counters.Name.TERMS_OVER_BOUND),
            new Bound("propagationSweeps", Counters.Name.PROPAGATION_CAPPED));

    private final long[] told = new long[BOUNDS.size()];

    void look(Counters counters, long logTimeMicros, Findings findings, MachineOutputs out) {
        for (int i = 0; i < told.length; i++) {
            Bound bound = BOUNDS.get(i);
            long times = counters.get(bound.counter());
            if (times > 0 && times >= 2 * told[i]) {
                told[i] = times;
                out.finding(findings.boundReached(bound.name(), logTimeMicros, times));
            }
        }
    }

    void write(StateWriter out) {
        for (long times : told) {
            out.time(times);
        }
    }

    static BoundWatch read(StateReader in) {
        BoundWatch watch = new BoundWatch();
        for (int i = 0; i < watch.told.length; i++) {
            watch.told[i] = in.time();
        }
        return watch;
    }
}
