package org.sweeptally.region.text;

import com.fasterxml.jackson.core.JsonGenerator;
import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.charset.CharacterCodingException;
import java.nio.charset.StandardCharsets;
import java.util.Base64;
import java.util.HexFormat;
import java.util.List;
import org.apache.avro.Schema;
import org.apache.avro.generic.GenericFixed;
import org.apache.avro.generic.IndexedRecord;
import org.apache.avro.specific.SpecificRecordBase;
import org.sweeptally.region.intake.Times;

/**
 * Our records (tracks, births, ends, counts, rejects and any other) as lines of JSON for people and scripts. Fields
 * have the names and the order of the schema, and null where there is nothing, with these exceptions: {@code xMicros}
 * becomes {@code x} with the time as text; a digest is hexadecimal; bytes {@code x} become {@code xText} where they
 * are UTF-8, else {@code xBase64}.
 */
public final class RecordJson {

    private static final String TIME_UNIT = "Micros";

    private final JsonGenerator out;

    private RecordJson(JsonGenerator out) {
        this.out = out;
    }

    /**
     * A record as one line, without its end.
     *
     * @throws IllegalArgumentException if a number is not finite
     */
    public static String line(SpecificRecordBase record) {
        return JsonOut.line(out -> new RecordJson(out).record(record));
    }

    private void record(IndexedRecord record) throws IOException {
        out.writeStartObject();
        for (Schema.Field field : record.getSchema().getFields()) {
            field(record.getSchema().getName(), field, record.get(field.pos()));
        }
        out.writeEndObject();
    }

    private void field(String record, Schema.Field field, Object value) throws IOException {
        String name = field.name();
        if (name.endsWith(TIME_UNIT)) {
            out.writeFieldName(name.substring(0, name.length() - TIME_UNIT.length()));
            if (value == null) {
                out.writeNull();
            } else {
                out.writeString(Times.text((Long) value));
            }
        } else if (value instanceof ByteBuffer bytes) {
            bytes(name, bytes);
        } else {
            out.writeFieldName(name);
            value(record + "." + name, value);
        }
    }

    private void value(String name, Object value) throws IOException {
        if (value == null) {
            out.writeNull();
        } else if (value instanceof IndexedRecord record) {
            record(record);
        } else if (value instanceof List<?> list) {
            out.writeStartArray();
            for (Object item : list) {
                value(name, item);
            }
            out.writeEndArray();
        } else if (value instanceof Double number) {
            JsonOut.number(out, name, number);
        } else if (value instanceof Integer number) {
            out.writeNumber(number);
        } else if (value instanceof Long number) {
            out.writeNumber(number);
        } else if (value instanceof Boolean flag) {
            out.writeBoolean(flag);
        } else if (value instanceof GenericFixed fixed) {
            out.writeString(HexFormat.of().formatHex(fixed.bytes()));
        } else if (value instanceof CharSequence || value instanceof Enum<?>) {
            out.writeString(value.toString());
        } else {
            throw new IllegalArgumentException(name + " is of a type that no schema of ours has: " + value.getClass());
        }
    }

    private void bytes(String name, ByteBuffer buffer) throws IOException {
        try {
            String text = StandardCharsets.UTF_8.newDecoder().decode(buffer.duplicate()).toString();
            out.writeStringField(name + "Text", text);
        } catch (CharacterCodingException e) {
            ByteBuffer encoded = Base64.getEncoder().encode(buffer.duplicate());
            out.writeStringField(name + "Base64", StandardCharsets.US_ASCII.decode(encoded).toString());
        }
    }
}
