package org.sweeptally.cli;

import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import org.sweeptally.replay.Beside;
import org.sweeptally.replay.LogRun;
import org.sweeptally.replay.RecordedSource;
import org.sweeptally.replay.RegionReport;
import org.sweeptally.replay.Replay;
import org.sweeptally.replay.Span;

/** Tells a person who watches how far a replay is. */
record ReplayProgress(Terminal terminal, List<String> regions) implements LogRun.Progress {

    /** Replays regions one after the other. */
    static ReplaySummary replayAll(RecordedSource source, List<String> regions, Span span, Terminal terminal) {
        return replayAll(source, regions, span, Beside.NOTHING, terminal);
    }

    /** The same, with more beside it. */
    static ReplaySummary replayAll(
            RecordedSource source,
            List<String> regions,
            Span span,
            Beside beside,
            Terminal terminal) {
        Replay replay = new Replay(source, new ReplayProgress(terminal, regions));
        List<RegionReport> reports = new ArrayList<>();
        for (String region : regions) {
            reports.add(replay.region(region, span, beside));
        }
        terminal.endProgress();
        return new ReplaySummary(reports, span);
    }

    @Override
    public void at(String region, long entries, double share) {
        terminal.progress(String.format(Locale.ROOT, "region %s, %d of %d: %,d entries, %d %% of the log at most",
                region, regions.indexOf(region) + 1, regions.size(), entries, Math.round(100 * share)));
    }
}
