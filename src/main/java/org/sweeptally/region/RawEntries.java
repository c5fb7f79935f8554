package org.sweeptally.region;

import java.util.ArrayList;
import java.util.List;
import org.sweeptally.event.LogEntry;

/**
 * Entries that came before the first settings, without which they cannot be understood. Whoever runs a region writes
 * its settings first, so that only few can come before; a log without settings must not fill the memory.
 */
final class RawEntries {

    /** As much as may wait later, by the bound's default; there are no settings yet that could say another one. */
    static final long LARGEST_BYTES = 64L << 20;

    private final List<LogEntry> entries = new ArrayList<>();
    private long bytes;

    /** Lets an entry wait; where there is no room left for it, nothing changes, and this says no. */
    boolean add(LogEntry entry) {
        long more = EntryBytes.of(entry);
        if (bytes + more > LARGEST_BYTES) {
            return false;
        }
        entries.add(entry);
        bytes += more;
        return true;
    }

    List<LogEntry> takeAll() {
        List<LogEntry> all = List.copyOf(entries);
        entries.clear();
        bytes = 0;
        return all;
    }

    int size() {
        return entries.size();
    }

    long bytes() {
        return bytes;
    }

    void write(StateWriter out) {
        out.number(entries.size());
        entries.forEach(entry -> out.record(entry));
    }

    static RawEntries read(StateReader in) {
        RawEntries raw = new RawEntries();
        for (int left = in.number(); left > 0; left--) {
            raw.add(in.record(LogEntry.class));
        }
        return raw;
    }
}
