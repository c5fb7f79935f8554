package org.sweeptally.cli;

import java.nio.file.Path;
import java.util.List;
import java.util.Optional;
import java.util.concurrent.Callable;
import org.apache.kafka.common.KafkaException;
import org.sweeptally.replay.ArchiveSource;
import org.sweeptally.replay.BusSource;
import org.sweeptally.replay.Explanations;
import org.sweeptally.replay.RecordedSource;
import org.sweeptally.replay.ReplayFailedException;
import org.sweeptally.replay.Span;
import org.sweeptally.site.RegionSettings;
import org.sweeptally.site.Site;
import org.sweeptally.stream.OperatorStoppedException;
import org.sweeptally.stream.SettingsRefusedException;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;

/** What was published, made anew from the log and compared. */
@Command(
        name = "replay",
        mixinStandardHelpOptions = true,
        description = {
            "Makes the records of a span of time anew, from the newest snapshot before it and the region log, and"
                    + " compares them bit for bit with what was published. Reads a bus, whose operator may run"
                    + " meanwhile and notices nothing, or an archive, which is checked before.",
            ""
        },
        footer = {
            "",
            "Exit codes: 0 every record is the same, 1 one differs, the archive was altered or the bus failed, 2 site"
                    + " file or options refused.",
            "",
            "Examples:",
            "  sweeptally replay --site site.yaml --from 2031-05-01T04:02:00Z --to 2031-05-01T04:06:00Z",
            "  sweeptally replay --archive incident"
        })
final class ReplayCommand implements Callable<Integer> {

    private static final String ALL = "all";

    private final Terminal terminal;

    @Option(names = "--site", paramLabel = "FILE", description = "The site file, to replay from a bus.")
    private Path siteFile;

    @Option(names = "--archive", paramLabel = "DIR", description = "An archive, to replay without a bus.")
    private Path archive;

    @Option(
            names = "--digest",
            paramLabel = "SHA256",
            description = "The digest that was printed when the archive was made: with it, nobody can have altered it.")
    private String digest;

    @Option(
            names = "--explain",
            paramLabel = "OBJECT",
            description = "Also explains, scan by scan, why the object exists or not, or all objects: all. Writes"
                    + " evidence.ndjson and a text for each object to --out.")
    private String explained;

    @Option(names = "--out", paramLabel = "DIR", description = "Folder for what --explain writes.")
    private Path out;

    @Mixin
    private BusOptions busOptions;

    @Mixin
    private SpanOptions spanOptions;

    ReplayCommand(Terminal terminal) {
        this.terminal = terminal;
    }

    @Override
    public Integer call() {
        try {
            if ((siteFile == null) == (archive == null)) {
                throw new UsageException("either --site or --archive must be given, and not both");
            }
            if ((explained == null) != (out == null)) {
                throw new UsageException("--explain and --out belong together");
            }
            return archive == null ? fromBus() : fromArchive();
        } catch (UsageException | SettingsRefusedException e) {
            terminal.err().println("sweeptally: " + e.getMessage());
            return Main.USAGE;
        } catch (ReplayFailedException | OperatorStoppedException | KafkaException e) {
            throw new CommandFailedException(e.getMessage());
        } finally {
            terminal.endProgress();
        }
    }

    private int fromBus() {
        Optional<Site> site = SiteOption.read(siteFile, terminal.err());
        if (site.isEmpty()) {
            return Main.USAGE;
        }
        Span span = spanOptions.span();
        List<String> all = site.get().regions().stream().map(RegionSettings::name).toList();
        List<String> regions = spanOptions.regions(all);
        try (RecordedSource source = new BusSource(busOptions.clients(), busOptions.topics(site.get()), all)) {
            return replay(source, regions, span);
        }
    }

    private int fromArchive() {
        try (ArchiveSource source = new ArchiveSource(archive, Optional.ofNullable(digest))) {
            terminal.out().println("archive of site " + source.site() + ", " + source.span().text() + ", written by "
                    + source.program() + ": " + source.fileCount() + " files are as they were written"
                    + (digest == null ? "" : ", and the manifest is that of the digest"));
            return replay(source, spanOptions.regions(source.regions()), spanOptions.span(source.span()));
        }
    }

    private int replay(RecordedSource source, List<String> regions, Span span) {
        if (explained == null) {
            return print(ReplayProgress.replayAll(source, regions, span, terminal));
        }
        Optional<String> only = explained.equals(ALL) ? Optional.empty() : Optional.of(explained);
        try (Explanations explanations = new Explanations(only, out)) {
            int exitCode = print(ReplayProgress.replayAll(source, regions, span, Optional.of(explanations), terminal));
            explanations.finish();
            List<Path> texts = explanations.textFiles();
            if (only.isPresent() && texts.isEmpty()) {
                throw new CommandFailedException("no region held object " + explained + " " + span.text());
            }
            terminal.out().println("explained " + (only.isPresent() ? explained : texts.size() + " objects") + ": "
                    + (texts.size() == 1 ? texts.get(0) : "texts by region and evidence.ndjson are in " + out));
            return exitCode;
        }
    }

    private int print(ReplaySummary summary) {
        return summary.print(terminal.out()) ? Main.DONE : Main.FAILED;
    }
}
