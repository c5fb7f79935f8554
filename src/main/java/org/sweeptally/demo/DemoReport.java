package org.sweeptally.demo;

import java.util.List;

/**
 * What came of a demo.
 *
 * @param seed                      of the world
 * @param worldSeconds              how much of the world's time the picture covers
 * @param regions                   by name
 * @param meanOspaMetres            over all scored scans of all regions
 * @param meanOspaAtFaceValueMetres the same of detections taken at face value
 * @param rejects                   records on the topic of rejects, those made before any region included
 * @param silences                  sensors passed over, in any region's log: 0 where the picture is all of the world's
 * @param digest                    SHA-256 of all output records, see {@link RecordDigest}
 */
public record DemoReport(
        long seed,
        double worldSeconds,
        List<RegionRow> regions,
        double meanOspaMetres,
        double meanOspaAtFaceValueMetres,
        long rejects,
        long silences,
        String digest) {

    public DemoReport {
        regions = List.copyOf(regions);
    }
}
