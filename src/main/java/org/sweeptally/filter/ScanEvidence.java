package org.sweeptally.filter;

import java.util.List;

/**
 * What one scan said of every component.
 *
 * @param sensor         whose scan it was
 * @param scanTimeMicros names the scan, microseconds since 1970-01-01T00:00:00Z
 * @param logTimeMicros  when it took effect
 */
public record ScanEvidence(
        String sensor, long scanTimeMicros, long logTimeMicros, List<ObjectEvidence> objects) {

    public ScanEvidence {
        objects = List.copyOf(objects);
    }
}
