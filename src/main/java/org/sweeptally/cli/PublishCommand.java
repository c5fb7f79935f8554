package org.sweeptally.cli;

import java.io.BufferedInputStream;
import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.NoSuchFileException;
import java.nio.file.Path;
import java.util.Optional;
import java.util.concurrent.Callable;
import org.sweeptally.region.intake.Intake;
import org.sweeptally.region.text.PartLines;
import org.sweeptally.site.Site;
import org.sweeptally.stream.PartPublisher;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Parameters;

/** Parts from lines of JSON onto the bus. */
@Command(
        name = "publish",
        mixinStandardHelpOptions = true,
        description = {
            "Publishes parts of scans, one JSON object a line, as a sensor would: in their order, by sensor. A line that"
                    + " is not a whole, sound part is not published, and said so with its number; the others are.",
            ""
        },
        footer = {
            "",
            "Exit codes: 0 all lines published, 1 some were not, or the bus failed, 2 site file or options refused.",
            "",
            "Example:",
            "  sweeptally publish --site site.yaml --bus localhost:9092 parts.ndjson"
        })
final class PublishCommand implements Callable<Integer> {

    private static final String STANDARD_INPUT = "-";
    private static final int PROGRESS_LINES = 200;

    private final Terminal terminal;
    private long refused;

    @Mixin
    private SiteOption siteOption;

    @Mixin
    private BusOptions busOptions;

    @Parameters(paramLabel = "FILE", description = "The parts, or - for standard input.")
    private String parts;

    PublishCommand(Terminal terminal) {
        this.terminal = terminal;
    }

    @Override
    public Integer call() {
        Optional<Site> site = siteOption.read(terminal.err());
        if (site.isEmpty()) {
            return Main.USAGE;
        }
        try (InputStream in = open();
                PartPublisher publisher =
                        new PartPublisher(busOptions.clients(), busOptions.topics(site.get()).detections())) {
            publish(new PartLines(in, site.get()), publisher);
            return refused == 0 ? Main.DONE : Main.FAILED;
        } catch (NoSuchFileException e) {
            throw new CommandFailedException(e.getFile() + ": there is no such file");
        } catch (IOException e) {
            throw new CommandFailedException("reading " + parts + " failed: " + e.getMessage());
        } catch (UncheckedIOException e) {
            throw new CommandFailedException("reading " + parts + " failed: " + e.getCause().getMessage());
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

    private void publish(PartLines lines, PartPublisher publisher) throws IOException {
        try {
            for (Optional<Intake> line = lines.next(); line.isPresent(); line = lines.next()) {
                if (line.get().reject().isPresent()) {
                    refused++;
                    terminal.err().println("line " + lines.linesRead() + ": not published: "
                            + line.get().reject().get().getSentence());
                } else {
                    publisher.publish(line.get().body().orElseThrow().getPart());
                }
                if (lines.linesRead() % PROGRESS_LINES == 0) {
                    terminal.progress(lines.linesRead() + " lines read");
                }
            }
            publisher.flush();
        } finally {
            terminal.endProgress();
        }
        terminal.out().println(publisher.published() + " parts published to " + publisher.topic()
                + (refused == 0 ? "" : ", " + refused + " lines were not"));
    }
}
