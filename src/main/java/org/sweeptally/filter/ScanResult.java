package org.sweeptally.filter;

import java.util.List;

/**
 * What an update took off the list of components, each in its last state.
 *
 * @param recycled went into the unseen part, because existence fell or the bound on components bit
 * @param gone     left the area in which the region hears
 */
public record ScanResult(List<Component> recycled, List<Component> gone) {}
