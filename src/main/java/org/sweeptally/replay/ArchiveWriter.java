package org.sweeptally.replay;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.stream.Stream;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.event.SnapshotPiece;
import org.sweeptally.region.RegionMachine;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.stream.Snapshot;

/**
 * Keeps in a folder whatever is read through it: a replay through it leaves an archive that holds all that this replay
 * needed, and so gives the same answer again.
 */
public final class ArchiveWriter implements RecordedSource {

    static final String SNAPSHOT = "snapshot.avro";
    static final String LOG = "region-log.avro";

    private final RecordedSource source;
    private final Path folder;
    private final List<Manifest.Region> regions = new ArrayList<>();

    /**
     * @param folder made if it is missing
     * @throws ReplayFailedException if it holds anything, or cannot be made
     */
    public ArchiveWriter(RecordedSource source, Path folder) {
        this.source = source;
        this.folder = folder;
        try {
            Files.createDirectories(folder);
            try (Stream<Path> held = Files.list(folder)) {
                if (held.findAny().isPresent()) {
                    throw new ReplayFailedException(folder + " is not empty: an archive needs a folder of its own");
                }
            }
        } catch (IOException e) {
            throw new ReplayFailedException(folder + " cannot be made a folder for an archive: " + e.getMessage(), e);
        }
    }

    private MessageFile.Writer open(String region, String file) {
        return new MessageFile.Writer(folder.resolve(region).resolve(file), region + "/" + file);
    }

    @Override
    public String site() {
        return source.site();
    }

    @Override
    public List<String> regions() {
        return source.regions();
    }

    @Override
    public List<SettingsBody> settings() {
        return source.settings();
    }

    @Override
    public Beginning before(String region, long micros) {
        Beginning beginning = source.before(region, micros);
        regions.add(new Manifest.Region(region, beginning.snapshot().isPresent()));
        beginning.snapshot().ifPresent(snapshot -> write(region, snapshot));
        return beginning;
    }

    private void write(String region, Snapshot snapshot) {
        try (MessageFile.Writer out = open(region, SNAPSHOT)) {
            long place = 0;
            for (SnapshotPiece piece : snapshot.pieces()) {
                out.write(new MessageFile.Message(place++, "piece " + piece.getPiece(), Wire.encode(piece)));
            }
            out.write(new MessageFile.Message(place, "head", Wire.encode(snapshot.head())));
        }
    }

    @Override
    public LogCursor log(String region, Beginning beginning) {
        LogCursor log = source.log(region, beginning);
        MessageFile.Writer out = open(region, LOG);
        return new LogCursor() {
            @Override
            public Logged next() {
                Logged next = log.next();
                if (next != null) {
                    out.write(new MessageFile.Message(next.offset(), "region log", next.value()));
                }
                return next;
            }

            @Override
            public long end() {
                return log.end();
            }

            @Override
            public void close() {
                log.close();
                out.close();
            }
        };
    }

    @Override
    public RecordCursor records(RecordKind kind, String region, Beginning beginning, long fromMicros) {
        RecordCursor records = source.records(kind, region, beginning, fromMicros);
        MessageFile.Writer out = open(region, kind.plural() + ".avro");
        return new RecordCursor() {
            private long place;

            @Override
            public Recorded next() {
                Recorded next = records.next();
                if (next != null) {
                    out.write(new MessageFile.Message(place++, next.where(), next.value()));
                }
                return next;
            }

            @Override
            public void close() {
                records.close();
                out.close();
            }
        };
    }

    /**
     * Completes the archive after all regions have been replayed.
     *
     * @param program name and version of the program
     * @return SHA-256 of the manifest, in hexadecimal
     */
    public String finish(Span span, String program) {
        try {
            List<Manifest.Settings> settings = new ArrayList<>();
            for (SettingsBody body : source.settings()) {
                String file = "settings/revision-" + body.getRevision() + ".yaml";
                Files.createDirectories(folder.resolve("settings"));
                Files.writeString(folder.resolve(file), body.getText());
                settings.add(new Manifest.Settings(body.getRevision(), body.getMachineVersion(), file));
            }
            byte[] manifest = new Manifest(Manifest.FORMAT, Manifest.FORMAT_VERSION, site(), program,
                            RegionMachine.MACHINE_VERSION, finite(span.fromMicros()), finite(span.toMicros()), regions,
                            settings, listed())
                    .toBytes();
            String digest = Manifest.digest(manifest);
            Files.write(folder.resolve(Manifest.NAME), manifest);
            Files.write(folder.resolve(Manifest.DIGEST), (digest + "\n").getBytes(StandardCharsets.US_ASCII));
            return digest;
        } catch (IOException e) {
            throw new ReplayFailedException("the archive in " + folder + " cannot be completed: " + e.getMessage(), e);
        }
    }

    private static Long finite(long micros) {
        return micros == Long.MIN_VALUE || micros == Long.MAX_VALUE ? null : Long.valueOf(micros);
    }

    private List<Manifest.Listed> listed() throws IOException {
        List<Manifest.Listed> listed = new ArrayList<>();
        for (String path : ArchiveSource.files(folder)) {
            Path file = folder.resolve(path);
            listed.add(new Manifest.Listed(path, Files.size(file), Manifest.digest(file)));
        }
        return listed;
    }

    @Override
    public void close() {
        source.close();
    }
}
