package org.sweeptally.region.intake;

import java.util.function.Supplier;

/** Where the bad fields of one part, or of one detection, go. */
@FunctionalInterface
public interface FaultSink {

    /** A field is at fault; the sentence is asked for only where it is needed. */
    void add(String field, Supplier<String> sentence);
}
