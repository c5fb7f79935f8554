package org.sweeptally.region.text;

import com.fasterxml.jackson.core.JsonFactory;
import com.fasterxml.jackson.core.JsonParser;
import com.fasterxml.jackson.core.JsonProcessingException;
import com.fasterxml.jackson.core.JsonToken;
import com.fasterxml.jackson.core.StreamReadConstraints;
import com.fasterxml.jackson.core.json.JsonReadFeature;
import java.io.IOException;
import java.util.Optional;
import org.sweeptally.event.Digest;
import org.sweeptally.event.Part;
import org.sweeptally.event.Reject;
import org.sweeptally.event.RejectReason;
import org.sweeptally.region.intake.FieldNames;
import org.sweeptally.region.intake.Intake;
import org.sweeptally.region.intake.Original;
import org.sweeptally.region.intake.PartCheck;
import org.sweeptally.region.intake.PartReading;
import org.sweeptally.region.intake.Rejects;
import org.sweeptally.region.intake.SourcePosition;
import org.sweeptally.region.wire.Digests;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/**
 * A part as one line of JSON (RFC 8259), such as
 * <pre>{"sensor":"north-shore","scanTime":"2031-05-01T04:00:42.5Z","scan":17,"part":0,"closesScan":true,
 * "detections":[{"id":"a1","time":"2031-05-01T04:00:42.7Z","latitude":53.91,"longitude":8.12}]}</pre>
 *
 * <p>Of a part, sensor and scanTime must be there. part is 0 where it is absent and closesScan false: a sensor must say
 * that a scan is complete. scan, promises ({@code {"nothingBefore": time}} or {@code {"nothingEver": true}}), coverage,
 * sensorPosition, sensorHeadingDegrees, sensorEastMetresPerSecond and sensorNorthMetresPerSecond may be absent. Of a
 * detection, the place must be there, in one way: latitude and longitude, or eastMetres and northMetres, or rangeMetres
 * and azimuthDegrees with rangeRateMetresPerSecond where it is measured. id, time, sigmaMetres (the same in all
 * directions) or noise ({@code first}, {@code cross}, {@code second}), heightMetres, strength and declaredIdentity may
 * be absent. A field with the value null counts as absent. Other fields, and fields given twice, are faults. Times are
 * read by {@link org.sweeptally.region.intake.Times}, which cuts off what is finer than a microsecond.
 *
 * <p>The digest of the whole part is the one that the same part has in binary. Where a line has faults that a part
 * cannot hold, or too many detections, it is the digest of the line.
 */
public final class PartJson {

    private static final int DEEPEST = 32;

    private static final JsonFactory FACTORY = JsonFactory.builder()
            .enable(JsonReadFeature.ALLOW_NON_NUMERIC_NUMBERS) // so that NaN is a bad value and not a broken line
            .disable(JsonFactory.Feature.INTERN_FIELD_NAMES) // names come from strangers
            .disable(JsonFactory.Feature.FAIL_ON_SYMBOL_HASH_OVERFLOW)
            .disable(JsonFactory.Feature.CHARSET_DETECTION) // always UTF-8
            .streamReadConstraints(StreamReadConstraints.builder()
                    .maxNestingDepth(DEEPEST)
                    .maxStringLength(PartLines.LONGEST_LINE_BYTES)
                    .build())
            .build();

    private final PartCheck check;

    public PartJson(Site site) {
        this.check = new PartCheck(site);
    }

    /** The line that {@link #read} reads as this part, without a line's end; see {@link PartWriter#line}. */
    public static String write(Part part) {
        return PartWriter.line(part);
    }

    /** Reads one line, given without its end, as UTF-8; no bytes make it fail. */
    public Intake read(byte[] line, Optional<SourcePosition> source) {
        Original original = Original.of(line, source);
        PartLine reading = new PartLine(check.mostDetections());
        Optional<String> broken = take(line, reading);
        return broken.isPresent()
                ? new Intake(Optional.empty(), Optional.of(
                        rejected(RejectReason.NOT_A_PART, broken.get(), reading, original)))
                : judged(line, reading, original);
    }

    /** A line of which only the first bytes were kept, because it is longer than a line may be. */
    Intake tooLong(Original original) {
        PartLine reading = new PartLine(check.mostDetections());
        take(original.kept(), reading);
        String sentence = "the line has " + original.lengthBytes() + " bytes: at most " + PartLines.LONGEST_LINE_BYTES
                + " are read; a scan may come in several parts";
        return new Intake(
                Optional.empty(), Optional.of(rejected(RejectReason.TOO_LARGE, sentence, reading, original)));
    }

    private Intake judged(byte[] line, PartLine reading, Original original) {
        Part part = reading.part();
        boolean whole = reading.faults().isEmpty() && reading.detectionsSent() <= check.mostDetections();
        Digest digest = whole ? Wire.digest(part) : Digests.sha256(line);
        return check.judge(
                new PartReading(part, reading.detectionsSent(), digest, reading.faults(), FieldNames.LINE), original);
    }

    /** Says whose it was, where the line told before it broke off. */
    private Reject rejected(RejectReason reason, String sentence, PartLine reading, Original original) {
        Part part = reading.part();
        return check.knows(part.getSensor())
                ? Rejects.unreadable(
                        reason, sentence, original, part.getSensor(), part.getScanTimeMicros(), part.getPart())
                : Rejects.unreadable(reason, sentence, original);
    }

    /** Takes the line in; returns what is wrong if it is not one JSON object. */
    private static Optional<String> take(byte[] line, PartLine reading) {
        try (JsonParser parser = FACTORY.createParser(line)) {
            JsonToken first = parser.nextToken();
            if (first != JsonToken.START_OBJECT) {
                return Optional.of("the line " + (first == null ? "is empty" : "is not a JSON object")
                        + ": a part is an object, in braces");
            }
            reading.take(parser);
            return parser.nextToken() == null
                    ? Optional.empty()
                    : Optional.of("at column " + parser.currentTokenLocation().getColumnNr()
                            + ": something follows the part: a line is one part");
        } catch (JsonProcessingException e) {
            String column = e.getLocation() == null ? "" : "at column " + e.getLocation().getColumnNr() + ": ";
            return Optional.of("the line is not JSON, " + column + e.getOriginalMessage());
        } catch (IOException e) {
            return Optional.of("the line is not text in UTF-8: " + e.getMessage());
        }
    }
}
