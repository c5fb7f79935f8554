package org.sweeptally.cli;

import java.io.BufferedInputStream;
import java.io.IOException;
import java.io.InputStream;
import java.nio.file.AccessDeniedException;
import java.nio.file.Files;
import java.nio.file.NoSuchFileException;
import java.nio.file.Path;
import java.util.Optional;
import java.util.concurrent.Callable;
import org.sweeptally.site.Site;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;

/** Runs the region machines of a site on a file of parts, without a bus. */
@Command(
        name = "dry-run",
        mixinStandardHelpOptions = true,
        description = {
            "Makes the picture of a recording: reads parts of scans, one JSON object a line in the order in which they"
                    + " arrived, and writes what the operator would publish.",
            "",
            "Writes tracks.ndjson, births.ndjson, ends.ndjson, counts.ndjson and rejects.ndjson, and prints a summary.",
            ""
        },
        footer = {"", "Example:", "  sweeptally dry-run --site site.yaml --parts parts.ndjson --out picture"})
final class DryRunCommand implements Callable<Integer> {

    private static final String STANDARD_INPUT = "-";

    private final Terminal terminal;

    @Mixin
    private SiteOption siteOption;

    @Option(
            names = "--parts",
            required = true,
            paramLabel = "FILE",
            description = "The recording, or - for standard input.")
    private String parts;

    @Option(
            names = "--out",
            required = true,
            paramLabel = "DIR",
            description = "Folder for the records; made if it is missing. Files of these names in it are replaced.")
    private Path out;

    DryRunCommand(Terminal terminal) {
        this.terminal = terminal;
    }

    @Override
    public Integer call() {
        Optional<Site> site = siteOption.read(terminal.err());
        if (site.isEmpty()) {
            return Main.USAGE;
        }
        if (site.get().fromMicros().isPresent()) {
            terminal.err().println("from has no effect here: the settings are the first, and hold from the beginning");
        }
        try (InputStream in = open(); RecordFiles files = new RecordFiles(out, recording())) {
            DryRun run = new DryRun(site.get(), files);
            run.readAll(in, size(), terminal);
            new DryRunSummary(run, out).print(terminal.out());
            return Main.DONE;
        } catch (NoSuchFileException e) {
            throw new CommandFailedException(e.getFile() + ": there is no such file");
        } catch (AccessDeniedException e) {
            throw new CommandFailedException(e.getFile() + ": may not be read or written");
        } catch (IOException e) {
            throw new CommandFailedException(
                    "reading " + shownParts() + " or writing to " + out + " failed: " + e.getMessage());
        }
    }

    private InputStream open() throws IOException {
        if (parts.equals(STANDARD_INPUT)) {
            return terminal.in();
        }
        Path file = Path.of(parts);
        if (Files.isDirectory(file)) {
            throw new CommandFailedException(parts + ": is a folder, not a file of parts");
        }
        return new BufferedInputStream(Files.newInputStream(file));
    }

    private String shownParts() {
        return parts.equals(STANDARD_INPUT) ? "standard input" : parts;
    }

    private Optional<Path> recording() {
        return parts.equals(STANDARD_INPUT) ? Optional.empty() : Optional.of(Path.of(parts));
    }

    /** Bytes of the recording, 0 where they are not known beforehand. */
    private long size() throws IOException {
        return parts.equals(STANDARD_INPUT) ? 0 : Files.size(Path.of(parts));
    }
}
