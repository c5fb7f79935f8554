package org.sweeptally.region.wire;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.util.HexFormat;
import java.util.Optional;
import org.apache.avro.AvroRuntimeException;
import org.apache.avro.Schema;
import org.apache.avro.io.BinaryEncoder;
import org.apache.avro.io.DecoderFactory;
import org.apache.avro.io.EncoderFactory;
import org.apache.avro.specific.SpecificDatumReader;
import org.apache.avro.specific.SpecificDatumWriter;
import org.apache.avro.specific.SpecificRecordBase;
import org.sweeptally.event.Digest;

/**
 * Our records as bytes and back, in Avro's single-object encoding: C3 01, the schema's fingerprint in 8 bytes, lowest
 * first, then the body (Apache Avro 1.12 specification, "Single-object encoding"). Equal records give equal bytes.
 * Nothing is kept between calls, so every thread may call.
 */
public final class Wire {

    /** Bytes before the body: the mark and the fingerprint. */
    public static final int HEADER_BYTES = 10;

    private static final byte[] MARK = {(byte) 0xC3, 0x01};

    /** The header of each type's messages: the canonical form behind the fingerprint is costly to make. */
    private static final ClassValue<byte[]> HEADER = new ClassValue<>() {
        @Override
        protected byte[] computeValue(Class<?> type) {
            long fingerprint = KnownSchemas.fingerprint(OurClasses.DATA.getSchema(type));
            ByteBuffer header = ByteBuffer.allocate(HEADER_BYTES).order(ByteOrder.LITTLE_ENDIAN);
            return header.put(MARK).putLong(fingerprint).array();
        }
    };

    private Wire() {}

    /** A record as a message of its own. */
    public static byte[] encode(SpecificRecordBase record) {
        ByteArrayOutputStream out = new ByteArrayOutputStream(256);
        out.writeBytes(HEADER.get(record.getClass()));
        writeBody(record, out);
        return out.toByteArray();
    }

    /** The canonical body of a record, without header: every array is one block. */
    public static byte[] body(SpecificRecordBase record) {
        ByteArrayOutputStream out = new ByteArrayOutputStream(256);
        writeBody(record, out);
        return out.toByteArray();
    }

    /** SHA-256 over the canonical body of a record. */
    public static Digest digest(SpecificRecordBase record) {
        return Digests.sha256(body(record));
    }

    /** Looks at the header of a message that may come from anyone. */
    public static Message open(byte[] bytes) {
        if (bytes.length < MARK.length || bytes[0] != MARK[0] || bytes[1] != MARK[1]) {
            return new Message.Foreign(Optional.empty(), "it begins with " + beginning(bytes)
                    + ": a record in Avro's single-object encoding begins with C3 01");
        }
        if (bytes.length < HEADER_BYTES) {
            return new Message.Foreign(Optional.empty(),
                    "it has " + bytes.length + " bytes: the header alone has " + HEADER_BYTES);
        }
        long fingerprint = ByteBuffer.wrap(bytes).order(ByteOrder.LITTLE_ENDIAN).getLong(MARK.length);
        Optional<Schema> schema = KnownSchemas.ours().find(fingerprint);
        return schema.isPresent()
                ? new Message.Ours(schema.get(), HEADER_BYTES)
                : new Message.Foreign(Optional.of(fingerprint),
                        "its schema has the fingerprint " + hex(fingerprint) + ": no schema known here has it");
    }

    /**
     * Decodes a message that we wrote ourselves.
     *
     * @throws IllegalArgumentException if it is not a sound message of that type
     */
    public static <T extends SpecificRecordBase> T decode(byte[] bytes, Class<T> type) {
        Message message = open(bytes);
        if (message instanceof Message.Foreign foreign) {
            throw new IllegalArgumentException("not a message of ours: " + foreign.sentence());
        }
        Message.Ours ours = (Message.Ours) message;
        if (!ours.schema().getFullName().equals(type.getName())) {
            throw new IllegalArgumentException(
                    "the message is a " + ours.schema().getName() + ": a " + type.getSimpleName() + " is expected");
        }
        BodyWalk.Found found = BodyWalk.over(ours.schema(), bytes, ours.bodyStart());
        if (!found.sound()) {
            throw new IllegalArgumentException("the " + type.getSimpleName() + " is broken: " + found.fault());
        }
        return decodeBody(ours.schema(), bytes, ours.bodyStart(), bytes.length - ours.bodyStart(), type);
    }

    /** Decodes a body that {@link BodyWalk} found sound; another may cost any amount of memory. */
    public static <T extends SpecificRecordBase> T decodeBody(
            Schema writer, byte[] bytes, int from, int length, Class<T> type) {
        try {
            SpecificDatumReader<T> reader =
                    new SpecificDatumReader<>(writer, OurClasses.DATA.getSchema(type), OurClasses.DATA);
            return type.cast(reader.read(null, DecoderFactory.get().binaryDecoder(bytes, from, length, null)));
        } catch (IOException | AvroRuntimeException e) {
            throw new IllegalStateException("a body that was found sound does not decode: " + e.getMessage(), e);
        }
    }

    /** A fingerprint as 16 hexadecimal digits, highest first. */
    public static String hex(long fingerprint) {
        return HexFormat.of().toHexDigits(fingerprint);
    }

    private static void writeBody(SpecificRecordBase record, ByteArrayOutputStream out) {
        try {
            BinaryEncoder encoder = EncoderFactory.get().binaryEncoder(out, null);
            new SpecificDatumWriter<SpecificRecordBase>(record.getSchema(), OurClasses.DATA)
                    .write(record, encoder);
            encoder.flush();
        } catch (IOException e) {
            throw new UncheckedIOException("writing to memory cannot fail", e);
        }
    }

    private static String beginning(byte[] bytes) {
        if (bytes.length == 0) {
            return "nothing, it is empty";
        }
        return HexFormat.ofDelimiter(" ").withUpperCase().formatHex(bytes, 0, Math.min(4, bytes.length));
    }
}
