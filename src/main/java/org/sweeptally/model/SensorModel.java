package org.sweeptally.model;

/**
 * How a sensor detects, as the filter sees it.
 *
 * @param name           the sensor's name
 * @param reachMetres    beyond it the probability of detection is 0
 * @param detection      probability of detection by distance
 * @param clutterPerScan expected number of false detections in a scan of the whole reach, which is a disc
 * @param misses         how its misses come
 */
public record SensorModel(
        String name, double reachMetres, DetectionProfile detection, double clutterPerScan, MissRuns misses) {

    /** A sensor whose misses are independent of each other. */
    public SensorModel(String name, double reachMetres, DetectionProfile detection, double clutterPerScan) {
        this(name, reachMetres, detection, clutterPerScan, MissRuns.NONE);
    }

    /** Expected number of false detections per square metre and scan. */
    public double clutterPerSquareMetre() {
        return clutterPerScan / (StrictMath.PI * reachMetres * reachMetres);
    }
}
