package org.sweeptally.stream.attack;

import java.io.BufferedReader;
import java.io.IOException;
import java.io.InputStreamReader;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.TimeUnit;

/** The operator as users run it: the command {@code run} in a virtual machine of its own. */
final class OperatorProcess implements AutoCloseable {

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
        List<String> command = new ArrayList<>(List.of(
                Path.of(System.getProperty("java.home"), "bin", "java").toString(),
                "-Xmx384m", "-XX:TieredStopAtLevel=1", "-XX:+UseSerialGC",
                "-cp", System.getProperty("java.class.path"), "org.sweeptally.cli.Main", "run",
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

    boolean hasSaid(String words) {
        return said().stream().anyMatch(line -> line.contains(words));
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
