package org.sweeptally.site;

import java.util.List;
import java.util.Optional;
import java.util.OptionalLong;
import org.sweeptally.filter.FilterSettings;
import org.sweeptally.model.MotionProfile;

/**
 * Everything that a site file says, validated, with every default filled in.
 *
 * @param name       the site's name, the prefix of its topics
 * @param revision   grows with every change of content
 * @param fromMicros log time from which the settings hold, microseconds since 1970-01-01T00:00:00Z
 * @param sensors    by name
 * @param regions    by name
 * @param lifetimeSeconds mean lifetime of an object of a profile that gives none of its own
 * @param rejectOutside whether detections beyond reach or outside every region are rejected, not only counted
 */
public record Site(
        String name,
        int revision,
        OptionalLong fromMicros,
        List<SensorSettings> sensors,
        List<RegionSettings> regions,
        MotionSettings motion,
        double lifetimeSeconds,
        UnseenSettings unseen,
        ThresholdSettings thresholds,
        BoundSettings bounds,
        boolean rejectOutside) {

    public Site {
        sensors = List.copyOf(sensors);
        regions = List.copyOf(regions);
    }

    public Optional<SensorSettings> sensor(String sensorName) {
        return sensors.stream().filter(s -> s.name().equals(sensorName)).findFirst();
    }

    public Optional<RegionSettings> region(String regionName) {
        return regions.stream().filter(r -> r.name().equals(regionName)).findFirst();
    }

    /** The kinds of objects, by how they move; one at least. */
    public List<MotionProfile> profiles() {
        return motion.profiles();
    }

    /** What the recursion of a region needs, in metres and seconds. */
    public FilterSettings filterSettings(RegionSettings region) {
        double squareMetresPerSquareKilometre = 1e6;
        double secondsPerHour = 3600;
        return new FilterSettings(
                motion.profiles(),
                unseen.birthsPerSquareKilometrePerHour() / squareMetresPerSquareKilometre / secondsPerHour,
                unseen.outsidePerSquareKilometre() / squareMetresPerSquareKilometre,
                unseen.initialPerSquareKilometre() / squareMetresPerSquareKilometre,
                thresholds.confirming(),
                thresholds.ending(),
                FilterSettings.RECYCLING_BELOW,
                bounds.gateSigmas(),
                region.unseenCellMetres(),
                bounds.components(),
                bounds.unseenTerms(),
                bounds.exactAssociationSteps(),
                bounds.propagationSweeps(),
                bounds.leastTermWeight(),
                bounds.gatedPairs());
    }
}
