package org.sweeptally.region.intake;

import java.util.Arrays;
import java.util.List;
import java.util.Optional;
import org.apache.avro.Schema;
import org.sweeptally.event.Detection;
import org.sweeptally.event.Digest;
import org.sweeptally.event.Part;
import org.sweeptally.event.Reject;
import org.sweeptally.event.RejectReason;
import org.sweeptally.region.wire.BodyWalk;
import org.sweeptally.region.wire.Digests;
import org.sweeptally.region.wire.Message;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/**
 * From the bytes of a message to a part that can be used, a reject, or both; no bytes make it fail. Memory is bounded
 * by the length of the message, whatever counts and lengths it claims, and a part with more detections than the
 * site allows is counted but not built.
 *
 * <p>The index of a detection is its place in the part as it was sent, whatever the sender put there. The whole part's
 * digest is over its canonical body with these indexes, so that two encodings of one part are the same part; for
 * a part with too many detections it is over the body as it came.
 */
public final class PartDecoder {

    /** The detections are a part's last field: what stands before them can be read without them. */
    private static final Schema.Field DETECTIONS = Part.getClassSchema().getField("detections");

    private final PartCheck check;

    public PartDecoder(Site site) {
        this.check = new PartCheck(site);
    }

    /** Decodes a message; null, as a bus delivers for a deleted key, counts as a message without bytes. */
    public Intake decode(byte[] bytesOrNull, Optional<SourcePosition> source) {
        byte[] bytes = bytesOrNull == null ? new byte[0] : bytesOrNull;
        Original original = Original.of(bytes, source);
        Message message = Wire.open(bytes);
        if (message instanceof Message.Foreign foreign) {
            RejectReason reason =
                    foreign.fingerprint().isPresent() ? RejectReason.UNKNOWN_SCHEMA : RejectReason.NOT_A_PART;
            return rejected(Rejects.unreadable(reason, foreign.sentence(), original));
        }
        Message.Ours ours = (Message.Ours) message;
        if (!ours.schema().getFullName().equals(Part.class.getName())) {
            return rejected(Rejects.unreadable(RejectReason.NOT_A_PART,
                    "it is a record of the type " + ours.schema().getName() + ": a Part is expected here", original));
        }
        BodyWalk.Found found = BodyWalk.over(ours.schema(), bytes, ours.bodyStart());
        return found.sound()
                ? check.judge(reading(ours, bytes, found), original)
                : rejected(broken(ours, bytes, found, original));
    }

    private PartReading reading(Message.Ours ours, byte[] bytes, BodyWalk.Found found) {
        int sent = found.items()[DETECTIONS.pos()];
        int bodyLength = bytes.length - ours.bodyStart();
        Part part;
        Digest digest;
        if (sent > check.mostDetections()) {
            part = withoutDetections(ours, bytes, found);
            digest = Digests.sha256(bytes, ours.bodyStart(), bodyLength);
        } else {
            part = Wire.decodeBody(ours.schema(), bytes, ours.bodyStart(), bodyLength, Part.class);
            List<Detection> detections = part.getDetections();
            for (int i = 0; i < detections.size(); i++) {
                detections.get(i).setIndex(i);
            }
            digest = Wire.digest(part);
        }
        return new PartReading(part, sent, digest, new Faults(), FieldNames.RECORD);
    }

    /** A part that breaks off among its detections still tells whose it was. */
    private Reject broken(
            Message.Ours ours, byte[] bytes, BodyWalk.Found found, Original original) {
        if (found.fieldsRead() >= DETECTIONS.pos()) {
            Part part = withoutDetections(ours, bytes, found);
            if (check.knows(part.getSensor())) {
                return Rejects.unreadable(RejectReason.NOT_A_PART, found.fault(), original,
                        part.getSensor(), part.getScanTimeMicros(), part.getPart());
            }
        }
        return Rejects.unreadable(RejectReason.NOT_A_PART, found.fault(), original);
    }

    private static Part withoutDetections(Message.Ours ours, byte[] bytes, BodyWalk.Found found) {
        byte[] head = Arrays.copyOfRange(bytes, ours.bodyStart(), found.fieldStart()[DETECTIONS.pos()] + 1);
        head[head.length - 1] = 0; // the end of an array without items
        return Wire.decodeBody(ours.schema(), head, 0, head.length, Part.class);
    }

    private static Intake rejected(Reject reject) {
        return new Intake(Optional.empty(), Optional.of(reject));
    }
}
