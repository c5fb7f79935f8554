package org.sweeptally.region;

import java.util.ArrayList;
import java.util.List;
import org.sweeptally.event.LogEntry;

/** Entries that came before the first settings, without which they cannot be understood. */
final class RawEntries {

    private final List<LogEntry> entries = new ArrayList<>();
    private long bytes;

    void add(LogEntry entry) {
        entries.add(entry);
        bytes += EntryBytes.of(entry);
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
