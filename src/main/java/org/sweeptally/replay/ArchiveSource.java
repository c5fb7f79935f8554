package org.sweeptally.replay;

import java.io.File;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.TreeSet;
import java.util.stream.Stream;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.event.SnapshotHead;
import org.sweeptally.event.SnapshotPiece;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.stream.Snapshot;

/** A folder that {@link ArchiveWriter} left, checked against its manifest when it is opened. */
public final class ArchiveSource implements RecordedSource {

    private final Path folder;
    private final Manifest manifest;

    /**
     * Opens and checks an archive.
     *
     * @param digest SHA-256 of the manifest as it was kept elsewhere, in hexadecimal, if it was
     * @throws ReplayFailedException if anything in the folder is not as it was written; it names the file
     */
    public ArchiveSource(Path folder, Optional<String> digest) {
        this.folder = folder;
        try {
            byte[] bytes = bytes(Manifest.NAME);
            checkManifest(bytes, digest);
            manifest = Manifest.read(bytes);
            checkFiles();
        } catch (IOException e) {
            throw new ReplayFailedException("the archive in " + folder + " cannot be read: " + e.getMessage(), e);
        }
    }

    private byte[] bytes(String name) throws IOException {
        Path file = folder.resolve(name);
        if (!Files.isRegularFile(file)) {
            throw new ReplayFailedException(file + " is missing: this is no archive, or a part of one");
        }
        return Files.readAllBytes(file);
    }

    private void checkManifest(byte[] bytes, Optional<String> elsewhere) throws IOException {
        String actual = Manifest.digest(bytes);
        String beside = new String(bytes(Manifest.DIGEST), StandardCharsets.ISO_8859_1);
        if (!beside.equals(actual + "\n")) {
            throw new ReplayFailedException("the archive was altered: " + Manifest.NAME + " has SHA-256 " + actual
                    + ", and " + Manifest.DIGEST + " says otherwise");
        }
        if (elsewhere.isPresent() && !elsewhere.get().equalsIgnoreCase(actual)) {
            throw new ReplayFailedException("the archive was altered, or is another: " + Manifest.NAME
                    + " has SHA-256 " + actual + ", and " + elsewhere.get() + " was kept");
        }
    }

    private void checkFiles() throws IOException {
        TreeSet<String> unlisted = new TreeSet<>(files(folder));
        for (Manifest.Listed listed : manifest.files()) {
            if (!unlisted.remove(listed.path())) {
                throw new ReplayFailedException("the archive was altered: " + listed.path() + " is missing");
            }
            String actual = Manifest.digest(folder.resolve(listed.path()));
            if (!actual.equals(listed.sha256())) {
                throw new ReplayFailedException("the archive was altered: " + listed.path() + " has SHA-256 " + actual
                        + ", and had " + listed.sha256() + " when it was written");
            }
        }
        if (!unlisted.isEmpty()) {
            throw new ReplayFailedException(
                    "the archive was altered: " + unlisted.first() + " was not there when it was written");
        }
    }

    /** Paths of all files in a folder but for the manifest and its digest, in order. */
    static List<String> files(Path folder) throws IOException {
        try (Stream<Path> all = Files.walk(folder)) {
            return all.filter(path -> !Files.isDirectory(path))
                    .map(path -> folder.relativize(path).toString().replace(File.separatorChar, '/'))
                    .filter(path -> !path.equals(Manifest.NAME) && !path.equals(Manifest.DIGEST))
                    .sorted()
                    .toList();
        }
    }

    /** What the archive was taken of. */
    public Span span() {
        return manifest.span();
    }

    /** Name and version of the program that wrote it. */
    public String program() {
        return manifest.program();
    }

    /** How many files the manifest lists. */
    public int fileCount() {
        return manifest.files().size();
    }

    @Override
    public String site() {
        return manifest.site();
    }

    @Override
    public List<String> regions() {
        return manifest.regions().stream().map(Manifest.Region::name).sorted().toList();
    }

    @Override
    public List<SettingsBody> settings() {
        List<SettingsBody> settings = new ArrayList<>();
        for (Manifest.Settings listed : manifest.settings()) {
            try {
                String text = Files.readString(folder.resolve(listed.file()));
                settings.add(new SettingsBody(text, listed.revision(), listed.machineVersion()));
            } catch (IOException e) {
                throw new ReplayFailedException(listed.file() + " cannot be read: " + e.getMessage(), e);
            }
        }
        return settings;
    }

    @Override
    public Beginning before(String region, long micros) {
        boolean snapshot = manifest.regions().stream()
                .filter(listed -> listed.name().equals(region))
                .findFirst()
                .orElseThrow(() -> new ReplayFailedException("the archive does not hold region " + region))
                .snapshot();
        return new Beginning(snapshot ? Optional.of(snapshot(region)) : Optional.empty());
    }

    private Snapshot snapshot(String region) {
        List<SnapshotPiece> pieces = new ArrayList<>();
        try (MessageFile.Reader in = open(region, ArchiveWriter.SNAPSHOT)) {
            MessageFile.Message message = in.next();
            for (MessageFile.Message next = in.next(); next != null; next = in.next()) {
                pieces.add(Wire.decode(message.value(), SnapshotPiece.class));
                message = next;
            }
            return new Snapshot(Wire.decode(message.value(), SnapshotHead.class), pieces);
        } catch (IllegalArgumentException e) {
            throw new ReplayFailedException(region + "/" + ArchiveWriter.SNAPSHOT + ": " + e.getMessage(), e);
        }
    }

    private MessageFile.Reader open(String region, String file) {
        return new MessageFile.Reader(folder.resolve(region).resolve(file));
    }

    @Override
    public LogCursor log(String region, Beginning beginning) {
        long end = lastOffset(region) + 1;
        MessageFile.Reader in = open(region, ArchiveWriter.LOG);
        return new LogCursor() {
            @Override
            public Logged next() {
                MessageFile.Message next = in.next();
                return next == null ? null : new Logged(next.offset(), next.value());
            }

            @Override
            public long end() {
                return end;
            }

            @Override
            public void close() {
                in.close();
            }
        };
    }

    private long lastOffset(String region) {
        try (MessageFile.Reader in = open(region, ArchiveWriter.LOG)) {
            long last = -1;
            for (MessageFile.Message next = in.next(); next != null; next = in.next()) {
                last = next.offset();
            }
            return last;
        }
    }

    @Override
    public RecordCursor records(RecordKind kind, String region, Beginning beginning, long fromMicros) {
        MessageFile.Reader in = open(region, kind.plural() + ".avro");
        return new RecordCursor() {
            private boolean begun = kind == RecordKind.REJECTS || fromMicros <= span().fromMicros();

            @Override
            public Recorded next() {
                MessageFile.Message next = in.next();
                while (next != null && !begun) {
                    begun = isFrom(kind, next, fromMicros);
                    next = begun ? next : in.next();
                }
                return next == null ? null : new Recorded(next.value(), next.where());
            }

            @Override
            public void close() {
                in.close();
            }
        };
    }

    private static boolean isFrom(RecordKind kind, MessageFile.Message message, long fromMicros) {
        try {
            return RecordKind.timeMicros(kind.decode(message.value())) >= fromMicros;
        } catch (IllegalArgumentException e) {
            return false;
        }
    }

    @Override
    public void close() {
        // Every cursor has its own file open.
    }
}
