package org.sweeptally.region;

import java.nio.ByteBuffer;
import java.util.List;
import org.sweeptally.event.Detection;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Part;
import org.sweeptally.event.ReasonCount;
import org.sweeptally.event.Reject;
import org.sweeptally.event.RejectReason;
import org.sweeptally.region.wire.Digests;
import org.sweeptally.region.wire.Wire;

/** Makes the records of parts that could not be used. What they say of a part depends on nothing but what struck it. */
final class Rejects {

    private static final int WHOLE_UP_TO_BYTES = 256 * 1024;
    private static final int BEGINNING_BYTES = 4 * 1024;
    private static final int LISTED_INDEXES = 100;

    private Rejects() {}

    /**
     * A part of which nothing is used.
     *
     * @param sentence what is wrong with it, as it goes on after the part's name
     */
    static Reject whole(String region, LogEntry entry, RejectReason reason, String sentence) {
        return reject(region, entry, ScanParts.partOf(entry), true, reason, sentence, allIndexes(entry));
    }

    /** A part of which the detections with some indexes are not used. */
    static Reject some(
            String region, LogEntry entry, boolean whole, RejectReason reason, String sentence, List<Integer> indexes) {
        return reject(region, entry, ScanParts.partOf(entry), whole, reason, sentence, indexes);
    }

    private static List<Integer> allIndexes(LogEntry entry) {
        return ScanParts.partOf(entry).getDetections().stream().map(Detection::getIndex).toList();
    }

    private static Reject reject(
            String region,
            LogEntry entry,
            Part part,
            boolean whole,
            RejectReason reason,
            String words,
            List<Integer> indexes) {
        byte[] original = Wire.encode(part);
        boolean cut = original.length > WHOLE_UP_TO_BYTES;
        String sentence = "part " + part.getPart() + " of scan " + Micros.text(part.getScanTimeMicros()) + " of sensor "
                + part.getSensor() + " " + words;
        ReasonCount count = ReasonCount.newBuilder()
                .setReason(reason)
                .setCount(indexes.size())
                .setIndexes(indexes.stream().limit(LISTED_INDEXES).toList())
                .setSentence(sentence)
                .build();
        return Reject.newBuilder()
                .setRegion(region)
                .setSensor(part.getSensor())
                .setScanTimeMicros(part.getScanTimeMicros())
                .setPart(part.getPart())
                .setWhole(whole)
                .setReasons(List.of(count))
                .setSentence(sentence)
                .setLengthBytes(original.length)
                .setSha256(cut ? Digests.sha256(original) : null)
                .setSourcePartition(cut ? entry.getSourcePartition() : null)
                .setSourceOffset(cut ? entry.getSourceOffset() : null)
                .setOriginal(ByteBuffer.wrap(original, 0, cut ? BEGINNING_BYTES : original.length))
                .build();
    }
}
