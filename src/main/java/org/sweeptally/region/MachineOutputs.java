package org.sweeptally.region;

import org.sweeptally.event.Birth;
import org.sweeptally.event.Count;
import org.sweeptally.event.End;
import org.sweeptally.event.Finding;
import org.sweeptally.event.Heartbeat;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Picture;
import org.sweeptally.event.Reject;
import org.sweeptally.event.Track;

/**
 * Where a {@link RegionMachine} puts what follows from an entry. Births, tracks and ends of a scan come before its
 * count, and each kind in order of identity. Tracks, births, ends and counts in their order, and rejects as a set, are
 * the record that must reproduce; the rest is not part of it.
 */
public interface MachineOutputs {

    void track(Track track);

    void birth(Birth birth);

    void end(End end);

    void count(Count count);

    /** The last word under a key, region or region/object; null where the object is no longer published. */
    void picture(String key, Picture picture);

    void heartbeat(Heartbeat heartbeat);

    void finding(Finding finding);

    void reject(Reject reject);

    /** An entry that the machine wants written to its own region's log. It acts when it comes back from there. */
    void append(LogEntry entry);
}
