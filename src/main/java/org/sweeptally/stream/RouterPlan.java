package org.sweeptally.stream;

/**
 * What the router needs besides the parts.
 *
 * @param regions     all of them hear of progress
 * @param revisions   the settings, as far as they are known
 * @param watch       how far the detections have been read
 * @param appendTimes whether the records of the detections carry the time when the bus appended them
 */
record RouterPlan(RegionPartitions regions, Revisions revisions, ReadingWatch watch, boolean appendTimes) {}
