package org.sweeptally.replay;

import com.fasterxml.jackson.core.JsonProcessingException;
import com.fasterxml.jackson.databind.DeserializationFeature;
import com.fasterxml.jackson.databind.ObjectMapper;
import com.fasterxml.jackson.databind.SerializationFeature;
import java.io.IOException;
import java.io.InputStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.security.MessageDigest;
import java.util.HexFormat;
import java.util.List;
import org.sweeptally.region.wire.Digests;

/**
 * What an archive holds, and the SHA-256 of each of its files. It lies in the archive as {@value #NAME}; its own digest
 * lies beside it in {@value #DIGEST}, against accidents, and is printed to be kept elsewhere, against intent.
 *
 * @param machineVersion of the program that wrote the archive
 * @param from           begin of the span, microseconds since 1970-01-01T00:00:00Z; null for the beginning
 * @param to             its end, itself excluded; null for the end
 */
record Manifest(
        String format,
        int formatVersion,
        String site,
        String program,
        int machineVersion,
        Long from,
        Long to,
        List<Region> regions,
        List<Settings> settings,
        List<Listed> files) {

    static final String NAME = "manifest.json";
    static final String DIGEST = "manifest.sha256";
    static final String FORMAT = "sweeptally-archive";
    static final int FORMAT_VERSION = 1;

    /** A region, and whether its replay begins with a snapshot. */
    record Region(String name, boolean snapshot) {}

    /** A revision of the site's settings, and the file that holds its text. */
    record Settings(int revision, int machineVersion, String file) {}

    /** A file of the archive: its path in the folder with slashes, its length, its digest in hexadecimal. */
    record Listed(String path, long lengthBytes, String sha256) {}

    private static final ObjectMapper JSON = new ObjectMapper()
            .enable(SerializationFeature.INDENT_OUTPUT)
            .enable(DeserializationFeature.FAIL_ON_NULL_FOR_PRIMITIVES);

    Span span() {
        return new Span(from == null ? Long.MIN_VALUE : from, to == null ? Long.MAX_VALUE : to);
    }

    byte[] toBytes() {
        try {
            return (JSON.writeValueAsString(this) + "\n").getBytes(StandardCharsets.UTF_8);
        } catch (JsonProcessingException e) {
            throw new IllegalStateException("a manifest is always JSON", e);
        }
    }

    /** @throws ReplayFailedException if the bytes are no manifest that this program reads */
    static Manifest read(byte[] bytes) {
        Manifest manifest;
        try {
            manifest = JSON.readValue(bytes, Manifest.class);
        } catch (IOException e) {
            throw new ReplayFailedException(NAME + " is no manifest of an archive: " + e.getMessage(), e);
        }
        if (!FORMAT.equals(manifest.format) || manifest.formatVersion != FORMAT_VERSION) {
            throw new ReplayFailedException(NAME + " says format " + manifest.format + ", version "
                    + manifest.formatVersion + ", and this program reads " + FORMAT + ", version " + FORMAT_VERSION);
        }
        return manifest;
    }

    /** SHA-256 of bytes, in hexadecimal. */
    static String digest(byte[] bytes) {
        return HexFormat.of().formatHex(Digests.sha256(bytes).bytes());
    }

    /** SHA-256 of a file, in hexadecimal. */
    static String digest(Path file) throws IOException {
        MessageDigest digest = Digests.newSha256();
        byte[] buffer = new byte[64 * 1024];
        try (InputStream in = Files.newInputStream(file)) {
            for (int read = in.read(buffer); read >= 0; read = in.read(buffer)) {
                digest.update(buffer, 0, read);
            }
        }
        return HexFormat.of().formatHex(digest.digest());
    }
}
