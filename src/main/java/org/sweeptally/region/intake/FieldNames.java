package org.sweeptally.region.intake;

/** How the sender of a part knows its fields: a sentence must name what the sender wrote. */
public enum FieldNames {

    /** As in the schema of a part. */
    RECORD,

    /** As in a line of text, where times are texts. */
    LINE;

    /** A field that holds a time; {@code name} without unit. */
    public String time(String name) {
        return this == RECORD ? name + "Micros" : name;
    }

    /** The promise that nothing earlier will come. */
    public String nothingBefore() {
        return this == RECORD ? "promise.nothingBeforeMicros" : "promises.nothingBefore";
    }
}
