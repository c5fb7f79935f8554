package org.sweeptally.region.intake;

/**
 * Where a part came from, so that a long original can be found again.
 *
 * @param partition partition of the detections topic; 0 for a file
 * @param offset    offset there; for a file the number of the line, from 0
 */
public record SourcePosition(int partition, long offset) {}
