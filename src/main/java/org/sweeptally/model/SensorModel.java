package org.sweeptally.model;

/**
 * How a sensor detects, as the filter sees it.
 *
 * @param name           the sensor's name
 * @param reachMetres    beyond it the probability of detection is 0
 * @param detection      probability of detection by distance
 * @param clutterPerScan expected number of false detections in a scan of all that the sensor can see
 * @param misses         how its misses come
 * @param learning       whether and how clutter by area is learned
 */
public record SensorModel(
        String name,
        double reachMetres,
        DetectionProfile detection,
        double clutterPerScan,
        MissRuns misses,
        ClutterLearning learning) {

    /** A sensor whose misses are independent of each other, and whose clutter is what it is said to be. */
    public SensorModel(String name, double reachMetres, DetectionProfile detection, double clutterPerScan) {
        this(name, reachMetres, detection, clutterPerScan, MissRuns.NONE, ClutterLearning.OFF);
    }
}
