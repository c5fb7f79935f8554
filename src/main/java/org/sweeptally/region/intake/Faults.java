package org.sweeptally.region.intake;

import java.util.ArrayList;
import java.util.BitSet;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.function.Supplier;
import java.util.stream.Collectors;
import org.sweeptally.event.ReasonCount;
import org.sweeptally.event.RejectReason;

/**
 * What is wrong with one part, by reason and field. A flood of one reason costs one sentence, a count and the first
 * {@link #INDEXES_LISTED} indexes.
 */
public final class Faults {

    /** How many indexes are listed for one reason and field. */
    public static final int INDEXES_LISTED = 100;

    /** How many pairs of reason and field are told apart. */
    public static final int FIELDS_TOLD_APART = 50;

    private record Key(RejectReason reason, String field, boolean ofPart) {}

    private record Group(String sentence, List<Integer> indexes, BitSet struck) {}

    private final Map<Key, Group> groups = new LinkedHashMap<>();
    private final BitSet struck = new BitSet();
    private boolean partStruck;

    /** The part itself is at fault; of several faults of one field the first counts. */
    public void part(RejectReason reason, String fieldOrNull, Supplier<String> sentence) {
        partStruck = true;
        groups.computeIfAbsent(
                room(new Key(reason, fieldOrNull, true)), key -> new Group(sentence.get(), List.of(), new BitSet()));
    }

    /** One detection is at fault; the sentence is asked for only where it is the first of its kind. */
    public void detection(int index, RejectReason reason, String fieldOrNull, Supplier<String> sentence) {
        struck.set(index);
        Group group = groups.computeIfAbsent(
                room(new Key(reason, fieldOrNull, false)),
                key -> new Group("detection " + index + ": " + sentence.get(), new ArrayList<>(), new BitSet()));
        if (!group.struck().get(index)) {
            group.struck().set(index);
            if (group.indexes().size() < INDEXES_LISTED) {
                group.indexes().add(index);
            }
        }
    }

    /** Bad fields of the part itself. */
    public FaultSink badFieldsOfPart() {
        return (field, sentence) -> part(RejectReason.BAD_FIELD, field, sentence);
    }

    /** Bad fields of one detection. */
    public FaultSink badFieldsOf(int index) {
        return (field, sentence) -> detection(index, RejectReason.BAD_FIELD, field, sentence);
    }

    public boolean isEmpty() {
        return groups.isEmpty();
    }

    /** Whether the part itself is at fault. */
    public boolean strikePart() {
        return partStruck;
    }

    /** Whether a detection is at fault. */
    public boolean strike(int index) {
        return struck.get(index);
    }

    /** How many detections are at fault. */
    public int detectionsStruck() {
        return struck.cardinality();
    }

    /** One for each reason and field, in the order in which they were met. */
    public List<ReasonCount> reasons() {
        List<ReasonCount> reasons = new ArrayList<>();
        groups.forEach((key, group) -> reasons.add(ReasonCount.newBuilder()
                .setReason(key.reason())
                .setField(key.field())
                .setCount(group.struck().cardinality())
                .setIndexes(List.copyOf(group.indexes()))
                .setSentence(sentence(group))
                .build()));
        return reasons;
    }

    /** All sentences, one after the other. */
    public String sentences() {
        return groups.values().stream().map(Faults::sentence).collect(Collectors.joining("; "));
    }

    /** Senders can invent field names without end: beyond the bound a reason no longer tells its fields apart. */
    private Key room(Key key) {
        return groups.size() < FIELDS_TOLD_APART || groups.containsKey(key)
                ? key
                : new Key(key.reason(), null, key.ofPart());
    }

    private static String sentence(Group group) {
        int others = group.struck().cardinality() - 1;
        if (others < 1) {
            return group.sentence();
        }
        return group.sentence() + " (and " + others + (others == 1 ? " more detection" : " more detections")
                + " likewise)";
    }
}
