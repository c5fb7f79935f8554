package org.sweeptally.replay;

import java.util.List;
import java.util.Optional;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.stream.Snapshot;

/** Where a site's log, its snapshots and its published records stand: a bus, or a folder taken from one. */
public interface RecordedSource extends AutoCloseable {

    /** The site's name. */
    String site();

    /** The regions that can be replayed, by name. */
    List<String> regions();

    /** The site's settings by revision, as far as they are kept. */
    List<SettingsBody> settings();

    /** Where a replay begins: after a snapshot, or at the beginning of the log. */
    record Beginning(Optional<Snapshot> snapshot) {

        /** Offset of the last entry that need not be applied, -1 where there is none. */
        public long offset() {
            return snapshot.map(s -> s.head().getLogOffset()).orElse(-1L);
        }
    }

    /**
     * The newest snapshot of a region whose picture is of before a time.
     *
     * @throws ReplayFailedException if there is none, and the log does not begin at its beginning
     */
    Beginning before(String region, long micros);

    /**
     * The entries of a region's log after a beginning.
     *
     * @throws ReplayFailedException if the log does not reach back there
     */
    LogCursor log(String region, Beginning beginning);

    /**
     * What was published of a region: what has a log time from a time on; of rejects, whatever may have been made after
     * the beginning, and perhaps some made before.
     */
    RecordCursor records(RecordKind kind, String region, Beginning beginning, long fromMicros);

    @Override
    void close();
}
