package org.sweeptally.region;

import java.util.Collection;
import java.util.NavigableMap;
import java.util.TreeMap;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Part;
import org.sweeptally.event.PartBody;
import org.sweeptally.site.SensorSettings;

/**
 * The parts of one scan, as they come. What follows from them depends on their numbers and never on the order in which
 * they came.
 */
final class ScanParts {

    private final String sensor;
    private final long scanTimeMicros;
    private final long logTimeMicros;
    private final long promiseMicros;
    private final NavigableMap<Integer, LogEntry> parts = new TreeMap<>();
    private long bytes;

    private ScanParts(String sensor, long scanTimeMicros, long logTimeMicros, long promiseMicros) {
        this.sensor = sensor;
        this.scanTimeMicros = scanTimeMicros;
        this.logTimeMicros = logTimeMicros;
        this.promiseMicros = promiseMicros;
    }

    /** A scan without parts yet, under the settings that its sensor has at the scan's time. */
    static ScanParts begin(long scanTimeMicros, SensorSettings settings) {
        long logTime = logTimeMicros(scanTimeMicros, settings);
        long next = Math.max(
                Micros.plus(logTime, 1), Micros.plus(logTime, Micros.ofSeconds(settings.leastIntervalSeconds())));
        long promise = Micros.plus(next, -Micros.ofSeconds(settings.disorderSeconds()));
        return new ScanParts(settings.name(), scanTimeMicros, logTime, promise);
    }

    /** When a scan takes effect: when its look is over, by the site's time. */
    static long logTimeMicros(long scanTimeMicros, SensorSettings settings) {
        return Micros.plus(scanTimeMicros, settings.effectMicros());
    }

    void add(LogEntry entry, long entryBytes) {
        parts.put(partOf(entry).getPart(), entry);
        bytes += entryBytes;
    }

    static Part partOf(LogEntry entry) {
        return bodyOf(entry).getPart();
    }

    static PartBody bodyOf(LogEntry entry) {
        return (PartBody) entry.getBody();
    }

    String sensor() {
        return sensor;
    }

    long scanTimeMicros() {
        return scanTimeMicros;
    }

    long logTimeMicros() {
        return logTimeMicros;
    }

    /** Once the scan is whole, its sensor sends nothing whose log time is earlier than this. */
    long promiseMicros() {
        return promiseMicros;
    }

    long bytes() {
        return bytes;
    }

    /** The entries that brought the parts, by number of the part. */
    Collection<LogEntry> entries() {
        return parts.values();
    }

    int size() {
        return parts.size();
    }

    boolean isUnusable() {
        return parts.values().stream().anyMatch(entry -> bodyOf(entry).getUnusable());
    }

    int detections() {
        return parts.values().stream()
                .mapToInt(entry -> partOf(entry).getDetections().size())
                .sum();
    }

    /** The sensor's own number of the scan: the first part that has one says it; null where none does. */
    Long number() {
        for (LogEntry entry : parts.values()) {
            if (partOf(entry).getScan() != null) {
                return partOf(entry).getScan();
            }
        }
        return null;
    }

    void write(StateWriter out) {
        out.text(sensor).time(scanTimeMicros).time(logTimeMicros).time(promiseMicros).number(parts.size());
        parts.values().forEach(entry -> out.record(entry));
    }

    static ScanParts read(StateReader in) {
        ScanParts scan = new ScanParts(in.text(), in.time(), in.time(), in.time());
        int size = in.number();
        for (int i = 0; i < size; i++) {
            LogEntry entry = in.record(LogEntry.class);
            scan.add(entry, EntryBytes.of(entry));
        }
        return scan;
    }
}
