package org.sweeptally.cli;

import java.io.InputStream;
import java.io.PrintStream;
import java.io.PrintWriter;
import java.nio.charset.StandardCharsets;
import org.slf4j.Logger;
import org.slf4j.LoggerFactory;
import org.sweeptally.replay.ReplayFailedException;
import org.sweeptally.stream.OperatorStoppedException;
import org.sweeptally.stream.SettingsRefusedException;
import picocli.CommandLine;
import picocli.CommandLine.Command;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.ParameterException;
import picocli.CommandLine.Spec;

/** The command line: 0 done, 1 the work failed, 2 usage or configuration. */
@Command(
        name = "sweeptally",
        mixinStandardHelpOptions = true,
        versionProvider = Main.Version.class,
        description = {
            "Turns the detections of many sensors into one picture: which objects are in each surveillance region,"
                    + " where, since when, how surely, and how many.",
            ""
        },
        footer = {
            "",
            "Examples:",
            "  sweeptally check --site site.yaml",
            "  sweeptally dry-run --site site.yaml --parts parts.ndjson --out picture",
            "  sweeptally topics --site site.yaml --bus localhost:9092",
            "  sweeptally run --site site.yaml --bus localhost:9092",
            "",
            "Caution: the picture is an estimate. It is no aid to navigation or collision avoidance by itself;",
            "local rules and licensed practice come first."
        },
        subcommands = {
            CheckCommand.class, DryRunCommand.class, DemoCommand.class, TopicsCommand.class, RunCommand.class,
            PublishCommand.class, ReplayCommand.class, ArchiveCommand.class
        })
public final class Main implements Runnable {

    private static final Logger LOG = LoggerFactory.getLogger(Main.class);

    static final int DONE = 0;
    static final int FAILED = 1;
    static final int USAGE = 2;

    private final Terminal terminal;

    @Spec
    private CommandSpec spec;

    private Main(Terminal terminal) {
        this.terminal = terminal;
    }

    public static void main(String[] args) {
        boolean watched = System.console() != null;
        System.exit(run(args, new Terminal(System.in, System.out, System.err, watched)));
    }

    /** Runs a command and returns its exit code; nothing else ends the process. */
    public static int run(String[] args, InputStream in, PrintStream out, PrintStream err) {
        return run(args, new Terminal(in, out, err, false));
    }

    private static int run(String[] args, Terminal terminal) {
        CommandLine line = new CommandLine(new Main(terminal), new Factory(terminal));
        line.setOut(new PrintWriter(terminal.out(), true, StandardCharsets.UTF_8));
        line.setErr(new PrintWriter(terminal.err(), true, StandardCharsets.UTF_8));
        line.setExecutionExceptionHandler((e, command, parsed) -> failed(e, terminal));
        line.setUsageHelpWidth(100);
        return line.execute(args);
    }

    /** What went wrong in a sentence; whatever carries none is a fault of the program. */
    private static int failed(Exception e, Terminal terminal) {
        boolean refused = e instanceof UsageException || e instanceof SettingsRefusedException;
        if (refused
                || e instanceof CommandFailedException
                || e instanceof OperatorStoppedException
                || e instanceof ReplayFailedException) {
            terminal.err().println("sweeptally: " + e.getMessage());
            return refused ? USAGE : FAILED;
        }
        terminal.err().println("sweeptally: a fault of this program, not of its input: " + e
                + " (the log, on standard error, has the details)");
        LOG.error("a fault of this program", e);
        return FAILED;
    }

    @Override
    public void run() {
        throw new ParameterException(
                spec.commandLine(), "a command is missing: check, dry-run, demo, topics, run, publish, replay or archive");
    }

    /** Gives every command its terminal. */
    private record Factory(Terminal terminal) implements CommandLine.IFactory {
        @Override
        public <K> K create(Class<K> type) throws Exception {
            if (type == CheckCommand.class) {
                return type.cast(new CheckCommand(terminal));
            }
            if (type == DryRunCommand.class) {
                return type.cast(new DryRunCommand(terminal));
            }
            if (type == DemoCommand.class) {
                return type.cast(new DemoCommand(terminal));
            }
            if (type == TopicsCommand.class) {
                return type.cast(new TopicsCommand(terminal));
            }
            if (type == RunCommand.class) {
                return type.cast(new RunCommand(terminal));
            }
            if (type == PublishCommand.class) {
                return type.cast(new PublishCommand(terminal));
            }
            if (type == ReplayCommand.class) {
                return type.cast(new ReplayCommand(terminal));
            }
            if (type == ArchiveCommand.class) {
                return type.cast(new ArchiveCommand(terminal));
            }
            return CommandLine.defaultFactory().create(type);
        }
    }

    /** Version of the program, from the jar that it runs from. */
    static final class Version implements CommandLine.IVersionProvider {
        @Override
        public String[] getVersion() {
            String version = Main.class.getPackage().getImplementationVersion();
            return new String[] {"sweeptally " + (version == null ? "(not packaged)" : version)};
        }
    }
}
