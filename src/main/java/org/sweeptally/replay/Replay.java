package org.sweeptally.replay;

import java.util.Map;
import java.util.Optional;
import org.sweeptally.region.RegionMachine;
import org.sweeptally.stream.Snapshot;

/** Replays regions one after the other, each from the newest snapshot before a span to the span's end. */
public final class Replay {

    private final RecordedSource source;
    private final LogRun.Progress progress;

    public Replay(RecordedSource source, LogRun.Progress progress) {
        this.source = source;
        this.progress = progress;
    }

    /**
     * Makes a region's records of a span anew, and compares them with what was published.
     *
     * @throws ReplayFailedException if the source does not hold what is needed
     */
    public RegionReport region(String region, Span span) {
        return region(region, span, Optional.empty());
    }

    /** The same, and explains meanwhile why objects exist. */
    public RegionReport region(String region, Span span, Optional<Explanations> explanations) {
        RecordedSource.Beginning beginning = source.before(region, span.fromMicros());
        LogRun run = new LogRun(source, region, beginning, progress);
        RegionMachine machine = run.machine();
        explanations.ifPresent(written -> machine.observe(written.of(region, span)));
        try (Comparison comparison = new Comparison(source, region, beginning, span)) {
            boolean cameToEnd = run.run(machine, span, comparison);
            comparison.finish(cameToEnd);
            return new RegionReport(region, beginning.snapshot().map(Snapshot::head), run.entries(),
                    Map.copyOf(comparison.made()), Map.copyOf(comparison.reproduced()), comparison.stretches(),
                    comparison.lastMicros(), cameToEnd, comparison.difference());
        }
    }
}
