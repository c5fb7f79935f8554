package org.sweeptally.site;

import java.util.List;

/** What reading a site's settings gave. */
public sealed interface SiteResult {

    record Valid(Site site) implements SiteResult {}

    /** @param faults at least one, by file and line */
    record Faulty(List<Fault> faults) implements SiteResult {

        public Faulty {
            faults = List.copyOf(faults);
        }
    }
}
