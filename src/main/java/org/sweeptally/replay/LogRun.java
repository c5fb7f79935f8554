package org.sweeptally.replay;

import java.util.function.Consumer;
import java.util.function.Function;
import org.sweeptally.event.LogEntry;
import org.sweeptally.region.LocalSite;
import org.sweeptally.region.MachineOutputs;
import org.sweeptally.region.NewerMachineVersionException;
import org.sweeptally.region.RegionMachine;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/** The machine of a region over its log again: from a beginning until the picture has passed a time. */
public final class LogRun {

    /** Entries between two signs of progress. */
    private static final int PROGRESS_ENTRIES = 500;

    private final RecordedSource source;
    private final String region;
    private final RecordedSource.Beginning beginning;
    private final Progress progress;
    private long entries;

    /** Hears how far a replay is; comes often. */
    public interface Progress {

        /** @param share of the log that may have to be read, from 0 to 1 */
        void at(String region, long entries, double share);
    }

    LogRun(RecordedSource source, String region, RecordedSource.Beginning beginning, Progress progress) {
        this.source = source;
        this.region = region;
        this.beginning = beginning;
        this.progress = progress;
    }

    /** The machine as the beginning has it. */
    RegionMachine machine() {
        Function<String, Site> reader = LocalSite::readSettings;
        if (beginning.snapshot().isEmpty()) {
            return new RegionMachine(region, reader);
        }
        try {
            return RegionMachine.restore(beginning.snapshot().get().state(), reader);
        } catch (IllegalArgumentException | IllegalStateException e) {
            throw new ReplayFailedException("snapshot " + beginning.snapshot().get().head().getSnapshot()
                    + " of region " + region + " cannot be used: " + e.getMessage(), e);
        }
    }

    /**
     * Applies entries until the machine has come to the end of the span.
     *
     * @param beside takes every entry's bytes too
     * @return whether it came there; else the log ended before
     */
    boolean run(RegionMachine machine, Span span, RecordOutputs.Taker taker, Consumer<byte[]> beside) {
        boolean[] passed = new boolean[1];
        MachineOutputs out = new RecordOutputs((kind, record) -> {
            passed[0] |= kind == RecordKind.COUNTS && RecordKind.timeMicros(record) >= span.toMicros();
            taker.take(kind, record);
        });
        try (LogCursor log = source.log(region, beginning)) {
            long first = beginning.offset();
            while (!passed[0]) {
                LogCursor.Logged next = log.next();
                if (next == null) {
                    break;
                }
                apply(machine, next, out);
                beside.accept(next.value());
                entries++;
                if (entries % PROGRESS_ENTRIES == 0) {
                    progress.at(region, entries, (next.offset() - first) / (double) Math.max(1, log.end() - first));
                }
            }
        }
        return passed[0];
    }

    private void apply(RegionMachine machine, LogCursor.Logged logged, MachineOutputs out) {
        try {
            machine.apply(Wire.decode(logged.value(), LogEntry.class), out);
        } catch (NewerMachineVersionException e) {
            throw new ReplayFailedException("offset " + logged.offset() + " of the log of region " + region + ": "
                    + e.getMessage() + "; what comes before can be replayed with a --to before it", e);
        } catch (IllegalArgumentException | IllegalStateException e) {
            throw new ReplayFailedException(
                    "offset " + logged.offset() + " of the log of region " + region + ": " + e.getMessage(), e);
        }
    }

    /** How many entries were applied. */
    long entries() {
        return entries;
    }
}
