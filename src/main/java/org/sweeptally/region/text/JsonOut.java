package org.sweeptally.region.text;

import com.fasterxml.jackson.core.JsonFactory;
import com.fasterxml.jackson.core.JsonGenerator;
import com.fasterxml.jackson.core.StreamWriteFeature;
import java.io.IOException;
import java.io.StringWriter;
import java.io.UncheckedIOException;

/** Writes lines of JSON: the same values give the same characters, on every machine and every Java. */
final class JsonOut {

    private static final JsonFactory FACTORY = JsonFactory.builder()
            .enable(StreamWriteFeature.USE_FAST_DOUBLE_WRITER) // Double.toString differs between Java versions
            .build();

    private JsonOut() {}

    /** What writes one line. */
    @FunctionalInterface
    interface Content {
        void into(JsonGenerator out) throws IOException;
    }

    /** One line, without its end. */
    static String line(Content content) {
        StringWriter text = new StringWriter(512);
        try (JsonGenerator out = FACTORY.createGenerator(text)) {
            content.into(out);
        } catch (IOException e) {
            throw new UncheckedIOException("writing to memory cannot fail", e);
        }
        return text.toString();
    }

    /**
     * Writes a number.
     *
     * @param name what the number is, for the message
     * @throws IllegalArgumentException if it is not finite: JSON has no such numbers, and no reader expects one
     */
    static void number(JsonGenerator out, String name, double value) throws IOException {
        if (!Double.isFinite(value)) {
            throw new IllegalArgumentException(name + " is " + value + ": only finite numbers are written");
        }
        out.writeNumber(value);
    }
}
