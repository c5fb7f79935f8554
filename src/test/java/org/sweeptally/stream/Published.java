package org.sweeptally.stream;

import java.util.ArrayList;
import java.util.List;
import java.util.TreeMap;
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
import org.sweeptally.region.text.RecordJson;

/** The record that must reproduce: tracks, births, ends and counts by region in their order, and rejects as a set. */
final class Published {

    private final TreeMap<String, List<String>> byKindAndRegion = new TreeMap<>();
    private final List<String> rejects = new ArrayList<>();

    void add(String kind, String region, SpecificRecordBase record) {
        byKindAndRegion.computeIfAbsent(kind + " of " + region, k -> new ArrayList<>()).add(RecordJson.line(record));
    }

    void reject(Reject reject) {
        rejects.add(RecordJson.line(reject));
        rejects.sort(null);
    }

    List<String> of(String kind, String region) {
        return byKindAndRegion.getOrDefault(kind + " of " + region, List.of());
    }

    TreeMap<String, List<String>> all() {
        return byKindAndRegion;
    }

    List<String> rejects() {
        return rejects;
    }

    /** How many counts there are, of all regions. */
    long counts() {
        return byKindAndRegion.entrySet().stream()
                .filter(entry -> entry.getKey().startsWith("counts"))
                .mapToLong(entry -> entry.getValue().size())
                .sum();
    }

    long records() {
        return byKindAndRegion.values().stream().mapToLong(List::size).sum();
    }

    /** Takes what a machine puts out. */
    MachineOutputs outputsOf(String region) {
        return new MachineOutputs() {
            @Override
            public void track(Track track) {
                add("tracks", region, track);
            }

            @Override
            public void birth(Birth birth) {
                add("births", region, birth);
            }

            @Override
            public void end(End end) {
                add("ends", region, end);
            }

            @Override
            public void count(Count count) {
                add("counts", region, count);
            }

            @Override
            public void picture(String key, Picture picture) {}

            @Override
            public void heartbeat(Heartbeat heartbeat) {}

            @Override
            public void finding(Finding finding) {}

            @Override
            public void reject(Reject reject) {
                Published.this.reject(reject);
            }

            @Override
            public void append(LogEntry entry) {}
        };
    }
}
