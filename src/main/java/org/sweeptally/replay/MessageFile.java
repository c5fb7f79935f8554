package org.sweeptally.replay;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import org.apache.avro.AvroRuntimeException;
import org.apache.avro.Schema;
import org.apache.avro.file.CodecFactory;
import org.apache.avro.file.DataFileReader;
import org.apache.avro.file.DataFileWriter;
import org.apache.avro.generic.GenericData;
import org.apache.avro.generic.GenericDatumReader;
import org.apache.avro.generic.GenericDatumWriter;
import org.apache.avro.generic.GenericRecord;
import org.sweeptally.event.ArchivedMessage;
import org.sweeptally.region.wire.Digests;

/** A container file of messages (Apache Avro 1.12 specification, "Object Container Files"). */
final class MessageFile {

    private static final Schema SCHEMA = ArchivedMessage.getClassSchema();
    private static final int SYNC_BYTES = 16;

    private MessageFile() {}

    /** A message: its offset, where it stood, its bytes. */
    record Message(long offset, String where, byte[] value) {}

    /** Writes messages one after the other; equal messages under an equal name give equal bytes. */
    static final class Writer implements AutoCloseable {

        private final Path file;
        private final DataFileWriter<GenericRecord> out = new DataFileWriter<>(new GenericDatumWriter<>(SCHEMA));

        /** @param name of the file in its archive: the marks between blocks are made from it, not from chance */
        Writer(Path file, String name) {
            this.file = file;
            byte[] sync = Arrays.copyOf(
                    Digests.sha256(name.getBytes(StandardCharsets.UTF_8)).bytes(), SYNC_BYTES);
            try {
                Files.createDirectories(file.getParent());
                out.setCodec(CodecFactory.deflateCodec(CodecFactory.DEFAULT_DEFLATE_LEVEL));
                out.create(SCHEMA, Files.newOutputStream(file), sync);
            } catch (IOException e) {
                throw cannot("written", file, e);
            }
        }

        void write(Message message) {
            GenericRecord record = new GenericData.Record(SCHEMA);
            record.put("offset", message.offset());
            record.put("where", message.where());
            record.put("value", ByteBuffer.wrap(message.value()));
            try {
                out.append(record);
            } catch (IOException e) {
                throw cannot("written", file, e);
            }
        }

        @Override
        public void close() {
            try {
                out.close();
            } catch (IOException e) {
                throw cannot("written", file, e);
            }
        }
    }

    /** Reads them again. */
    static final class Reader implements AutoCloseable {

        private final Path file;
        private final DataFileReader<GenericRecord> in;

        Reader(Path file) {
            this.file = file;
            try {
                in = new DataFileReader<>(file.toFile(), new GenericDatumReader<>(SCHEMA));
            } catch (IOException e) {
                throw cannot("read", file, e);
            }
        }

        /** The next message, null after the last. */
        Message next() {
            try {
                if (!in.hasNext()) {
                    return null;
                }
                GenericRecord record = in.next();
                ByteBuffer value = (ByteBuffer) record.get("value");
                byte[] bytes = new byte[value.remaining()];
                value.get(bytes);
                return new Message((Long) record.get("offset"), record.get("where").toString(), bytes);
            } catch (AvroRuntimeException e) {
                throw cannot("read", file, e);
            }
        }

        @Override
        public void close() {
            try {
                in.close();
            } catch (IOException e) {
                throw cannot("read", file, e);
            }
        }
    }

    private static ReplayFailedException cannot(String what, Path file, Exception e) {
        return new ReplayFailedException(file + " cannot be " + what + ": " + e.getMessage(), e);
    }
}
