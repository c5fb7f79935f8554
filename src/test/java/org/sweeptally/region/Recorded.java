package org.sweeptally.region;

import java.io.ByteArrayOutputStream;
import java.nio.ByteBuffer;
import java.util.ArrayList;
import java.util.List;
import java.util.TreeMap;
import java.util.TreeSet;
import org.apache.avro.specific.SpecificRecordBase;
import org.sweeptally.event.Birth;
import org.sweeptally.event.Count;
import org.sweeptally.event.End;
import org.sweeptally.event.Finding;
import org.sweeptally.event.FindingKind;
import org.sweeptally.event.Heartbeat;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Picture;
import org.sweeptally.event.Reject;
import org.sweeptally.event.RejectReason;
import org.sweeptally.event.Track;
import org.sweeptally.region.wire.Wire;

/** Keeps all that a machine puts out. */
final class Recorded implements MachineOutputs {

    final List<Track> tracks = new ArrayList<>();
    final List<Birth> births = new ArrayList<>();
    final List<End> ends = new ArrayList<>();
    final List<Count> counts = new ArrayList<>();
    final List<Heartbeat> heartbeats = new ArrayList<>();
    final List<Finding> findings = new ArrayList<>();
    final List<Reject> rejects = new ArrayList<>();
    final List<LogEntry> appended = new ArrayList<>();
    final TreeMap<String, List<Picture>> pictures = new TreeMap<>();
    private final ByteArrayOutputStream published = new ByteArrayOutputStream();

    @Override
    public void track(Track track) {
        tracks.add(track);
        publish(track);
    }

    @Override
    public void birth(Birth birth) {
        births.add(birth);
        publish(birth);
    }

    @Override
    public void end(End end) {
        ends.add(end);
        publish(end);
    }

    @Override
    public void count(Count count) {
        counts.add(count);
        publish(count);
    }

    @Override
    public void picture(String key, Picture picture) {
        pictures.computeIfAbsent(key, k -> new ArrayList<>()).add(picture);
    }

    @Override
    public void heartbeat(Heartbeat heartbeat) {
        heartbeats.add(heartbeat);
    }

    @Override
    public void finding(Finding finding) {
        findings.add(finding);
    }

    @Override
    public void reject(Reject reject) {
        rejects.add(reject);
    }

    @Override
    public void append(LogEntry entry) {
        appended.add(entry);
    }

    private void publish(SpecificRecordBase record) {
        published.writeBytes(bytes(record));
    }

    /** Tracks, births, ends and counts in their order. */
    byte[] publishedBytes() {
        return published.toByteArray();
    }

    /** Rejects as a set. */
    TreeSet<String> rejectSet() {
        TreeSet<String> set = new TreeSet<>();
        rejects.forEach(reject -> set.add(reject.toString()));
        return set;
    }

    List<RejectReason> reasons() {
        return rejects.stream().map(reject -> reject.getReasons().get(0).getReason()).toList();
    }

    List<FindingKind> findingKinds() {
        return findings.stream().map(Finding::getKind).toList();
    }

    private static byte[] bytes(SpecificRecordBase record) {
        byte[] bytes = Wire.encode(record);
        return ByteBuffer.allocate(bytes.length + 4).putInt(bytes.length).put(bytes).array();
    }
}
