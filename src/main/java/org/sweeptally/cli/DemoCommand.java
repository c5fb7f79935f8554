package org.sweeptally.cli;

import com.fasterxml.jackson.databind.ObjectMapper;
import com.fasterxml.jackson.databind.SerializationFeature;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.concurrent.Callable;
import java.util.concurrent.CountDownLatch;
import java.util.concurrent.TimeUnit;
import org.sweeptally.demo.Demo;
import org.sweeptally.demo.DemoReport;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;

/** The operator with a bus and a world of its own, for whoever wants to see it work. */
@Command(
        name = "demo",
        mixinStandardHelpOptions = true,
        description = {
            "Shows the operator at work, with nothing to set up: starts a Kafka broker in this process, feeds it an"
                    + " invented estuary (two regions, three shore sensors, ferries, ships, small craft, a fleet that"
                    + " sails close together, and much that is not there), runs the operator, reads what it publishes,"
                    + " and compares with the truth.",
            "",
            "Ends by itself within two minutes, and leaves nothing behind.",
            ""
        },
        footer = {"", "Example:", "  sweeptally demo --seed 7 --report report.json"})
final class DemoCommand implements Callable<Integer> {

    private static final long STOPPING_SECONDS = 60;

    private final Terminal terminal;
    private volatile boolean stopped;
    private volatile int exitCode = Main.FAILED;

    @Option(
            names = "--seed",
            paramLabel = "NUMBER",
            description = "Another estuary for every number; the same one for the same (default: ${DEFAULT-VALUE}).",
            defaultValue = "1")
    private long seed;

    @Option(names = "--report", paramLabel = "FILE", description = "Also writes the result to a file, as JSON.")
    private Path report;

    @Option(
            names = "--stay",
            description = "Keeps estuary and operator running, in real time, until stopped (Ctrl-C); the broker can be"
                    + " subscribed to meanwhile.")
    private boolean stay;

    DemoCommand(Terminal terminal) {
        this.terminal = terminal;
    }

    @Override
    public Integer call() throws InterruptedException {
        checkReport();
        CountDownLatch done = new CountDownLatch(1);
        Thread hook = new Thread(() -> stopAsked(done), "stop");
        Runtime.getRuntime().addShutdownHook(hook);
        try {
            DemoReport result = run(new Demo(Files.createTempDirectory("sweeptally-demo"), seed, new Listener()));
            terminal.endProgress();
            new DemoSummary(result).print(terminal.out());
            write(result);
            exitCode = Main.DONE;
            return exitCode;
        } catch (IOException e) {
            throw new CommandFailedException("the demo cannot have its files: " + e.getMessage());
        } catch (NoClassDefFoundError e) {
            throw new CommandFailedException("the demo's broker is not here (" + e.getMessage() + "): the operator does"
                    + " without it, so its libraries lie apart; run java -cp"
                    + " 'sweeptally.jar:lib/*:demo-lib/*' org.sweeptally.cli.Main demo, or mvn exec:java");
        } finally {
            terminal.endProgress();
            done.countDown();
            leave(hook);
        }
    }

    /** Or the work would be done for nothing. */
    private void checkReport() {
        Path parent = report == null ? null : report.toAbsolutePath().getParent();
        if (parent != null && !Files.isDirectory(parent)) {
            throw new CommandFailedException(report + ": cannot be written, there is no folder " + parent);
        }
        if (report != null && Files.isDirectory(report)) {
            throw new CommandFailedException(report + ": is a folder, not a file for the report");
        }
    }

    private DemoReport run(Demo demo) throws IOException, InterruptedException {
        return stay ? demo.inRealTime(() -> !stopped) : demo.untilItsEnd(Demo.USUAL_SECONDS, () -> !stopped);
    }

    private void write(DemoReport result) throws IOException {
        if (report != null) {
            new ObjectMapper().enable(SerializationFeature.INDENT_OUTPUT).writeValue(report.toFile(), result);
            terminal.out().println("The report is in " + report + ".");
        }
    }

    /**
     * Lets the broker's folder be deleted and the table be printed before the virtual machine ends. To be stopped is
     * the proper end of a demo that stays: without the halt it would end with a signal's code.
     */
    private void stopAsked(CountDownLatch done) {
        stopped = true;
        try {
            done.await(STOPPING_SECONDS, TimeUnit.SECONDS);
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
        }
        if (stay && exitCode == Main.DONE) {
            terminal.out().flush();
            Runtime.getRuntime().halt(exitCode);
        }
    }

    private static void leave(Thread hook) {
        try {
            Runtime.getRuntime().removeShutdownHook(hook);
        } catch (IllegalStateException e) {
            // The virtual machine is ending already, and the hook waits for this.
        }
    }

    private final class Listener implements Demo.Listener {
        @Override
        public void says(String sentence) {
            terminal.endProgress();
            terminal.out().println(sentence);
            terminal.out().flush();
        }

        @Override
        public void progress(String text) {
            terminal.progress(text);
        }
    }
}
