package org.sweeptally.replay;

import java.util.function.Function;
import org.apache.avro.specific.SpecificRecordBase;
import org.sweeptally.event.Birth;
import org.sweeptally.event.Count;
import org.sweeptally.event.End;
import org.sweeptally.event.Reject;
import org.sweeptally.event.Track;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.stream.TopicNames;

/** The kinds of records that a replay must reproduce. All but rejects have a log time, and never go back in it. */
public enum RecordKind {
    TRACKS("tracks", "track", Track.class, TopicNames::tracks),
    BIRTHS("births", "birth", Birth.class, TopicNames::births),
    ENDS("ends", "end", End.class, TopicNames::ends),
    COUNTS("counts", "count", Count.class, TopicNames::counts),
    REJECTS("rejects", "reject", Reject.class, TopicNames::rejects);

    private final String plural;
    private final String singular;
    private final Class<? extends SpecificRecordBase> type;
    private final Function<TopicNames, String> topic;

    RecordKind(
            String plural,
            String singular,
            Class<? extends SpecificRecordBase> type,
            Function<TopicNames, String> topic) {
        this.plural = plural;
        this.singular = singular;
        this.type = type;
        this.topic = topic;
    }

    /** As people name many of them, and files. */
    public String plural() {
        return plural;
    }

    /** As people name one. */
    public String singular() {
        return singular;
    }

    /** The topic that holds them. */
    public String topic(TopicNames names) {
        return topic.apply(names);
    }

    /**
     * Decodes one.
     *
     * @throws IllegalArgumentException if the bytes are none
     */
    public SpecificRecordBase decode(byte[] value) {
        return Wire.decode(value, type);
    }

    /** Log time of a record of a kind that has one, microseconds since 1970-01-01T00:00:00Z. */
    public static long timeMicros(SpecificRecordBase record) {
        return (Long) record.get(record.getSchema().getField("timeMicros").pos());
    }

    /** The region's scan sequence in a record of a kind that has one. */
    public static long sequence(SpecificRecordBase record) {
        return (Long) record.get(record.getSchema().getField("sequence").pos());
    }
}
