package org.sweeptally.stream;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.sweeptally.site.RegionSettings;
import org.sweeptally.site.Site;

/** Says how the regions of two sites differ in name or place; aprons and cells may change while a region runs. */
final class RegionDifference {

    private RegionDifference() {}

    /** The differences, empty text where there are none. */
    static String between(Site running, Site other) {
        List<String> found = new ArrayList<>();
        for (RegionSettings region : running.regions()) {
            Optional<RegionSettings> same = other.region(region.name());
            if (same.isEmpty()) {
                found.add("region " + region.name() + " is missing");
            } else if (!same.get().core().equals(region.core())) {
                found.add("region " + region.name() + " has another polygon");
            }
        }
        for (RegionSettings region : other.regions()) {
            if (running.region(region.name()).isEmpty()) {
                found.add("region " + region.name() + " is new");
            }
        }
        return String.join(", ", found);
    }
}
