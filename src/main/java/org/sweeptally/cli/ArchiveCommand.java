package org.sweeptally.cli;

import java.nio.file.Path;
import java.util.List;
import java.util.Optional;
import java.util.concurrent.Callable;
import org.apache.kafka.common.KafkaException;
import org.sweeptally.replay.ArchiveWriter;
import org.sweeptally.replay.BusSource;
import org.sweeptally.replay.Span;
import org.sweeptally.site.RegionSettings;
import org.sweeptally.site.Site;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;

/** Everything about a span of time, from the topics into a folder. */
@Command(
        name = "archive",
        mixinStandardHelpOptions = true,
        description = {
            "Takes all that is needed to replay a span of time from the topics into a folder: snapshots, region log,"
                    + " what was published, settings, and a manifest with the SHA-256 of every file. Replays it"
                    + " meanwhile, and says what came of it.",
            ""
        },
        footer = {
            "",
            "Exit codes: 0 archived, and every record is reproduced; 1 archived, and one differs, or the bus failed; 2"
                    + " site file or options refused.",
            "",
            "Example:",
            "  sweeptally archive --site site.yaml --from 2031-05-01T04:02:00Z --to 2031-05-01T04:06:00Z --out incident"
        })
final class ArchiveCommand implements Callable<Integer> {

    private final Terminal terminal;

    @Mixin
    private SiteOption siteOption;

    @Mixin
    private BusOptions busOptions;

    @Mixin
    private SpanOptions spanOptions;

    @Option(
            names = "--out",
            required = true,
            paramLabel = "DIR",
            description = "Folder for the archive; made if it is missing, and must be empty.")
    private Path out;

    ArchiveCommand(Terminal terminal) {
        this.terminal = terminal;
    }

    @Override
    public Integer call() {
        Optional<Site> site = siteOption.read(terminal.err());
        if (site.isEmpty()) {
            return Main.USAGE;
        }
        try {
            return archive(site.get());
        } catch (KafkaException e) {
            throw new CommandFailedException(e.getMessage());
        } finally {
            terminal.endProgress();
        }
    }

    private int archive(Site site) {
        Span span = spanOptions.span();
        List<String> all = site.regions().stream().map(RegionSettings::name).toList();
        List<String> regions = spanOptions.regions(all);
        try (ArchiveWriter writer = new ArchiveWriter(
                new BusSource(busOptions.clients(), busOptions.topics(site), all), out)) {
            ReplaySummary summary = ReplayProgress.replayAll(writer, regions, span, terminal);
            String digest = writer.finish(span, new Main.Version().getVersion()[0]);
            boolean same = summary.print(terminal.out());
            terminal.out().println("The archive is in " + out + ". SHA-256 of its manifest, to be kept elsewhere:");
            terminal.out().println(digest);
            return same ? Main.DONE : Main.FAILED;
        }
    }
}
