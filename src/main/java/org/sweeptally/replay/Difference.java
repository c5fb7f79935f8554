package org.sweeptally.replay;

/**
 * Where a replay and what was published part.
 *
 * @param kind     of the record
 * @param record   which record, for a person
 * @param field    path of the first field that differs; empty where the whole record does
 * @param sentence what differs, for a person
 */
public record Difference(RecordKind kind, String record, String field, String sentence) {}
