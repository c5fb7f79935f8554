package org.sweeptally.cli;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.concurrent.Callable;
import org.apache.kafka.common.KafkaException;
import org.sweeptally.replay.BusSource;
import org.sweeptally.replay.RecordedSource;
import org.sweeptally.replay.RegionReport;
import org.sweeptally.replay.Replay;
import org.sweeptally.replay.ReplayFailedException;
import org.sweeptally.replay.Span;
import org.sweeptally.site.RegionSettings;
import org.sweeptally.site.Site;
import org.sweeptally.stream.OperatorStoppedException;
import org.sweeptally.stream.SettingsRefusedException;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;

/** What was published, made anew from the log and compared. */
@Command(
        name = "replay",
        mixinStandardHelpOptions = true,
        description = {
            "Makes the records of a span of time anew, from the newest snapshot before it and the region log, and"
                    + " compares them bit for bit with what was published. The operator may run meanwhile and notices"
                    + " nothing.",
            ""
        },
        footer = {
            "",
            "Exit codes: 0 every record is the same, 1 one differs or the bus failed, 2 site file or options refused.",
            "",
            "Example:",
            "  sweeptally replay --site site.yaml --from 2031-05-01T04:02:00Z --to 2031-05-01T04:06:00Z"
        })
final class ReplayCommand implements Callable<Integer> {

    private final Terminal terminal;

    @Mixin
    private SiteOption siteOption;

    @Mixin
    private BusOptions busOptions;

    @Mixin
    private SpanOptions spanOptions;

    ReplayCommand(Terminal terminal) {
        this.terminal = terminal;
    }

    @Override
    public Integer call() {
        Optional<Site> site = siteOption.read(terminal.err());
        if (site.isEmpty()) {
            return Main.USAGE;
        }
        try {
            Span span = spanOptions.span();
            List<String> all = site.get().regions().stream().map(RegionSettings::name).toList();
            List<String> regions = spanOptions.regions(all);
            try (RecordedSource source = new BusSource(busOptions.clients(), busOptions.topics(site.get()), all)) {
                return replay(source, regions, span);
            }
        } catch (UsageException | SettingsRefusedException e) {
            terminal.err().println("sweeptally: " + e.getMessage());
            return Main.USAGE;
        } catch (ReplayFailedException | OperatorStoppedException | KafkaException e) {
            throw new CommandFailedException(e.getMessage());
        } finally {
            terminal.endProgress();
        }
    }

    private int replay(RecordedSource source, List<String> regions, Span span) {
        ReplayProgress progress = new ReplayProgress(terminal, regions);
        Replay replay = new Replay(source, progress);
        List<RegionReport> reports = new ArrayList<>();
        for (String region : regions) {
            reports.add(replay.region(region, span));
        }
        terminal.endProgress();
        return new ReplaySummary(reports, span).print(terminal.out()) ? Main.DONE : Main.FAILED;
    }
}
