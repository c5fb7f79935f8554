package org.sweeptally.replay;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import org.apache.avro.Schema;
import org.apache.avro.specific.SpecificRecordBase;
import org.sweeptally.event.Count;
import org.sweeptally.region.intake.Times;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.replay.RegionReport.Stretch;

/**
 * Compares what a replay makes with what was published of one region, record by record as they come, so that its memory
 * does not grow with the stretch (by rejects it does, 32 bytes each). It notes the first difference, and goes on
 * reading what was published: the counts tell what versions made the stretch, and an archive keeps what is read.
 */
final class Comparison implements RecordOutputs.Taker, AutoCloseable {

    private static final List<RecordKind> TIMED =
            List.of(RecordKind.TRACKS, RecordKind.BIRTHS, RecordKind.ENDS, RecordKind.COUNTS);

    private final String region;
    private final Span span;
    private final Map<RecordKind, RecordCursor> recorded = new EnumMap<>(RecordKind.class);
    private final Map<RecordKind, Long> reproduced = new EnumMap<>(RecordKind.class);
    private final Map<RecordKind, Long> made = new EnumMap<>(RecordKind.class);
    private final RejectMatch rejects = new RejectMatch();
    private final List<Stretch> stretches = new ArrayList<>();
    private long lastSequence = -1;
    private long lastMicros = Long.MIN_VALUE;
    private Difference difference;

    Comparison(RecordedSource source, String region, RecordedSource.Beginning beginning, Span span) {
        this.region = region;
        this.span = span;
        for (RecordKind kind : RecordKind.values()) {
            recorded.put(kind, source.records(kind, region, beginning, span.fromMicros()));
            reproduced.put(kind, 0L);
            made.put(kind, 0L);
        }
    }

    @Override
    public void take(RecordKind kind, SpecificRecordBase record) {
        if (kind == RecordKind.REJECTS) {
            rejects.replayed(record);
            made.merge(kind, 1L, Long::sum);
        } else if (span.holds(RecordKind.timeMicros(record))) {
            made.merge(kind, 1L, Long::sum);
            lastSequence = RecordKind.sequence(record);
            lastMicros = RecordKind.timeMicros(record);
            compare(kind, record);
        }
    }

    private void compare(RecordKind kind, SpecificRecordBase replayed) {
        RecordCursor.Recorded next = recorded.get(kind).next();
        if (next != null && kind == RecordKind.COUNTS) {
            note(next);
        }
        if (difference != null) {
            return;
        }
        if (next != null && Arrays.equals(next.value(), Wire.encode(replayed))) {
            reproduced.merge(kind, 1L, Long::sum);
        } else {
            difference = difference(kind, next, replayed);
        }
    }

    private void note(RecordCursor.Recorded recordedCount) {
        try {
            Count count = (Count) RecordKind.COUNTS.decode(recordedCount.value());
            Stretch last = stretches.isEmpty() ? null : stretches.get(stretches.size() - 1);
            boolean same = last != null && last.machineVersion() == count.getMachineVersion()
                    && last.settingsRevision() == count.getSettingsRevision();
            if (same) {
                stretches.set(stretches.size() - 1, new Stretch(last.machineVersion(), last.settingsRevision(),
                        last.scans() + 1, last.fromMicros(), count.getTimeMicros()));
            } else {
                stretches.add(new Stretch(count.getMachineVersion(), count.getSettingsRevision(), 1,
                        count.getTimeMicros(), count.getTimeMicros()));
            }
        } catch (IllegalArgumentException e) {
            // What is no count is a difference, and said as that.
        }
    }

    // What differs.

    private Difference difference(RecordKind kind, RecordCursor.Recorded next, SpecificRecordBase replayed) {
        String which = name(kind, replayed);
        if (next == null) {
            return new Difference(kind, which, "", "the replay makes " + which + ", and no such record was published");
        }
        SpecificRecordBase published;
        try {
            published = kind.decode(next.value());
        } catch (IllegalArgumentException e) {
            return new Difference(kind, which, "", "the replay makes " + which + ", and " + next.where() + " holds "
                    + "something else: " + e.getMessage());
        }
        if (!identity(kind, published).equals(identity(kind, replayed))) {
            return new Difference(kind, which, "", "the replay makes " + which + ", and " + next.where() + " holds "
                    + name(kind, published));
        }
        Optional<FieldDifference> field = FieldDifference.between(published, replayed);
        String where = which + " (" + next.where() + ")";
        return field.map(f -> new Difference(kind, which, f.field(), where + ": " + f.field() + " was published as "
                        + f.recorded() + ", and the replay makes it " + f.replayed()))
                .orElseGet(() -> new Difference(kind, which, "", where
                        + ": every field is the same, and the bytes are not: it was written anew"));
    }

    /** What a record is about: two with the same identity are versions of one. */
    private static String identity(RecordKind kind, SpecificRecordBase record) {
        return RecordKind.sequence(record) + " " + object(record);
    }

    private static String object(SpecificRecordBase record) {
        Schema.Field object = record.getSchema().getField("object");
        return object == null ? "" : String.valueOf(record.get(object.pos()));
    }

    private String name(RecordKind kind, SpecificRecordBase record) {
        String object = object(record);
        return "the " + kind.singular() + (object.isEmpty() ? "" : " of " + object) + " in region " + region
                + ", sequence " + RecordKind.sequence(record) + ", " + Times.text(RecordKind.timeMicros(record));
    }

    /**
     * Looks at what is left over when the replay is done.
     *
     * @param cameToEnd whether the replay came to the end of the span; else the log ended, and what was published
     *                  meanwhile is not looked at
     */
    void finish(boolean cameToEnd) {
        for (RecordKind kind : TIMED) {
            Difference left = null;
            for (RecordCursor.Recorded next = recorded.get(kind).next(); next != null && !isBeyond(kind, next);
                    next = recorded.get(kind).next()) {
                left = left == null ? leftOver(kind, next, cameToEnd) : left;
            }
            difference = difference == null ? left : difference;
        }
        Optional<Difference> rejected = rejects.compare(recorded.get(RecordKind.REJECTS));
        reproduced.put(RecordKind.REJECTS, rejected.isEmpty() ? (long) rejects.size() : 0L);
        difference = difference == null ? rejected.orElse(null) : difference;
    }

    private boolean isBeyond(RecordKind kind, RecordCursor.Recorded next) {
        try {
            return RecordKind.timeMicros(kind.decode(next.value())) >= span.toMicros();
        } catch (IllegalArgumentException e) {
            return false;
        }
    }

    private Difference leftOver(RecordKind kind, RecordCursor.Recorded next, boolean cameToEnd) {
        try {
            SpecificRecordBase record = kind.decode(next.value());
            boolean expected = span.holds(RecordKind.timeMicros(record))
                    && (cameToEnd || RecordKind.sequence(record) <= lastSequence);
            return expected
                    ? new Difference(kind, name(kind, record), "",
                            next.where() + " holds " + name(kind, record) + ", which the replay does not make")
                    : null;
        } catch (IllegalArgumentException e) {
            return cameToEnd
                    ? new Difference(kind, next.where(), "", next.where() + " holds what is no record: "
                            + e.getMessage())
                    : null;
        }
    }

    // Results.

    Map<RecordKind, Long> reproduced() {
        return reproduced;
    }

    Map<RecordKind, Long> made() {
        return made;
    }

    List<Stretch> stretches() {
        return stretches;
    }

    /** Log time of the last record compared, {@link Long#MIN_VALUE} where there was none. */
    long lastMicros() {
        return lastMicros;
    }

    Optional<Difference> difference() {
        return Optional.ofNullable(difference);
    }

    @Override
    public void close() {
        recorded.values().forEach(RecordCursor::close);
    }
}
