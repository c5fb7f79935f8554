package org.sweeptally.stream;

import org.sweeptally.event.LogEntry;
import org.sweeptally.event.TickBody;
import org.sweeptally.region.MachineOutputs;
import org.sweeptally.region.RegionMachine;

/** A region's machine, and what it has done since its last snapshot. */
final class LiveRegion {

    private static final long NONE = -1;

    private final RegionMachine machine;
    private final SnapshotSchedule first;
    private final SnapshotSchedule usual;
    private long nextSnapshot;
    private long snapshotOffset;
    private long dirtyOffset = NONE;
    private long scansBefore;
    private long firstTickMicros = NONE;
    private long lastTickMicros = NONE;
    private long workNanos;

    /** A region at the beginning of its log. */
    LiveRegion(RegionMachine machine, SnapshotSchedule first, SnapshotSchedule usual) {
        this(machine, first, usual, 0, NONE);
    }

    /** A region as its last snapshot left it. */
    LiveRegion(
            RegionMachine machine,
            SnapshotSchedule first,
            SnapshotSchedule usual,
            long nextSnapshot,
            long snapshotOffset) {
        this.machine = machine;
        this.first = first;
        this.usual = usual;
        this.nextSnapshot = nextSnapshot;
        this.snapshotOffset = snapshotOffset;
        this.scansBefore = machine.sequence();
    }

    RegionMachine machine() {
        return machine;
    }

    /** Offset of the last entry that the last snapshot contains, -1 before the first. */
    long snapshotOffset() {
        return snapshotOffset;
    }

    boolean isDirty() {
        return dirtyOffset != NONE;
    }

    /** Offset of the first entry since the last snapshot; there is one if the region is dirty. */
    long dirtyOffset() {
        return dirtyOffset;
    }

    void apply(LogEntry entry, long offset, MachineOutputs out) {
        long begin = System.nanoTime();
        machine.apply(entry, out);
        workNanos += System.nanoTime() - begin;
        if (dirtyOffset == NONE) {
            dirtyOffset = offset;
        }
        if (entry.getBody() instanceof TickBody tick) {
            firstTickMicros = firstTickMicros == NONE ? tick.getWallMicros() : firstTickMicros;
            lastTickMicros = tick.getWallMicros();
        }
    }

    boolean isSnapshotDue() {
        SnapshotSchedule schedule = nextSnapshot == 0 ? first : usual;
        return machine.sequence() - scansBefore >= schedule.scans()
                || lastTickMicros - firstTickMicros >= schedule.tickMicros()
                || workNanos >= schedule.workNanos();
    }

    /** Writes the state out, as it is after the entry at an offset. */
    Snapshot snapshot(int partition, long offset) {
        Snapshot snapshot = Snapshot.of(machine, nextSnapshot, partition, offset);
        nextSnapshot++;
        snapshotOffset = offset;
        dirtyOffset = NONE;
        scansBefore = machine.sequence();
        firstTickMicros = NONE;
        lastTickMicros = NONE;
        workNanos = 0;
        return snapshot;
    }
}
