package org.sweeptally.site;

/**
 * Objects that no sensor has detected yet.
 *
 * @param birthsPerSquareKilometrePerHour how many objects come into being inside the regions
 * @param outsidePerSquareKilometre       density of objects beyond the site's border, that come in by moving
 * @param initialPerSquareKilometre       density of objects when the log begins
 */
public record UnseenSettings(
        double birthsPerSquareKilometrePerHour, double outsidePerSquareKilometre, double initialPerSquareKilometre) {}
