package org.sweeptally.cli;

import java.util.Collection;
import java.util.SortedMap;
import java.util.TreeMap;
import java.util.function.Consumer;
import org.sweeptally.event.Birth;
import org.sweeptally.event.Count;
import org.sweeptally.event.End;
import org.sweeptally.event.Finding;
import org.sweeptally.event.FindingKind;
import org.sweeptally.event.Heartbeat;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Picture;
import org.sweeptally.event.Reject;
import org.sweeptally.event.Track;
import org.sweeptally.region.MachineOutputs;

/** Writes the records of one region to the files, and tallies them for the summary. */
final class RegionTally implements MachineOutputs {

    private final String region;
    private final RecordFiles files;
    private final Consumer<Reject> onReject;
    private final SortedMap<String, FindingTally> findings = new TreeMap<>();
    private long births;
    private long ends;
    private long rejects;
    private Count first;
    private Count last;

    /** How often something was found of one sensor or bound, and the last sentence about it. */
    record FindingTally(FindingKind kind, long times, String sentence) {}

    RegionTally(String region, RecordFiles files, Consumer<Reject> onReject) {
        this.region = region;
        this.files = files;
        this.onReject = onReject;
    }

    String region() {
        return region;
    }

    long births() {
        return births;
    }

    long ends() {
        return ends;
    }

    long rejects() {
        return rejects;
    }

    /** The first count, null if there is none. */
    Count first() {
        return first;
    }

    /** The last count, null if there is none. */
    Count last() {
        return last;
    }

    /** By kind and by what they are about. */
    Collection<FindingTally> findings() {
        return findings.values();
    }

    @Override
    public void track(Track track) {
        files.track(track);
    }

    @Override
    public void birth(Birth birth) {
        births++;
        files.birth(birth);
    }

    @Override
    public void end(End end) {
        ends++;
        files.end(end);
    }

    @Override
    public void count(Count count) {
        first = first == null ? count : first;
        last = count;
        files.count(count);
    }

    @Override
    public void finding(Finding finding) {
        FindingTally one = new FindingTally(finding.getKind(), 1, finding.getSentence());
        findings.merge(finding.getKind() + " " + finding.getSubject(), one, (before, now) ->
                new FindingTally(now.kind, before.times + 1, now.sentence));
    }

    @Override
    public void reject(Reject reject) {
        rejects++;
        onReject.accept(reject);
    }

    @Override
    public void picture(String key, Picture picture) {
        // The files hold every track and count already.
    }

    @Override
    public void heartbeat(Heartbeat heartbeat) {
        // A recording has no wall clock to be alive by.
    }

    @Override
    public void append(LogEntry entry) {
        throw new IllegalStateException("entries for the log of region " + region + " belong into it");
    }
}
