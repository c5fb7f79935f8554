package org.sweeptally.region;

import java.util.List;
import org.sweeptally.event.Heartbeat;
import org.sweeptally.event.LogEntry;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/** A machine with its outputs; its invariants are checked after every entry. */
final class Rig {

    final TestSites.Reader reader;
    final Recorded out = new Recorded();
    RegionMachine machine;

    Rig() {
        this(new TestSites.Reader());
    }

    Rig(TestSites.Reader reader) {
        this.reader = reader;
        this.machine = new RegionMachine(TestSites.REGION, reader);
    }

    /** With one region and these sensors from the beginning. */
    static Rig with(SensorSettings... sensors) {
        return with(TestSites.site(1, sensors));
    }

    static Rig with(Site site) {
        Rig rig = new Rig();
        return rig.apply(rig.settings(site));
    }

    LogEntry settings(Site site) {
        return Entries.settings(reader.text(site), site);
    }

    LogEntry settings(Site site, double fromSeconds) {
        return Entries.settings(reader.text(site), site, fromSeconds);
    }

    Rig apply(LogEntry... entries) {
        return applyAll(List.of(entries));
    }

    Rig apply(Entries.PartMaker... parts) {
        for (Entries.PartMaker part : parts) {
            apply(part.entry());
        }
        return this;
    }

    Rig applyAll(List<LogEntry> entries) {
        for (LogEntry entry : entries) {
            machine.apply(entry, out);
            machine.check();
        }
        return this;
    }

    /** What the machine wanted written to its log comes back from there. */
    Rig applyAppended() {
        List<LogEntry> entries = List.copyOf(out.appended);
        out.appended.clear();
        return applyAll(entries);
    }

    /** The heartbeat by a tick that changes nothing else, unless its time does. */
    Heartbeat heartbeat(double wallSeconds) {
        apply(Entries.tick(wallSeconds));
        return out.heartbeats.get(out.heartbeats.size() - 1);
    }

    long counted(RegionCounters.Name name) {
        return machine.counters().get(name);
    }

    /** Seconds of the scans that have taken effect. */
    List<Double> effects() {
        return out.counts.stream()
                .map(count -> (count.getScanTimeMicros() - Entries.DAY) / 1e6)
                .toList();
    }
}
