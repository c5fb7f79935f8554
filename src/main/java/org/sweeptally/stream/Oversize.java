package org.sweeptally.stream;

import java.nio.ByteBuffer;
import java.util.List;
import org.sweeptally.event.Part;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.ReasonCount;
import org.sweeptally.event.Reject;
import org.sweeptally.event.RejectReason;
import org.sweeptally.region.intake.Original;
import org.sweeptally.region.intake.SourcePosition;

/** Parts that a sender's bus carried compressed, and that the region log cannot hold as they are. */
final class Oversize {

    /** What the bus puts around a record: lengths, times, the key. */
    static final int RECORD_OVERHEAD_BYTES = 1024;

    private Oversize() {}

    /** The part without its detections, marked unusable: its scan closes, and counts no miss. */
    static PartBody emptied(PartBody body) {
        Part sent = body.getPart();
        Part part = new Part(sent.getSensor(), sent.getScanTimeMicros(), sent.getScan(), sent.getPart(),
                sent.getClosesScan(), sent.getPromise(), sent.getCoverage(), sent.getSensorPosition(),
                sent.getSensorHeadingDegrees(), sent.getSensorEastMetresPerSecond(),
                sent.getSensorNorthMetresPerSecond(), List.of());
        return new PartBody(part, body.getDetectionsSent(), true, body.getWholeDigest());
    }

    static Reject reject(String region, PartBody body, int entryBytes, Original original) {
        Part part = body.getPart();
        String sentence = "its entry in the log of region " + region + " has " + entryBytes + " bytes, at most "
                + TopicPlan.LARGEST_ENTRY_BYTES + " are allowed: send its scan in several parts";
        Reject.Builder reject = Reject.newBuilder()
                .setRegion(region)
                .setSensor(part.getSensor())
                .setScanTimeMicros(part.getScanTimeMicros())
                .setPart(part.getPart())
                .setWhole(true)
                .setReasons(List.of(new ReasonCount(
                        RejectReason.TOO_LARGE, null, part.getDetections().size(), List.of(), sentence)))
                .setSentence("Part " + part.getPart() + " of a scan of sensor " + part.getSensor() + ": " + sentence);
        return with(reject, original);
    }

    private static Reject with(Reject.Builder reject, Original original) {
        reject.setOriginal(ByteBuffer.wrap(original.kept()))
                .setLengthBytes(original.lengthBytes())
                .setSha256(original.sha256().orElse(null));
        SourcePosition source = original.source().orElseThrow();
        return reject.setSourcePartition(source.partition()).setSourceOffset(source.offset()).build();
    }
}
