package org.sweeptally.filter;

import java.util.List;
import org.sweeptally.model.Look;

/**
 * One closed scan.
 *
 * @param sensor         the sensor's name
 * @param scanTimeMicros names the scan, microseconds since 1970-01-01T00:00:00Z
 * @param look           where it could have seen what
 * @param observations   ordered by part and index; none is an empty look, which is evidence too
 */
public record Scan(String sensor, long scanTimeMicros, Look look, List<Observation> observations) {

    public Scan {
        observations = List.copyOf(observations);
    }
}
