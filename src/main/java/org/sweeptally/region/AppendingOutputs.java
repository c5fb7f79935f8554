package org.sweeptally.region;

import java.util.function.Consumer;
import org.sweeptally.event.Birth;
import org.sweeptally.event.Count;
import org.sweeptally.event.End;
import org.sweeptally.event.Finding;
import org.sweeptally.event.Heartbeat;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Picture;
import org.sweeptally.event.Reject;
import org.sweeptally.event.Track;

/** Outputs of which the entries for the region's own log go somewhere else than the records. */
record AppendingOutputs(MachineOutputs records, Consumer<LogEntry> log) implements MachineOutputs {

    @Override
    public void track(Track track) {
        records.track(track);
    }

    @Override
    public void birth(Birth birth) {
        records.birth(birth);
    }

    @Override
    public void end(End end) {
        records.end(end);
    }

    @Override
    public void count(Count count) {
        records.count(count);
    }

    @Override
    public void picture(String key, Picture picture) {
        records.picture(key, picture);
    }

    @Override
    public void heartbeat(Heartbeat heartbeat) {
        records.heartbeat(heartbeat);
    }

    @Override
    public void finding(Finding finding) {
        records.finding(finding);
    }

    @Override
    public void reject(Reject reject) {
        records.reject(reject);
    }

    @Override
    public void append(LogEntry entry) {
        log.accept(entry);
    }
}
