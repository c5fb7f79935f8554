package org.sweeptally.region.intake;

import java.util.List;
import org.sweeptally.event.ReasonCount;
import org.sweeptally.event.Reject;
import org.sweeptally.event.RejectReason;

/** Writes the rejects of what never reaches a region. */
public final class Rejects {

    private Rejects() {}

    /** Something of which nothing could be read. */
    public static Reject unreadable(RejectReason reason, String sentence, Original original) {
        return unreadable(reason, sentence, original, null, PartReading.UNREAD_MICROS, PartReading.UNREAD_PART);
    }

    /** Something that broke off after these could be read; see {@link PartReading} for what stands for unread ones. */
    public static Reject unreadable(
            RejectReason reason,
            String sentence,
            Original original,
            String sensorOrNull,
            long scanTimeMicros,
            int part) {
        Reject.Builder reject = Reject.newBuilder();
        named(reject, sensorOrNull, scanTimeMicros, part);
        original.into(reject);
        return reject.setWhole(true)
                .setReasons(List.of(new ReasonCount(reason, null, 0, List.of(), sentence)))
                .setSentence("A message of " + original.lengthBytes() + " bytes: nothing was used: " + sentence)
                .build();
    }

    /** What was found in a part that could be read. */
    static Reject of(PartReading reading, boolean whole, Original original) {
        Reject.Builder reject = Reject.newBuilder();
        named(reject, reading.part().getSensor(), reading.part().getScanTimeMicros(), reading.part().getPart());
        original.into(reject);
        return reject.setWhole(whole)
                .setReasons(reading.faults().reasons())
                .setSentence(who(reject) + (whole
                        ? ": nothing was used: "
                        : ": " + reading.faults().detectionsStruck() + " of " + reading.detectionsSent()
                                + " detections were not used: ") + reading.faults().sentences())
                .build();
    }

    private static void named(Reject.Builder reject, String sensorOrNull, long scanTimeMicros, int part) {
        boolean readable = sensorOrNull != null
                && sensorOrNull.length() <= FieldCheck.LONGEST_TEXT_CHARACTERS
                && FieldCheck.wellFormed(sensorOrNull);
        reject.setSensor(readable ? sensorOrNull : null)
                .setScanTimeMicros(Times.plausible(scanTimeMicros) ? scanTimeMicros : null)
                .setPart(part >= 0 ? part : null);
    }

    private static String who(Reject.Builder reject) {
        return (reject.getPart() == null ? "A part" : "Part " + reject.getPart())
                + (reject.getScanTimeMicros() == null
                        ? ""
                        : " of the scan of " + Times.text(reject.getScanTimeMicros()))
                + (reject.getSensor() == null ? "" : " from sensor " + Shown.text(reject.getSensor()));
    }
}
