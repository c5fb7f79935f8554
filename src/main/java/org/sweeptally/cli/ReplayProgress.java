package org.sweeptally.cli;

import java.util.List;
import java.util.Locale;
import org.sweeptally.replay.LogRun;

/** Tells a person who watches how far a replay is. */
record ReplayProgress(Terminal terminal, List<String> regions) implements LogRun.Progress {

    @Override
    public void at(String region, long entries, double share) {
        terminal.progress(String.format(Locale.ROOT, "region %s, %d of %d: %,d entries, %d %% of the log at most",
                region, regions.indexOf(region) + 1, regions.size(), entries, Math.round(100 * share)));
    }
}
