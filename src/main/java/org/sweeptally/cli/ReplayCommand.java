package org.sweeptally.cli;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.concurrent.Callable;
import org.apache.kafka.common.KafkaException;
import org.sweeptally.replay.ArchiveSource;
import org.sweeptally.replay.Beside;
import org.sweeptally.replay.BusSource;
import org.sweeptally.replay.Explanations;
import org.sweeptally.replay.RecordedSource;
import org.sweeptally.replay.SettingsChange;
import org.sweeptally.replay.Span;
import org.sweeptally.replay.WhatIfFiles;
import org.sweeptally.site.RegionSettings;
import org.sweeptally.site.Site;
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

    @Option(
            names = "--with",
            paramLabel = "SETTING=VALUE",
            description = "Also says what would have been other with this setting, such as"
                    + " sensors.north-shore.detectionProbability=0.7; keys are those of the site file. May be given"
                    + " several times, all hold together.")
    private List<String> changes = new ArrayList<>();

    @Option(names = "--out", paramLabel = "DIR", description = "Folder for what --explain and --with write.")
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
            if (explained != null && out == null || out != null && explained == null && changes.isEmpty()) {
                throw new UsageException("--explain needs --out, and --out is for what --explain and --with write");
            }
            return archive == null ? fromBus() : fromArchive();
        } catch (KafkaException e) {
            throw new CommandFailedException(e.getMessage());
        } finally {
            terminal.endProgress();
        }
    }

    private void checkChanges(RecordedSource source) {
        if (changes.isEmpty()) {
            return;
        }
        try {
            SettingsChange change = new SettingsChange(changes);
            source.settings().forEach(body -> change.text(body.getText()));
        } catch (IllegalArgumentException e) {
            throw new UsageException("--with " + e.getMessage());
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
        checkChanges(source);
        Optional<String> only = Optional.ofNullable(explained).filter(object -> !object.equals(ALL));
        try (WhatIfFiles files = new WhatIfFiles(changes.isEmpty() ? Optional.empty() : Optional.ofNullable(out))) {
            Optional<Explanations> explanations =
                    explained == null ? Optional.empty() : Optional.of(new Explanations(only, out));
            Optional<SettingsChange> change =
                    changes.isEmpty() ? Optional.empty() : Optional.of(new SettingsChange(changes));
            ReplaySummary summary = ReplayProgress.replayAll(
                    source, regions, span, new Beside(explanations, change, files), terminal);
            boolean same = summary.print(terminal.out());
            if (change.isPresent()) {
                new WhatIfSummary(changes, summary.reports()).print(terminal.out());
            }
            explanations.ifPresent(written -> finish(written, only, span));
            return same ? Main.DONE : Main.FAILED;
        }
    }

    private void finish(Explanations explanations, Optional<String> only, Span span) {
        explanations.finish();
        explanations.close();
        List<Path> texts = explanations.textFiles();
        if (only.isPresent() && texts.isEmpty()) {
            throw new CommandFailedException("no region held object " + explained + " " + span.text());
        }
        terminal.out().println("explained " + (only.isPresent() ? explained : texts.size() + " objects") + ": "
                + (texts.size() == 1 ? texts.get(0) : "texts by region and evidence.ndjson are in " + out));
    }
}
