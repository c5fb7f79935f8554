package org.sweeptally.cli;

import static org.assertj.core.api.Assertions.assertThat;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;

/** A dry run of some parts with the estuary's site, and the records that it left in its folder. */
record DryRunOf(CliRun run, Path folder) {

    private static final ObjectMapper JSON = new ObjectMapper();
    static final List<String> FILES =
            List.of("tracks.ndjson", "births.ndjson", "ends.ndjson", "counts.ndjson", "rejects.ndjson");

    static DryRunOf estuary(Path folder, byte[] parts) throws IOException {
        Files.createDirectories(folder);
        Path file = Files.write(folder.resolve("parts.ndjson"), parts);
        return new DryRunOf(
                CliRun.of("dry-run", "--site", EstuaryRecording.SITE.toString(), "--parts", file.toString(), "--out",
                        folder.toString()),
                folder);
    }

    int exitCode() {
        return run.exitCode();
    }

    String out() {
        return run.out();
    }

    String err() {
        return run.err();
    }

    List<JsonNode> tracks() throws IOException {
        return records("tracks.ndjson");
    }

    List<JsonNode> births() throws IOException {
        return records("births.ndjson");
    }

    List<JsonNode> ends() throws IOException {
        return records("ends.ndjson");
    }

    List<JsonNode> counts() throws IOException {
        return records("counts.ndjson");
    }

    List<JsonNode> rejects() throws IOException {
        return records("rejects.ndjson");
    }

    private List<JsonNode> records(String file) throws IOException {
        List<JsonNode> records = new ArrayList<>();
        for (String line : Files.readAllLines(folder.resolve(file))) {
            records.add(JSON.readTree(line));
        }
        return records;
    }

    void assertSameBytesIn(Path other) {
        for (String file : FILES) {
            assertThat(other.resolve(file)).hasSameBinaryContentAs(folder.resolve(file));
        }
    }
}
