package org.sweeptally.site;

import java.util.Optional;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;
import org.sweeptally.model.ClutterLearning;
import org.sweeptally.model.DetectionProfile;
import org.sweeptally.model.MissRuns;
import org.sweeptally.model.SensorModel;

/**
 * One sensor that measures positions.
 *
 * @param position             where it stands; empty for a sensor that moves and says in every part where it is
 * @param roams                where a moving sensor may be; empty: anywhere
 * @param reachMetres          beyond it the probability of detection is 0
 * @param noise                of a measurement that brings none of its own
 * @param detectionProbability by distance
 * @param clutterPerScan       expected number of false detections in a scan of all that it can see
 * @param intervalSeconds      usual time between scans; only for forecasts and advice, the filter takes times as they
 *                             come
 * @param sweepSeconds         how long a look lasts; the scan takes effect that long after its scan time
 * @param leastIntervalSeconds no scan comes sooner than this after the one before
 * @param disorderSeconds      how far the sensor's parts may be out of their own order
 * @param silentSeconds        how long the sensor may say nothing before the picture goes on without it
 * @param sight                what it can see within its reach
 * @param misses               how its misses come
 * @param clutterLearning      whether and how clutter by area is learned
 */
public record SensorSettings(
        String name,
        Optional<LatLon> position,
        Optional<GeoPolygon> roams,
        double reachMetres,
        PositionNoise noise,
        DetectionProfile detectionProbability,
        double clutterPerScan,
        double intervalSeconds,
        double sweepSeconds,
        double leastIntervalSeconds,
        double disorderSeconds,
        double silentSeconds,
        SightSettings sight,
        MissRuns misses,
        ClutterLearning clutterLearning) {

    /** A sensor that sees all within its reach, with independent misses and clutter as it is said to be. */
    public SensorSettings(
            String name,
            Optional<LatLon> position,
            Optional<GeoPolygon> roams,
            double reachMetres,
            PositionNoise noise,
            DetectionProfile detectionProbability,
            double clutterPerScan,
            double intervalSeconds,
            double sweepSeconds,
            double leastIntervalSeconds,
            double disorderSeconds,
            double silentSeconds) {
        this(name, position, roams, reachMetres, noise, detectionProbability, clutterPerScan, intervalSeconds,
                sweepSeconds, leastIntervalSeconds, disorderSeconds, silentSeconds, SightSettings.ALL, MissRuns.NONE,
                ClutterLearning.OFF);
    }

    /** The sensor as the filter sees it. */
    public SensorModel model() {
        return new SensorModel(name, reachMetres, detectionProbability, clutterPerScan, misses, clutterLearning);
    }

    /**
     * Standard deviations of a measured position, metres, along the line of sight and across it; the
     * same number twice for a sensor whose error has no direction.
     */
    public record PositionNoise(double alongSigmaMetres, double acrossSigmaMetres) {}
}
