package org.sweeptally.cli;

import java.nio.file.Path;
import java.time.LocalTime;
import java.time.temporal.ChronoUnit;
import java.util.Optional;
import java.util.concurrent.Callable;
import org.sweeptally.site.Site;
import org.sweeptally.stream.Operator;
import org.sweeptally.stream.OperatorSettings;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;

/** The operator against a bus that is there. */
@Command(
        name = "run",
        mixinStandardHelpOptions = true,
        description = {
            "Runs the operator of a site beside a bus: reads the sensors' parts, keeps the picture of every region, and"
                    + " publishes it. Says what it does, and runs until it is stopped (SIGTERM, Ctrl-C).",
            "",
            "Several processes with the same site share the regions. The topics have to be there: see topics.",
            ""
        },
        footer = {
            "",
            "Exit codes: 0 stopped when asked to, 1 could not begin or go on, 2 site file or options refused.",
            "",
            "Example:",
            "  sweeptally run --site site.yaml --bus localhost:9092 --state /var/lib/sweeptally"
        })
final class RunCommand implements Callable<Integer> {

    private final Terminal terminal;

    @Mixin
    private SiteOption siteOption;

    @Mixin
    private BusOptions busOptions;

    @Option(
            names = "--state",
            paramLabel = "DIR",
            description = "Folder for the operator's stores, best on a disk of its own: with the same folder after a"
                    + " crash, it is back sooner (default: ./sweeptally-state). One process a folder.")
    private Path state = Path.of("sweeptally-state");

    RunCommand(Terminal terminal) {
        this.terminal = terminal;
    }

    @Override
    public Integer call() throws InterruptedException {
        Optional<Site> site = siteOption.read(terminal.err());
        if (site.isEmpty()) {
            return Main.USAGE;
        }
        return run(new Operator(
                new OperatorSettings(site.get(), busOptions.topics(site.get()), busOptions.clients(), state),
                this::say));
    }

    private int run(Operator operator) throws InterruptedException {
        Thread hook = new Thread(() -> stopAsked(operator), "stop");
        Runtime.getRuntime().addShutdownHook(hook);
        try (operator) {
            operator.start();
            Optional<String> failure = operator.await();
            if (failure.isPresent()) {
                throw new CommandFailedException(failure.get());
            }
            return Main.DONE;
        } finally {
            leave(hook);
        }
    }

    /** Without this the virtual machine would end with a signal's code although all went well. */
    private void stopAsked(Operator operator) {
        say("asked to stop");
        operator.close();
        Optional<String> failure = operator.failure();
        say(failure.orElse("stopped"));
        Runtime.getRuntime().halt(failure.isPresent() ? Main.FAILED : Main.DONE);
    }

    private static void leave(Thread hook) {
        try {
            Runtime.getRuntime().removeShutdownHook(hook);
        } catch (IllegalStateException e) {
            // The virtual machine is ending already, and the hook is what ends it.
        }
    }

    private void say(String sentence) {
        terminal.out().println(LocalTime.now().truncatedTo(ChronoUnit.MILLIS) + " " + sentence);
        terminal.out().flush();
    }
}
