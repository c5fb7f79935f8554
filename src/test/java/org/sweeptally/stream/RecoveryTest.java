package org.sweeptally.stream;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.nio.ByteBuffer;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.Random;
import java.util.TreeMap;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Part;
import org.sweeptally.event.SnapshotHead;
import org.sweeptally.event.SnapshotPiece;
import org.sweeptally.region.LocalSite;
import org.sweeptally.region.PartRouter;
import org.sweeptally.region.intake.PartDecoder;
import org.sweeptally.region.intake.SourcePosition;
import org.sweeptally.region.wire.Digests;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/** Recovery by itself: snapshots, progress and log in lists. */
class RecoveryTest {

    private final Site site = TestSite.twins();
    private final List<String> regions = site.regions().stream().map(region -> region.name()).sorted().toList();
    private final TreeMap<Long, Row> log = logOf(TestSite.recording(site));

    private record Row(String region, byte[] value) {}

    /** What would stand in the stores after an entry. */
    private record Stored(Map<String, Snapshot> snapshots, Progress progress) {}

    /** The recording's entries; offsets have gaps, as on the bus. */
    private TreeMap<Long, Row> logOf(List<Part> parts) {
        TreeMap<Long, Row> rows = new TreeMap<>();
        Random random = new Random(7);
        for (String region : regions) {
            put(rows, random, region, Revision.of(site).entry());
        }
        PartDecoder decoder = new PartDecoder(site);
        PartRouter router = new PartRouter(site);
        for (int i = 0; i < parts.size(); i++) {
            SourcePosition source = new SourcePosition(0, i);
            var body = decoder.decode(Wire.encode(parts.get(i)), Optional.of(source)).body().orElseThrow();
            router.route(OperatorEntries.part(0, i, null, body)).byRegion().forEach((region, part) ->
                    put(rows, random, region, OperatorEntries.part(0, source.offset(), null, part)));
            if (i % 7 == 0) {
                // A tick for one region only, so that the other has long stretches without an entry.
                put(rows, random, regions.get(0), OperatorEntries.tick(1_000_000L * i));
            }
        }
        return rows;
    }

    private static void put(TreeMap<Long, Row> rows, Random random, String region, LogEntry entry) {
        long offset = (rows.isEmpty() ? 3 : rows.lastKey()) + 1 + random.nextInt(3);
        rows.put(offset, new Row(region, Wire.encode(entry)));
    }

    private LiveRegions begin() {
        SnapshotSchedule schedule = new SnapshotSchedule(30, 20_000_000, Long.MAX_VALUE);
        return new LiveRegions(2, regions, LocalSite::readSettings, schedule);
    }

    /** Runs the log to an offset; what the stores hold then. */
    private Stored runTo(long lastOffset, LiveRegions live, Map<String, Snapshot> snapshots) {
        log.headMap(lastOffset, true).forEach((offset, row) -> {
            live.apply(row.region, offset, Wire.decode(row.value, LogEntry.class), Silence.OUTPUTS);
            if (live.region(row.region).isSnapshotDue()) {
                snapshots.put(row.region, live.region(row.region).snapshot(2, offset));
            }
        });
        return new Stored(snapshots, live.progress());
    }

    private LogReader reader(List<Long> read) {
        return (partition, from, to, sink) -> {
            log.subMap(from, true, Math.max(from, to + 1), false).forEach((offset, row) -> {
                read.add(offset);
                sink.entry(offset, RegionPartitions.key(row.region), row.value);
            });
            return read.size();
        };
    }

    private LiveRegions recover(Stored stored, List<Long> read) {
        return new Recovery(this::begin, reader(read))
                .recover(stored.snapshots.values(), Optional.of(stored.progress))
                .regions();
    }

    @Test
    void afterAnyEntryTheRecoveredRegionsAreThoseThatWere() {
        long seed = 20310501;
        Random random = new Random(seed);
        List<Long> offsets = new ArrayList<>(log.keySet());
        for (int trial = 0; trial < 40; trial++) {
            long offset = offsets.get(random.nextInt(offsets.size()));
            LiveRegions live = begin();
            Stored stored = runTo(offset, live, new TreeMap<>());
            LiveRegions recovered = recover(stored, new ArrayList<>());
            assertThat(recovered.progress()).as("seed %s offset %s", seed, offset).isEqualTo(live.progress());
            for (String region : regions) {
                assertThat(recovered.region(region).machine().snapshot())
                        .as("seed %s offset %s region %s", seed, offset, region)
                        .isEqualTo(live.region(region).machine().snapshot());
                assertThat(recovered.region(region).isSnapshotDue())
                        .isEqualTo(live.region(region).isSnapshotDue());
            }
        }
    }

    @Test
    void onlyTheTailIsReadAgainAndARegionIsNeverAppliedTwice() {
        LiveRegions live = begin();
        long last = List.copyOf(log.keySet()).get(log.size() * 9 / 10);
        Stored stored = runTo(last, live, new TreeMap<>());
        assertThat(stored.snapshots).hasSize(2);
        List<Long> read = new ArrayList<>();
        LiveRegions recovered = recover(stored, read);
        assertThat(read.size()).isBetween(1, log.size() / 2);
        assertThat(recovered.progress().entries()).isEqualTo(log.headMap(last, true).size());
    }

    @Test
    void aRegionThatRestsDoesNotHoldTheTail() {
        LiveRegions live = begin();
        long first = log.firstKey();
        Row row = log.firstEntry().getValue();
        live.apply(row.region, first, Wire.decode(row.value, LogEntry.class), Silence.OUTPUTS);
        assertThat(live.progress()).isEqualTo(new Progress(first, first, 1));
        live.region(row.region).snapshot(2, first);
        assertThat(live.progress()).isEqualTo(new Progress(first, first + 1, 1));
    }

    @Test
    void nothingIsReadAtTheVeryBeginning() {
        LogReader never = (partition, from, to, sink) -> {
            throw new AssertionError("nothing to read");
        };
        assertThat(new Recovery(this::begin, never).recover(List.of(), Optional.empty()).entriesAgain()).isZero();
    }

    @Test
    void aWrongCountStopsWithBothNumbers() {
        Stored stored = runTo(log.lastKey(), begin(), new TreeMap<>());
        Progress p = stored.progress;
        Stored wrong = new Stored(stored.snapshots, new Progress(p.applied(), p.tailStart(), p.entries() + 1));
        assertThatThrownBy(() -> recover(wrong, new ArrayList<>()))
                .isInstanceOf(OperatorStoppedException.class)
                .hasMessageContaining("partition 2")
                .hasMessageContaining(p.entries() + " entries were brought back")
                .hasMessageContaining((p.entries() + 1) + " had been applied");
    }

    @Test
    void aSnapshotBeyondTheProgressStops() {
        Stored stored = runTo(log.lastKey(), begin(), new TreeMap<>());
        Stored wrong = new Stored(stored.snapshots, new Progress(log.firstKey(), log.firstKey(), 1));
        assertThatThrownBy(() -> recover(wrong, new ArrayList<>()))
                .isInstanceOf(OperatorStoppedException.class)
                .hasMessageContaining("the log was applied to " + log.firstKey() + " only");
    }

    @Test
    void snapshotsWithoutProgressStop() {
        Stored stored = runTo(log.lastKey(), begin(), new TreeMap<>());
        assertThatThrownBy(() -> new Recovery(this::begin, reader(new ArrayList<>()))
                        .recover(stored.snapshots.values(), Optional.empty()))
                .isInstanceOf(OperatorStoppedException.class)
                .hasMessageContaining("nothing says how far");
    }

    @Test
    void aSnapshotOfWhichAPieceIsMissingOrChangedIsFound() {
        Snapshot snapshot = runTo(log.lastKey(), begin(), new TreeMap<>()).snapshots.values().iterator().next();
        assertThat(snapshot.state()).hasSize((int) snapshot.head().getLengthBytes());
        assertThatThrownBy(() -> new Snapshot(snapshot.head(), List.of()).state())
                .isInstanceOf(IllegalStateException.class);
        byte[] changed = snapshot.state();
        changed[changed.length / 2] ^= 1;
        SnapshotPiece piece = new SnapshotPiece(snapshot.head().getRegion(), 0L, 0, ByteBuffer.wrap(changed));
        assertThatThrownBy(() -> new Snapshot(snapshot.head(), List.of(piece)).state())
                .isInstanceOf(IllegalStateException.class)
                .hasMessageContaining("or others");
    }

    @Test
    void everyPieceStaysUnder512KiBAndTheyAddUp() {
        byte[] state = new byte[3 * Snapshot.PIECE_BYTES + 17];
        new Random(5).nextBytes(state);
        List<SnapshotPiece> pieces = Snapshot.pieces("a-region", 4, state);
        assertThat(pieces).hasSize(4).allSatisfy(piece -> assertThat(Wire.encode(piece).length).isLessThan(512 * 1024));
        SnapshotHead head = runTo(log.lastKey(), begin(), new TreeMap<>()).snapshots.values().iterator().next().head();
        head.setPieces(4);
        head.setLengthBytes(state.length);
        head.setSha256(Digests.sha256(state));
        assertThat(new Snapshot(head, pieces).state()).isEqualTo(state);
    }
}
