package org.sweeptally.region;

import java.io.ByteArrayOutputStream;
import java.io.DataOutputStream;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import org.apache.avro.specific.SpecificRecordBase;
import org.sweeptally.region.wire.Wire;

/** Writes a region's state to bytes: numbers as their bits, texts and records with their lengths first. */
final class StateWriter {

    /** Writes a piece of state that knows how to write itself. */
    interface Piece {
        void write(DataOutputStream out) throws IOException;
    }

    private final ByteArrayOutputStream bytes = new ByteArrayOutputStream();
    private final DataOutputStream out = new DataOutputStream(bytes);

    StateWriter piece(Piece piece) {
        try {
            piece.write(out);
            return this;
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    StateWriter number(int number) {
        return piece(o -> o.writeInt(number));
    }

    StateWriter time(long micros) {
        return piece(o -> o.writeLong(micros));
    }

    StateWriter flag(boolean flag) {
        return piece(o -> o.writeBoolean(flag));
    }

    /** A number that may be absent. */
    StateWriter maybe(Long number) {
        flag(number != null);
        return number == null ? this : time(number);
    }

    StateWriter text(String text) {
        return bytes(text.getBytes(StandardCharsets.UTF_8));
    }

    StateWriter bytes(byte[] content) {
        return number(content.length).piece(o -> o.write(content));
    }

    /** A record in Avro's single-object encoding, which names its schema. */
    StateWriter record(SpecificRecordBase content) {
        return bytes(Wire.encode(content));
    }

    byte[] toBytes() {
        return bytes.toByteArray();
    }
}
