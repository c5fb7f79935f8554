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
        return region(region, span, Beside.NOTHING);
    }

    /** The same, with more beside it. */
    public RegionReport region(String region, Span span, Beside beside) {
        RecordedSource.Beginning beginning = source.before(region, span.fromMicros());
        LogRun run = new LogRun(source, region, beginning, progress);
        RegionMachine machine = run.machine();
        beside.explanations().ifPresent(written -> machine.observe(written.of(region, span)));
        try (Comparison comparison = new Comparison(source, region, beginning, span)) {
            Optional<WhatIf> whatIf = beside.change()
                    .map(change -> new WhatIf(region, span, change, run.machine(), beside.files()));
            boolean cameToEnd = run.run(
                    machine,
                    span,
                    (kind, record) -> {
                        comparison.take(kind, record);
                        whatIf.ifPresent(other -> other.recorded().take(kind, record));
                    },
                    logged -> whatIf.ifPresent(other -> other.apply(logged)));
            comparison.finish(cameToEnd);
            return new RegionReport(region, beginning.snapshot().map(Snapshot::head), run.entries(),
                    Map.copyOf(comparison.made()), Map.copyOf(comparison.reproduced()), comparison.stretches(),
                    comparison.lastMicros(), cameToEnd, comparison.difference(),
                    whatIf.map(WhatIf::report));
        }
    }
}
