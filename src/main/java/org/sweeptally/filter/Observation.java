package org.sweeptally.filter;

import org.sweeptally.model.Measurement;

/**
 * One detection as the filter takes it.
 *
 * @param measurement in the region's plane
 * @param part        number of the part that brought it
 * @param index       its place in the part as sent
 * @param id          the sender's own name for it, or null
 * @param declared    what the object calls itself, or null
 */
public record Observation(Measurement measurement, int part, int index, String id, String declared) {}
