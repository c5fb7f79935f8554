package org.sweeptally.site;

/**
 * Probabilities of existence at which the picture changes; 0.1 &lt;= ending &lt; confirming &lt; 1.
 *
 * @param confirming an object is published from here
 * @param ending     a published object that falls below is ended
 */
public record ThresholdSettings(double confirming, double ending) {}
