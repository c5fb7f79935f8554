package org.sweeptally.stream;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.TreeMap;
import java.util.function.Consumer;
import org.sweeptally.event.Birth;
import org.sweeptally.event.Count;
import org.sweeptally.event.End;
import org.sweeptally.event.Finding;
import org.sweeptally.event.Heartbeat;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Part;
import org.sweeptally.event.Picture;
import org.sweeptally.event.Reject;
import org.sweeptally.event.Track;
import org.sweeptally.region.LocalSite;
import org.sweeptally.region.MachineOutputs;
import org.sweeptally.region.RegionMachine;
import org.sweeptally.region.intake.PartDecoder;
import org.sweeptally.region.intake.SourcePosition;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/**
 * What the machines of a site publish for the scans of a recording, scan by scan, and a snapshot of each as the
 * recording leaves it: for a floor that is to write the same records without making them.
 */
public final class RecordedScans {

    private final Map<String, List<Scan>> byRegion = new TreeMap<>();
    private final Map<String, Snapshot> snapshots = new TreeMap<>();

    /**
     * What one scan publishes in one region.
     *
     * @param before    in order, what comes before the count
     * @param count     which completes the scan
     * @param inPicture whether the picture repeats the count
     */
    record Scan(List<Consumer<MachineOutputs>> before, Count count, boolean inPicture) {}

    private RecordedScans() {}

    /** Nothing but a count a scan. */
    public static RecordedScans none() {
        return new RecordedScans();
    }

    /** The records of the first scans of a recording. */
    public static RecordedScans of(Site site, List<Part> recording) {
        RecordedScans recorded = new RecordedScans();
        LocalSite machines = new LocalSite(site, recorded::recorder);
        PartDecoder decoder = new PartDecoder(site);
        long offset = 0;
        for (Part part : recording) {
            SourcePosition source = new SourcePosition(0, offset++);
            decoder.decode(Wire.encode(part), Optional.of(source))
                    .body()
                    .ifPresent(body -> machines.part(body, source));
        }
        for (RegionMachine machine : machines.machines()) {
            recorded.snapshots.put(machine.region(), Snapshot.of(machine, 0, 0, offset));
        }
        return recorded;
    }

    private MachineOutputs recorder(String region) {
        List<Scan> scans = new ArrayList<>();
        byRegion.put(region, scans);
        return new Recorder(region, scans);
    }

    boolean isEmpty() {
        return byRegion.isEmpty();
    }

    /** The scan that stands for a region's n-th, from 0: the recording, then its second half again and again. */
    Scan scan(String region, long n) {
        List<Scan> scans = byRegion.get(region);
        int half = scans.size() / 2;
        return scans.get(n < scans.size() ? (int) n : half + (int) (n % (scans.size() - half)));
    }

    Snapshot snapshot(String region) {
        return snapshots.get(region);
    }

    /** Keeps what a machine says, scan by scan. */
    private static final class Recorder implements MachineOutputs {

        private final String region;
        private final List<Scan> scans;
        private List<Consumer<MachineOutputs>> before = new ArrayList<>();

        Recorder(String region, List<Scan> scans) {
            this.region = region;
            this.scans = scans;
        }

        @Override
        public void track(Track track) {
            before.add(out -> out.track(track));
        }

        @Override
        public void birth(Birth birth) {
            before.add(out -> out.birth(birth));
        }

        @Override
        public void end(End end) {
            before.add(out -> out.end(end));
        }

        @Override
        public void count(Count count) {
            scans.add(new Scan(before, count, false));
            before = new ArrayList<>();
        }

        @Override
        public void picture(String key, Picture picture) {
            if (key.equals(region)) {
                Scan last = scans.remove(scans.size() - 1);
                scans.add(new Scan(last.before(), last.count(), true));
            } else {
                before.add(out -> out.picture(key, picture));
            }
        }

        @Override
        public void heartbeat(Heartbeat heartbeat) {
            throw new IllegalStateException("without ticks there is no heartbeat");
        }

        @Override
        public void finding(Finding finding) {
            throw new IllegalStateException("a recording in which nothing is amiss: " + finding);
        }

        @Override
        public void reject(Reject reject) {
            throw new IllegalStateException("a recording in which nothing is rejected: " + reject);
        }

        @Override
        public void append(LogEntry entry) {
            throw new IllegalStateException("entries for the log belong into it");
        }
    }
}
