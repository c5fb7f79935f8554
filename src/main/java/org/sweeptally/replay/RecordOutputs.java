package org.sweeptally.replay;

import org.apache.avro.specific.SpecificRecordBase;
import org.sweeptally.event.Birth;
import org.sweeptally.event.Count;
import org.sweeptally.event.End;
import org.sweeptally.event.Finding;
import org.sweeptally.event.Heartbeat;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Picture;
import org.sweeptally.event.Reject;
import org.sweeptally.event.Track;
import org.sweeptally.region.MachineOutputs;

/** Takes of a machine's outputs those that must reproduce. What it wants appended comes back from the log. */
final class RecordOutputs implements MachineOutputs {

    /** Takes a record. */
    interface Taker {
        void take(RecordKind kind, SpecificRecordBase record);
    }

    private final Taker taker;

    RecordOutputs(Taker taker) {
        this.taker = taker;
    }

    @Override
    public void track(Track track) {
        taker.take(RecordKind.TRACKS, track);
    }

    @Override
    public void birth(Birth birth) {
        taker.take(RecordKind.BIRTHS, birth);
    }

    @Override
    public void end(End end) {
        taker.take(RecordKind.ENDS, end);
    }

    @Override
    public void count(Count count) {
        taker.take(RecordKind.COUNTS, count);
    }

    @Override
    public void reject(Reject reject) {
        taker.take(RecordKind.REJECTS, reject);
    }

    @Override
    public void picture(String key, Picture picture) {}

    @Override
    public void heartbeat(Heartbeat heartbeat) {}

    @Override
    public void finding(Finding finding) {}

    @Override
    public void append(LogEntry entry) {}
}
