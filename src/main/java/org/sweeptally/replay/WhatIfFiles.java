package org.sweeptally.replay;

import com.fasterxml.jackson.databind.ObjectMapper;
import com.fasterxml.jackson.databind.node.ObjectNode;
import java.io.BufferedWriter;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Map;
import java.util.Optional;
import java.util.TreeSet;
import org.sweeptally.event.Count;
import org.sweeptally.event.Track;
import org.sweeptally.region.intake.Times;

/**
 * Files with existence and counts over time, as they were and as they would have been: {@code existence.ndjson} and
 * {@code numbers.ndjson}, a line for each object and scan, and for each scan.
 */
public final class WhatIfFiles implements AutoCloseable {

    private static final ObjectMapper JSON = new ObjectMapper();

    private final Optional<BufferedWriter> existence;
    private final Optional<BufferedWriter> numbers;

    /** @param folder made if it is missing; empty where no files are wanted */
    public WhatIfFiles(Optional<Path> folder) {
        existence = folder.map(path -> open(path, "existence.ndjson"));
        numbers = folder.map(path -> open(path, "numbers.ndjson"));
    }

    private static BufferedWriter open(Path folder, String name) {
        try {
            Files.createDirectories(folder);
            return Files.newBufferedWriter(folder.resolve(name));
        } catch (IOException e) {
            throw cannotWrite(e);
        }
    }

    void scan(String region, Count recorded, Count changed, Map<String, Track> before, Map<String, Track> after) {
        numbers.ifPresent(out -> line(out, begin(region, recorded)
                .put("recordedMean", recorded.getAll().getMean()).put("changedMean", changed.getAll().getMean())
                .put("recordedLeast", recorded.getAll().getLeast()).put("recordedMost", recorded.getAll().getMost())
                .put("changedLeast", changed.getAll().getLeast()).put("changedMost", changed.getAll().getMost())
                .put("recordedUnseen", recorded.getExpectedUnseen())
                .put("changedUnseen", changed.getExpectedUnseen())));
        if (existence.isPresent()) {
            TreeSet<String> objects = new TreeSet<>(before.keySet());
            objects.addAll(after.keySet());
            for (String object : objects) {
                line(existence.get(), begin(region, recorded).put("object", object)
                        .put("recorded", existence(before.get(object)))
                        .put("changed", existence(after.get(object))));
            }
        }
    }

    private static ObjectNode begin(String region, Count count) {
        return JSON.createObjectNode().put("region", region).put("time", Times.text(count.getTimeMicros()))
                .put("sensor", count.getSensor()).put("scanTime", Times.text(count.getScanTimeMicros()));
    }

    /** Null where it was not shown. */
    private static Double existence(Track track) {
        return track == null ? null : track.getExistence();
    }

    private static void line(BufferedWriter out, ObjectNode line) {
        try {
            out.write(JSON.writeValueAsString(line));
            out.write('\n');
        } catch (IOException e) {
            throw cannotWrite(e);
        }
    }

    private static ReplayFailedException cannotWrite(IOException e) {
        return new ReplayFailedException("files cannot be written: " + e.getMessage(), e);
    }

    @Override
    public void close() {
        try {
            if (existence.isPresent()) {
                existence.get().close();
                numbers.get().close();
            }
        } catch (IOException e) {
            throw cannotWrite(e);
        }
    }
}
