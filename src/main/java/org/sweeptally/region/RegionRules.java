package org.sweeptally.region;

import java.util.Collections;
import java.util.List;
import java.util.NavigableMap;
import java.util.TreeMap;
import java.util.function.Function;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.filter.FilterSettings;
import org.sweeptally.site.BoundSettings;
import org.sweeptally.site.RegionSettings;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/** One revision of the settings, as one region needs it. */
final class RegionRules {

    private final SettingsBody body;
    private final Site site;
    private final RegionArea area;
    private final NavigableMap<String, SensorSettings> sensors = new TreeMap<>();
    private final long longestSweepMicros;

    private RegionRules(SettingsBody body, Site site, RegionArea area) {
        this.body = body;
        this.site = site;
        this.area = area;
        long longest = 0;
        for (SensorSettings sensor : site.sensors()) {
            if (area.isTouchedBy(sensor)) {
                sensors.put(sensor.name(), sensor);
                longest = Math.max(longest, sensor.effectMicros());
            }
        }
        this.longestSweepMicros = longest;
    }

    /**
     * The rules of a region's first settings.
     *
     * @throws IllegalStateException if the settings do not know the region
     */
    static RegionRules first(SettingsBody body, String region, Function<String, Site> reader) {
        Site site = reader.apply(body.getText());
        return new RegionRules(body, site, new RegionArea(settingsOf(region, site, body)));
    }

    /**
     * The rules of later settings of the same region.
     *
     * @throws IllegalStateException if the settings do not know the region, or have it elsewhere
     */
    RegionRules next(SettingsBody later, Function<String, Site> reader) {
        Site laterSite = reader.apply(later.getText());
        RegionSettings there = settingsOf(area.name(), laterSite, later);
        if (!area.isWhere(there)) {
            throw new IllegalStateException("settings revision " + later.getRevision() + " change the polygon of region "
                    + area.name() + ", which runs with that of revision " + body.getRevision()
                    + ": a running region stays where it is; give the new one another name");
        }
        return new RegionRules(later, laterSite, area.with(there));
    }

    private static RegionSettings settingsOf(String region, Site site, SettingsBody body) {
        return site.region(region)
                .orElseThrow(() -> new IllegalStateException("settings revision " + body.getRevision()
                        + " do not know region " + region + ", and its log holds them; they know "
                        + site.regions().stream().map(RegionSettings::name).toList()));
    }

    SettingsBody body() {
        return body;
    }

    int revision() {
        return body.getRevision();
    }

    RegionArea area() {
        return area;
    }

    BoundSettings bounds() {
        return site.bounds();
    }

    /** The sensors that the region hears and waits for, by name. */
    NavigableMap<String, SensorSettings> sensors() {
        return Collections.unmodifiableNavigableMap(sensors);
    }

    /** The settings of a sensor that the region hears, or null. */
    SensorSettings sensor(String name) {
        return sensors.get(name);
    }

    /** How long after their scan time the scans that began under these rules may take effect. */
    long longestSweepMicros() {
        return longestSweepMicros;
    }

    FilterSettings filterSettings() {
        return site.filterSettings(area.settings());
    }
}
