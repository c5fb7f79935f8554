package org.sweeptally.region;

import java.io.ByteArrayInputStream;
import java.io.DataInputStream;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import org.apache.avro.specific.SpecificRecordBase;
import org.sweeptally.region.wire.Wire;

/** Reads what {@link StateWriter} wrote; bytes that it did not write are an {@link IllegalArgumentException}. */
final class StateReader {

    /** Reads a piece of state that knows how to read itself. */
    interface Piece<T> {
        T read(DataInputStream in) throws IOException;
    }

    private final DataInputStream in;

    StateReader(byte[] bytes) {
        in = new DataInputStream(new ByteArrayInputStream(bytes));
    }

    <T> T piece(Piece<T> piece) {
        try {
            return piece.read(in);
        } catch (IOException e) {
            throw new IllegalArgumentException("these bytes are no whole snapshot of a region: " + e, e);
        }
    }

    int number() {
        return piece(DataInputStream::readInt);
    }

    long time() {
        return piece(DataInputStream::readLong);
    }

    boolean flag() {
        return piece(DataInputStream::readBoolean);
    }

    Long maybe() {
        return flag() ? Long.valueOf(time()) : null;
    }

    String text() {
        return new String(bytes(), StandardCharsets.UTF_8);
    }

    byte[] bytes() {
        int length = number();
        return piece(i -> {
            if (length < 0 || length > i.available()) {
                throw new IOException("a length of " + length + " bytes where " + i.available() + " are left");
            }
            return i.readNBytes(length);
        });
    }

    <T extends SpecificRecordBase> T record(Class<T> type) {
        return Wire.decode(bytes(), type);
    }

    /** Says that all must have been read. */
    void end() {
        int left = piece(DataInputStream::available);
        if (left > 0) {
            throw new IllegalArgumentException("a snapshot of a region with " + left + " bytes too many");
        }
    }
}
