package org.sweeptally.stream;

import java.util.Collection;
import java.util.Optional;
import java.util.function.Supplier;

/**
 * Brings the regions of a partition back to where their outputs were committed: the snapshots first, then the tail of
 * the region log, applied in silence. State is a function of the log, so this is all there is to it; a count of the
 * entries tells whether it went well.
 */
final class Recovery {

    private final Supplier<LiveRegions> fresh;
    private final LogReader reader;

    /** What was brought back, and what it took. */
    record Recovered(LiveRegions regions, long entriesAgain) {}

    /** @param fresh the regions of the partition at the beginning of their log */
    Recovery(Supplier<LiveRegions> fresh, LogReader reader) {
        this.fresh = fresh;
        this.reader = reader;
    }

    /**
     * Recovers a partition.
     *
     * @param progress how far it has been applied, empty at the very beginning
     * @throws OperatorStoppedException if snapshots, progress and log do not go together
     */
    Recovered recover(Collection<Snapshot> snapshots, Optional<Progress> progress) {
        LiveRegions live = fresh.get();
        if (progress.isEmpty()) {
            if (!snapshots.isEmpty()) {
                throw broken(live, "there are snapshots, and nothing says how far the log had been applied");
            }
            return new Recovered(live, 0);
        }
        for (Snapshot snapshot : snapshots) {
            restore(live, snapshot, progress.get());
        }
        long again = tail(live, progress.get());
        check(live, progress.get());
        return new Recovered(live, again);
    }

    private static void restore(LiveRegions live, Snapshot snapshot, Progress progress) {
        String region = snapshot.head().getRegion();
        if (!live.has(region)) {
            throw broken(live, "its store holds a snapshot of region " + region + ", and its regions are "
                    + live.names() + ": has the number of partitions been changed?");
        }
        if (snapshot.head().getLogOffset() > progress.applied()) {
            throw broken(live, "the snapshot of region " + region + " reaches to offset "
                    + snapshot.head().getLogOffset() + ", and the log was applied to " + progress.applied() + " only");
        }
        live.restore(snapshot);
    }

    /** Without a tail the reader still finds whether the log goes on where it was left. */
    private long tail(LiveRegions live, Progress progress) {
        long[] again = new long[1];
        reader.read(live.partition(), progress.tailStart(), progress.applied(), (offset, key, value) -> {
            LogRecord record = LogRecord.of(live, offset, key, value);
            if (offset > live.region(record.region()).snapshotOffset()) {
                live.apply(record.region(), offset, record.entry(), Silence.OUTPUTS);
                again[0]++;
            }
        });
        return again[0];
    }

    private static void check(LiveRegions live, Progress progress) {
        if (live.progress().entries() != progress.entries()) {
            throw broken(live, live.progress().entries() + " entries were brought back, and " + progress.entries()
                    + " had been applied");
        }
    }

    private static OperatorStoppedException broken(LiveRegions live, String sentence) {
        return new OperatorStoppedException(
                "partition " + live.partition() + " of the region log cannot be recovered: " + sentence);
    }
}
