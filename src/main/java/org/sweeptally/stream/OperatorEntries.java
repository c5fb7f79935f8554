package org.sweeptally.stream;

import org.sweeptally.event.LogEntry;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.ProgressMarkBody;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.event.TickBody;

/** Entries of the region log that the operator makes. */
final class OperatorEntries {

    private static final String OPERATOR = "operator";

    private OperatorEntries() {}

    static LogEntry tick(long wallMicros) {
        return of(null, new TickBody(wallMicros));
    }

    static LogEntry progressMark(int partition, int partitions, long wallMicros) {
        return of(null, new ProgressMarkBody(partition, partitions, wallMicros));
    }

    /** @param fromMicros log time from which the settings hold, null for where they are met */
    static LogEntry settings(Long fromMicros, SettingsBody body) {
        return of(fromMicros, body);
    }

    /** @param appendMicros when the bus appended the part, null where it does not tell */
    static LogEntry part(int partition, long offset, Long appendMicros, PartBody body) {
        return new LogEntry(null, body.getPart().getSensor(), partition, offset, appendMicros, body);
    }

    private static LogEntry of(Long logTimeMicros, Object body) {
        return new LogEntry(logTimeMicros, OPERATOR, null, null, null, body);
    }
}
