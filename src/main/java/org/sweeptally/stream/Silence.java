package org.sweeptally.stream;

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

/** Outputs that go nowhere: what is applied again has been published. */
enum Silence implements MachineOutputs {
    OUTPUTS;

    @Override
    public void track(Track track) {}

    @Override
    public void birth(Birth birth) {}

    @Override
    public void end(End end) {}

    @Override
    public void count(Count count) {}

    @Override
    public void picture(String key, Picture picture) {}

    @Override
    public void heartbeat(Heartbeat heartbeat) {}

    @Override
    public void finding(Finding finding) {}

    @Override
    public void reject(Reject reject) {}

    @Override
    public void append(LogEntry entry) {}
}
