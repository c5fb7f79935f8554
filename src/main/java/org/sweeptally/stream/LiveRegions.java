package org.sweeptally.stream;

import java.util.List;
import java.util.NavigableMap;
import java.util.TreeMap;
import java.util.function.Function;
import org.sweeptally.event.LogEntry;
import org.sweeptally.region.MachineOutputs;
import org.sweeptally.region.RegionMachine;
import org.sweeptally.site.Site;

/**
 * The machines of the regions of one partition of the region log. Live they are fed by the bus, on recovery by a {@link
 * LogReader}; there is no other way in.
 */
final class LiveRegions {

    private final NavigableMap<String, LiveRegion> regions = new TreeMap<>();
    private final int partition;
    private final Function<String, Site> settingsReader;
    private final SnapshotSchedule schedule;
    private final List<String> names;
    private long applied = -1;
    private long entries;

    /** @param names the regions of the partition, by name */
    LiveRegions(int partition, List<String> names, Function<String, Site> settingsReader, SnapshotSchedule schedule) {
        this.partition = partition;
        this.names = names;
        this.settingsReader = settingsReader;
        this.schedule = schedule;
        for (String name : names) {
            regions.put(name, new LiveRegion(new RegionMachine(name, settingsReader), first(name), schedule));
        }
    }

    private SnapshotSchedule first(String name) {
        return schedule.first(names.indexOf(name), names.size());
    }

    int partition() {
        return partition;
    }

    boolean has(String region) {
        return regions.containsKey(region);
    }

    LiveRegion region(String name) {
        return regions.get(name);
    }

    /** The names of the regions, in order. */
    List<String> names() {
        return names;
    }

    /** Puts a region back to where its snapshot was made. */
    void restore(Snapshot snapshot) {
        String name = snapshot.head().getRegion();
        RegionMachine machine = RegionMachine.restore(snapshot.state(), settingsReader);
        regions.put(name, new LiveRegion(machine, first(name), schedule,
                snapshot.head().getSnapshot() + 1, snapshot.head().getLogOffset()));
        entries += snapshot.head().getEntries();
        applied = Math.max(applied, snapshot.head().getLogOffset());
    }

    /** Applies the next entry of a region. */
    void apply(String region, long offset, LogEntry entry, MachineOutputs out) {
        regions.get(region).apply(entry, offset, out);
        entries++;
        // On recovery another region's snapshot may reach further than this entry.
        applied = Math.max(applied, offset);
    }

    /** Offset of the last entry applied, -1 before the first. */
    long applied() {
        return applied;
    }

    /** How far the partition has been applied, and from where it would have to be applied again. */
    Progress progress() {
        long tailStart = applied + 1;
        for (LiveRegion region : regions.values()) {
            if (region.isDirty()) {
                tailStart = Math.min(tailStart, region.dirtyOffset());
            }
        }
        return new Progress(applied, tailStart, entries);
    }
}
