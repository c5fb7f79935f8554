package org.sweeptally.site;

import java.util.Optional;
import java.util.OptionalDouble;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;
import org.sweeptally.model.ClutterLearning;
import org.sweeptally.model.DetectionProfile;
import org.sweeptally.model.MissRuns;
import org.sweeptally.model.SensorModel;

/**
 * One sensor, which measures positions or, if it has polar settings, range and azimuth.
 *
 * @param position             where it stands; empty for a sensor that moves and says in every part where it is
 * @param roams                where a moving sensor may be; empty: anywhere
 * @param reachMetres          beyond it the probability of detection is 0
 * @param noise                of a position that brings none of its own; of a sensor that measures range and azimuth,
 *                             the noise of its places at the end of its reach, where it is greatest
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
 * @param polar                what it is like if it measures range and azimuth
 * @param timeOffsetSeconds    what is to be added to its times to get the site's
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
        ClutterLearning clutterLearning,
        Optional<PolarSettings> polar,
        double timeOffsetSeconds) {

    /**
     * A sensor that measures positions, sees all within its reach, with independent misses, clutter as it is said to
     * be and a right clock.
     */
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
        this(
                name,
                position,
                roams,
                reachMetres,
                noise,
                detectionProbability,
                clutterPerScan,
                intervalSeconds,
                sweepSeconds,
                leastIntervalSeconds,
                disorderSeconds,
                silentSeconds,
                SightSettings.ALL,
                MissRuns.NONE,
                ClutterLearning.OFF,
                Optional.empty(),
                0);
    }

    /** The same sensor measuring range and azimuth. */
    public SensorSettings measuring(PolarSettings polarSettings) {
        PositionNoise atReach =
                new PositionNoise(polarSettings.rangeSigmaMetres(), polarSettings.acrossSigmaMetres(reachMetres));
        return with(atReach, Optional.of(polarSettings), timeOffsetSeconds);
    }

    /** The same sensor with a clock that is off. */
    public SensorSettings withTimeOffset(double seconds) {
        return with(noise, polar, seconds);
    }

    private SensorSettings with(PositionNoise otherNoise, Optional<PolarSettings> otherPolar, double offsetSeconds) {
        return new SensorSettings(
                name,
                position,
                roams,
                reachMetres,
                otherNoise,
                detectionProbability,
                clutterPerScan,
                intervalSeconds,
                sweepSeconds,
                leastIntervalSeconds,
                disorderSeconds,
                silentSeconds,
                sight,
                misses,
                clutterLearning,
                otherPolar,
                offsetSeconds);
    }

    /** Noise of a place at a distance from the sensor. */
    public PositionNoise noiseAt(double rangeMetres) {
        return polar.map(p -> new PositionNoise(p.rangeSigmaMetres(), p.acrossSigmaMetres(rangeMetres))).orElse(noise);
    }

    /**
     * How far an object is above the sensor, metres; 0 where nobody says how high the sensor is.
     *
     * @param sentMetresOrNull   height that a moving sensor sent of itself
     * @param objectMetresOrNull height that was measured of the object
     */
    public double heightDifference(Double sentMetresOrNull, Double objectMetresOrNull) {
        OptionalDouble own = position.isEmpty() && sentMetresOrNull != null
                ? OptionalDouble.of(sentMetresOrNull)
                : polar.map(PolarSettings::heightMetres).orElse(OptionalDouble.empty());
        if (own.isEmpty()) {
            return 0;
        }
        double usual = polar.map(PolarSettings::objectHeightMetres).orElse(0.0);
        return (objectMetresOrNull == null ? usual : objectMetresOrNull) - own.getAsDouble();
    }

    /** How long after the scan time that the sensor sends its scan takes effect: sweep and offset of its clock. */
    public long effectMicros() {
        return Math.round(sweepSeconds * 1e6) + timeOffsetMicros();
    }

    /** What is to be added to its times, microseconds. */
    public long timeOffsetMicros() {
        return Math.round(timeOffsetSeconds * 1e6);
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
