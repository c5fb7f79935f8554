package org.sweeptally.region;

import java.io.IOException;
import java.io.OutputStream;
import java.io.UncheckedIOException;
import org.apache.avro.io.BinaryEncoder;
import org.apache.avro.io.EncoderFactory;
import org.apache.avro.specific.SpecificDatumWriter;
import org.sweeptally.event.LogEntry;

/** How many bytes an entry has in Avro's binary encoding: the measure of what waits. */
final class EntryBytes {

    private EntryBytes() {}

    static long of(LogEntry entry) {
        Counting counting = new Counting();
        try {
            BinaryEncoder encoder = EncoderFactory.get().directBinaryEncoder(counting, null);
            new SpecificDatumWriter<LogEntry>(LogEntry.getClassSchema()).write(entry, encoder);
            encoder.flush();
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
        return counting.bytes;
    }

    private static final class Counting extends OutputStream {
        private long bytes;

        @Override
        public void write(int b) {
            bytes++;
        }

        @Override
        public void write(byte[] content, int from, int length) {
            bytes += length;
        }
    }
}
