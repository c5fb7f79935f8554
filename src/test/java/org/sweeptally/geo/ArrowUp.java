package org.sweeptally.geo;

import org.sweeptally.site.Site;

/** Knows something above it, which geo must not: that the rule which forbids it can fail is shown with this class. */
final class ArrowUp {

    private ArrowUp() {}

    static String name(Site site) {
        return site.name();
    }
}
