package org.sweeptally.replay;

import java.io.BufferedWriter;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
import java.util.List;
import java.util.NavigableMap;
import java.util.Optional;
import java.util.TreeMap;
import java.util.function.Consumer;
import org.sweeptally.filter.ObjectEvidence;
import org.sweeptally.filter.ScanEvidence;

/**
 * Writes why objects exist, scan by scan: {@code evidence.ndjson} with a line for each object and scan, and a text for
 * each object that was ever confirmed, or that was asked for.
 */
public final class Explanations implements AutoCloseable {

    private static final int HELD_CHARACTERS = 32 * 1024;

    private final Optional<String> only;
    private final Path folder;
    private final BufferedWriter lines;
    private final NavigableMap<String, Text> texts = new TreeMap<>();

    /** What an object's text has since it was last written out. */
    private static final class Text {
        final StringBuilder held = new StringBuilder();
        boolean wanted;
        boolean begun;
    }

    /**
     * @param only   name of the one object to explain; empty for all
     * @param folder made if it is missing; files of the same names are replaced
     */
    public Explanations(Optional<String> only, Path folder) {
        this.only = only;
        this.folder = folder;
        try {
            Files.createDirectories(folder);
            lines = Files.newBufferedWriter(folder.resolve("evidence.ndjson"));
        } catch (IOException e) {
            throw cannotWrite(e);
        }
    }

    /** What observes the machine of a region, of scans in the span. */
    Consumer<ScanEvidence> of(String region, Span span) {
        return scan -> {
            if (span.holds(scan.logTimeMicros())) {
                scan.objects().forEach(object -> take(region, scan, object));
            }
        };
    }

    private void take(String region, ScanEvidence scan, ObjectEvidence object) {
        String name = object.identity().text();
        if (only.isPresent() && !only.get().equals(name)) {
            return;
        }
        Text text = texts.computeIfAbsent(region + "/" + name, key -> new Text());
        text.held.append(EvidenceText.of(region, scan, object));
        text.wanted |= object.confirmed() || only.isPresent();
        try {
            lines.write(EvidenceJson.line(region, scan, object));
            lines.write('\n');
            if (text.held.length() > HELD_CHARACTERS) {
                write(region + "/" + name, text);
            }
        } catch (IOException e) {
            throw cannotWrite(e);
        }
    }

    /** Of what was never confirmed only the latest is held, since nobody may ever ask for it. */
    private void write(String key, Text text) throws IOException {
        if (text.wanted) {
            Path file = file(key);
            if (!text.begun) {
                Files.createDirectories(file.getParent());
                Files.writeString(file, "Object " + key.substring(key.indexOf('/') + 1) + " in region "
                        + key.substring(0, key.indexOf('/')) + "\n\n" + EvidenceText.READING);
                text.begun = true;
            }
            Files.writeString(file, text.held, StandardCharsets.UTF_8, StandardOpenOption.APPEND);
        }
        text.held.setLength(0);
    }

    private Path file(String key) {
        return folder.resolve(key + ".txt");
    }

    private static ReplayFailedException cannotWrite(IOException e) {
        return new ReplayFailedException("explanations cannot be written: " + e.getMessage(), e);
    }

    /** Writes out what is held. */
    public void finish() {
        try {
            for (String key : texts.keySet()) {
                write(key, texts.get(key));
            }
            lines.flush();
        } catch (IOException e) {
            throw cannotWrite(e);
        }
    }

    /** Files of texts that were written, in order. */
    public List<Path> textFiles() {
        return texts.entrySet().stream()
                .filter(entry -> entry.getValue().begun)
                .map(entry -> file(entry.getKey()))
                .toList();
    }

    @Override
    public void close() {
        try {
            lines.close();
        } catch (IOException e) {
            throw cannotWrite(e);
        }
    }
}
