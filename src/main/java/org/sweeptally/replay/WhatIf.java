package org.sweeptally.replay;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Map;
import java.util.NavigableMap;
import java.util.Optional;
import java.util.TreeMap;
import java.util.TreeSet;
import org.sweeptally.event.Count;
import org.sweeptally.event.DetectionRef;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.event.Track;
import org.sweeptally.event.UsedDetection;
import org.sweeptally.region.NewerMachineVersionException;
import org.sweeptally.region.RegionMachine;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.replay.ScanOutputs.Scan;

/**
 * A machine under other settings beside the one that makes the record again: both get the same log, entry by entry, and
 * what they put out is compared scan by scan. Memory grows with the number of objects, and with scans that only one of
 * the two puts out, not with the stretch.
 */
final class WhatIf {

    private final String region;
    private final Span span;
    private final SettingsChange change;
    private final RegionMachine changed;
    private final WhatIfFiles files;
    private final ScanOutputs recordedScans = new ScanOutputs(scan -> arrive(scan, true));
    private final ScanOutputs changedScans = new ScanOutputs(scan -> arrive(scan, false));
    private final RecordOutputs changedOut = new RecordOutputs(changedScans);

    /** Scans that one of the two has put out and the other not yet. */
    private final NavigableMap<String, Scan> recordedAhead = new TreeMap<>();

    private final NavigableMap<String, Scan> changedAhead = new TreeMap<>();
    private final NavigableMap<String, Life> recordedLives = new TreeMap<>();
    private final NavigableMap<String, Life> changedLives = new TreeMap<>();
    private final NavigableMap<String, NavigableMap<String, Integer>> shared = new TreeMap<>();

    private long scans;
    private long differing;
    private double existenceDifference;
    private double countDifference;
    private double countDifferences;

    /** When an object was shown, by log time and by the region's scan sequence. */
    private static final class Life {
        long firstMicros;
        long firstSequence;
        long lastMicros;
        long shown;
    }

    /** @param changed a machine at the same beginning as the one that makes the record */
    WhatIf(String region, Span span, SettingsChange change, RegionMachine changed, WhatIfFiles files) {
        this.region = region;
        this.span = span;
        this.change = change;
        this.changed = changed;
        this.files = files;
        changed.settings().ifPresent(body -> apply(settings(null, body)));
    }

    private LogEntry settings(Long fromMicros, SettingsBody body) {
        try {
            return new LogEntry(fromMicros, "operator", null, null, null, change.of(body));
        } catch (IllegalArgumentException e) {
            throw new ReplayFailedException(e.getMessage(), e);
        }
    }

    /** What takes the records of the machine that makes the record again. */
    RecordOutputs.Taker recorded() {
        return recordedScans;
    }

    /** Applies an entry of the log to the changed machine too. */
    void apply(byte[] logged) {
        LogEntry entry = Wire.decode(logged, LogEntry.class);
        apply(entry.getBody() instanceof SettingsBody body ? settings(entry.getLogTimeMicros(), body) : entry);
    }

    private void apply(LogEntry entry) {
        try {
            changed.apply(entry, changedOut);
        } catch (IllegalArgumentException | IllegalStateException | NewerMachineVersionException e) {
            throw new ReplayFailedException("under the changed settings region " + region + " cannot go on: "
                    + e.getMessage(), e);
        }
    }

    // Scan by scan.

    private void arrive(Scan scan, boolean isRecorded) {
        if (!span.holds(scan.count().getTimeMicros())) {
            return;
        }
        note(scan, isRecorded ? recordedLives : changedLives);
        Scan other = (isRecorded ? changedAhead : recordedAhead).remove(scan.name());
        if (other == null) {
            (isRecorded ? recordedAhead : changedAhead).put(scan.name(), scan);
        } else {
            compare(isRecorded ? scan : other, isRecorded ? other : scan);
        }
    }

    private static void note(Scan scan, NavigableMap<String, Life> lives) {
        for (Track track : scan.tracks()) {
            Life life = lives.computeIfAbsent(track.getObject(), name -> new Life());
            if (life.shown++ == 0) {
                life.firstMicros = track.getTimeMicros();
                life.firstSequence = track.getSequence();
            }
            life.lastMicros = track.getTimeMicros();
        }
    }

    private void compare(Scan recorded, Scan other) {
        scans++;
        double counts = Math.abs(recorded.count().getAll().getMean() - other.count().getAll().getMean());
        countDifference = Math.max(countDifference, counts);
        countDifferences += counts;
        differing += isSame(recorded, other) ? 0 : 1;
        NavigableMap<String, Track> before = byObject(recorded);
        NavigableMap<String, Track> after = byObject(other);
        before.forEach((object, track) -> {
            Track twin = after.get(object);
            if (twin != null) {
                existenceDifference =
                        Math.max(existenceDifference, Math.abs(track.getExistence() - twin.getExistence()));
            } else {
                share(track, after);
            }
        });
        files.scan(region, recorded.count(), other.count(), before, after);
    }

    /** Equal to the bit, but for the revision of the settings. */
    private static boolean isSame(Scan recorded, Scan other) {
        if (!recorded.tracks().equals(other.tracks()) || !recorded.changes().equals(other.changes())) {
            return false;
        }
        Count count = Wire.decode(Wire.encode(other.count()), Count.class);
        count.setSettingsRevision(recorded.count().getSettingsRevision());
        return recorded.count().equals(count);
    }

    private static NavigableMap<String, Track> byObject(Scan scan) {
        NavigableMap<String, Track> tracks = new TreeMap<>();
        scan.tracks().forEach(track -> tracks.put(track.getObject(), track));
        return tracks;
    }

    /** An object that began at another detection has another name: whoever uses the same detections is the same. */
    private void share(Track track, Map<String, Track> others) {
        Optional<DetectionRef> used = mostUsed(track);
        for (Track other : others.values()) {
            if (used.isPresent() && used.equals(mostUsed(other))) {
                shared.computeIfAbsent(track.getObject(), name -> new TreeMap<>())
                        .merge(other.getObject(), 1, Integer::sum);
            }
        }
    }

    private static Optional<DetectionRef> mostUsed(Track track) {
        return track.getUsed().stream()
                .max(Comparator.comparingDouble(UsedDetection::getProbability))
                .filter(used -> used.getProbability() > 0.5)
                .map(UsedDetection::getRef);
    }

    // The result.

    WhatIfReport report() {
        List<WhatIfReport.Row> rows = new ArrayList<>();
        TreeSet<String> left = new TreeSet<>(changedLives.keySet());
        List<String> unmatched = new ArrayList<>();
        for (String object : recordedLives.keySet()) {
            if (left.remove(object)) {
                rows.add(row(object, object));
            } else {
                unmatched.add(object);
            }
        }
        for (String object : unmatched) {
            Optional<String> twin = shared.getOrDefault(object, new TreeMap<>()).entrySet().stream()
                    .filter(entry -> left.contains(entry.getKey()))
                    .max(Map.Entry.comparingByValue())
                    .map(Map.Entry::getKey);
            twin.ifPresent(left::remove);
            rows.add(row(object, twin.orElse(null)));
        }
        left.forEach(object -> rows.add(row(null, object)));
        long alone = recordedAhead.size() + changedAhead.size();
        return new WhatIfReport(region, scans, alone, differing, existenceDifference, countDifference,
                scans == 0 ? 0 : countDifferences / scans, rows);
    }

    private WhatIfReport.Row row(String recorded, String other) {
        return new WhatIfReport.Row(
                shown(recorded, recordedLives.get(recorded == null ? "" : recorded)),
                shown(other, changedLives.get(other == null ? "" : other)));
    }

    private static Optional<WhatIfReport.Shown> shown(String object, Life life) {
        return life == null
                ? Optional.empty()
                : Optional.of(new WhatIfReport.Shown(
                        object, life.firstMicros, life.firstSequence, life.lastMicros, life.shown));
    }
}
