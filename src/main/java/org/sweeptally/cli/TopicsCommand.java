package org.sweeptally.cli;

import java.io.PrintStream;
import java.util.List;
import java.util.Optional;
import java.util.concurrent.Callable;
import org.sweeptally.site.Site;
import org.sweeptally.stream.ClientSettings;
import org.sweeptally.stream.TopicNames;
import org.sweeptally.stream.TopicPlan;
import org.sweeptally.stream.TopicState;
import org.sweeptally.stream.Topics;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;

/** Creates the topics of a site that are missing, and shows how the others are. */
@Command(
        name = "topics",
        mixinStandardHelpOptions = true,
        description = {
            "Creates the topics of a site that are missing, with the right settings, and shows what is there and what"
                    + " differs from what it should be. It never changes a topic that is there.",
            ""
        },
        footer = {"", "Example:", "  sweeptally topics --site site.yaml --bus localhost:9092"})
final class TopicsCommand implements Callable<Integer> {

    private final Terminal terminal;

    @Mixin
    private SiteOption siteOption;

    @Mixin
    private BusOptions busOptions;

    @Option(
            names = "--partitions",
            paramLabel = "N",
            description = "Partitions of each topic that is partitioned by region (default: as many as the region log"
                    + " has; if it is missing too, one a region, at most 12).")
    private Integer partitions;

    @Option(names = "--show", description = "Only show; create nothing.")
    private boolean onlyShow;

    TopicsCommand(Terminal terminal) {
        this.terminal = terminal;
    }

    @Override
    public Integer call() {
        Optional<Site> site = siteOption.read(terminal.err());
        if (site.isEmpty()) {
            return Main.USAGE;
        }
        if (partitions != null && partitions < 1) {
            throw new UsageException("--partitions " + partitions + ": must be 1 or more");
        }
        return run(site.get(), busOptions.clients());
    }

    private int run(Site site, ClientSettings clients) {
        TopicNames names = busOptions.topics(site);
        try (Topics topics = new Topics(clients)) {
            List<TopicPlan> plans = TopicPlan.of(names, partitions(topics, names, site));
            List<TopicPlan> missing = topics.look(plans).stream()
                    .filter(TopicState::isMissing)
                    .map(TopicState::plan)
                    .toList();
            if (!onlyShow) {
                topics.create(missing);
            }
            return show(topics.look(plans), missing);
        }
    }

    private int partitions(Topics topics, TopicNames names, Site site) {
        return partitions != null
                ? partitions
                : topics.partitions(names.regionLog()).orElse(TopicPlan.partitionsFor(site.regions().size()));
    }

    private int show(List<TopicState> states, List<TopicPlan> missing) {
        PrintStream out = terminal.out();
        TextTable table = new TextTable("topic", "partitions", "state", "what it holds");
        boolean asTheyShouldBe = true;
        for (TopicState state : states) {
            List<String> differences = state.differences();
            asTheyShouldBe &= differences.isEmpty();
            boolean created = !onlyShow && missing.contains(state.plan());
            table.row(state.plan().name(), Integer.toString(state.partitions()), word(state, created),
                    state.plan().purpose());
        }
        table.print(out);
        for (TopicState state : states) {
            state.differences().forEach(difference -> out.println(state.plan().name() + ": " + difference));
        }
        return asTheyShouldBe ? Main.DONE : Main.FAILED;
    }

    private static String word(TopicState state, boolean created) {
        if (state.isMissing()) {
            return "missing";
        }
        if (created) {
            return "created";
        }
        return state.differences().isEmpty() ? "right" : "differs";
    }
}
