package org.sweeptally.region;

import org.sweeptally.event.LogEntry;
import org.sweeptally.region.wire.Wire;

/** How many bytes an entry has in Avro's binary encoding: the measure of what waits. */
final class EntryBytes {

    private EntryBytes() {}

    static long of(LogEntry entry) {
        return Wire.body(entry).length;
    }
}
