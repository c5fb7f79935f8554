package org.sweeptally.cli;

import java.io.BufferedWriter;
import java.io.Closeable;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.FileAlreadyExistsException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.apache.avro.specific.SpecificRecordBase;
import org.sweeptally.region.text.RecordJson;

/** The files that a dry run writes, one record a line. */
final class RecordFiles implements Closeable {

    private static final List<String> NAMES =
            List.of("tracks.ndjson", "births.ndjson", "ends.ndjson", "counts.ndjson", "rejects.ndjson");

    private final List<BufferedWriter> all = new ArrayList<>();
    private final BufferedWriter tracks;
    private final BufferedWriter births;
    private final BufferedWriter ends;
    private final BufferedWriter counts;
    private final BufferedWriter rejects;

    /**
     * Makes the folder if it is missing, and its files anew.
     *
     * @param recording what is read meanwhile, and must not be one of the files
     */
    RecordFiles(Path folder, Optional<Path> recording) throws IOException {
        try {
            Files.createDirectories(folder);
        } catch (FileAlreadyExistsException e) {
            throw new CommandFailedException(folder + ": is a file, and a folder is needed for the records");
        }
        if (recording.isPresent()) {
            spare(recording.get(), folder);
        }
        tracks = open(folder, "tracks.ndjson");
        births = open(folder, "births.ndjson");
        ends = open(folder, "ends.ndjson");
        counts = open(folder, "counts.ndjson");
        rejects = open(folder, "rejects.ndjson");
    }

    private static void spare(Path recording, Path folder) throws IOException {
        for (String name : NAMES) {
            Path file = folder.resolve(name);
            if (Files.exists(file) && Files.isSameFile(file, recording)) {
                throw new CommandFailedException(
                        recording + ": would be overwritten: records of this name go to " + folder);
            }
        }
    }

    private BufferedWriter open(Path folder, String name) throws IOException {
        BufferedWriter writer = Files.newBufferedWriter(folder.resolve(name));
        all.add(writer);
        return writer;
    }

    void track(SpecificRecordBase track) {
        line(tracks, track);
    }

    void birth(SpecificRecordBase birth) {
        line(births, birth);
    }

    void end(SpecificRecordBase end) {
        line(ends, end);
    }

    void count(SpecificRecordBase count) {
        line(counts, count);
    }

    void reject(SpecificRecordBase reject) {
        line(rejects, reject);
    }

    private static void line(BufferedWriter writer, SpecificRecordBase record) {
        try {
            writer.write(RecordJson.line(record));
            writer.write('\n');
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    @Override
    public void close() throws IOException {
        for (BufferedWriter writer : all) {
            writer.close();
        }
    }
}
