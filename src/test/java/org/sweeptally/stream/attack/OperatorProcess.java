package org.sweeptally.stream.attack;

import java.io.BufferedReader;
import java.io.IOException;
import java.io.InputStreamReader;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.TimeUnit;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import org.sweeptally.stream.ForgetfulOperator;

/** The operator as users run it: the command {@code run} in a virtual machine of its own. */
final class OperatorProcess implements AutoCloseable {

    private static final Pattern BACK = Pattern.compile(" is back: .*, (\\d+) of \\d+ entries applied again");

    private final Process process;
    private final List<String> lines = new ArrayList<>();
    private final Thread reader;

    private OperatorProcess(Process process) {
        this.process = process;
        this.reader = new Thread(this::read, "operator-" + process.pid());
        this.reader.setDaemon(true);
        this.reader.start();
    }

    /** @param further options of the command */
    static OperatorProcess start(AttackedSite site, Path siteFile, Path stateFolder, String... further) {
        return start("org.sweeptally.cli.Main", site, siteFile, stateFolder, further);
    }

    /** As above, but broken: it forgets the tail of its log. */
    static OperatorProcess startForgetful(AttackedSite site, Path siteFile, Path stateFolder) {
        return start(ForgetfulOperator.class.getName(), site, siteFile, stateFolder);
    }

    private static OperatorProcess start(
            String program, AttackedSite site, Path siteFile, Path stateFolder, String... further) {
        List<String> command = new ArrayList<>(List.of(
                Path.of(System.getProperty("java.home"), "bin", "java").toString(),
                "-Xmx384m", "-XX:TieredStopAtLevel=1", "-XX:+UseSerialGC",
                "-Djava.io.tmpdir=" + temporary(siteFile),
                "-cp", System.getProperty("java.class.path"), program, "run",
                "--site", siteFile.toString(), "--bus", Bus.address(), "--detections", site.names().detections(),
                "--state", stateFolder.toString()));
        Bus.SHORT_TIMES.forEach((name, value) -> command.addAll(List.of("--kafka", name + "=" + value)));
        command.addAll(List.of(further));
        try {
            return new OperatorProcess(new ProcessBuilder(command).redirectErrorStream(true).start());
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    /** A killed process leaves its unpacked libraries behind; beside the site file they go when the test has ended. */
    private static Path temporary(Path siteFile) {
        try {
            return Files.createDirectories(siteFile.resolveSibling("temporary"));
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    private void read() {
        try (BufferedReader in =
                new BufferedReader(new InputStreamReader(process.getInputStream(), StandardCharsets.UTF_8))) {
            for (String line = in.readLine(); line != null; line = in.readLine()) {
                synchronized (lines) {
                    lines.add(line);
                }
            }
        } catch (IOException e) {
            // The process has been killed in the middle of a line.
        }
    }

    /** What it has said so far, on both of its outputs, a line each. */
    List<String> said() {
        synchronized (lines) {
            return List.copyOf(lines);
        }
    }

    /** How many partitions it has brought back so far. */
    int recoveries() {
        return (int) said().stream().filter(line -> BACK.matcher(line).find()).count();
    }

    /** How many entries it has applied again to bring them back. */
    long entriesAgain() {
        return said().stream()
                .map(BACK::matcher)
                .filter(Matcher::find)
                .mapToLong(found -> Long.parseLong(found.group(1)))
                .sum();
    }

    /** Whether its threads have taken their partitions at least once. */
    boolean hasRun() {
        return said().stream().anyMatch(line -> line.endsWith(" running"));
    }

    /** SIGKILL. */
    void kill() throws InterruptedException {
        process.destroyForcibly();
        process.waitFor();
        reader.join();
    }

    /** SIGSTOP: it lives on, and does nothing until it is woken. */
    void freeze() throws InterruptedException {
        signal("STOP");
    }

    /** SIGCONT. */
    void wake() throws InterruptedException {
        signal("CONT");
    }

    private void signal(String name) throws InterruptedException {
        try {
            int code = new ProcessBuilder("kill", "-" + name, Long.toString(process.pid())).start().waitFor();
            if (code != 0) {
                throw new IllegalStateException("kill -" + name + " ended with code " + code);
            }
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    /** SIGTERM; returns the exit code. */
    int stop() throws InterruptedException {
        // Not destroy(), which would close the pipe on which it still has something to say.
        signal("TERM");
        return exitCode(Duration.ofSeconds(40));
    }

    /** Waits until it has ended by itself. */
    int exitCode(Duration atMost) throws InterruptedException {
        if (!process.waitFor(atMost.toMillis(), TimeUnit.MILLISECONDS)) {
            throw new AssertionError("the operator has not ended within " + atMost + "; it said\n" + text());
        }
        reader.join();
        return process.exitValue();
    }

    boolean isAlive() {
        return process.isAlive();
    }

    String text() {
        return String.join("\n", said());
    }

    @Override
    public void close() {
        process.destroyForcibly();
    }
}
