package org.sweeptally.stream;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.TimeUnit;
import org.sweeptally.site.EffectiveSettings;
import org.sweeptally.site.Site;

/** The command run in a process of its own, which may be killed. */
final class OperatorProcess implements AutoCloseable {

    private final Process process;
    private final Path output;

    private OperatorProcess(Process process, Path output) {
        this.process = process;
        this.output = output;
    }

    static OperatorProcess start(Site site, Path folder, String name) throws IOException {
        return start(site, folder, name, classPath());
    }

    /** The class path of the tests. */
    static String classPath() {
        return System.getProperty("surefire.test.class.path", System.getProperty("java.class.path"));
    }

    static OperatorProcess start(Site site, Path folder, String name, String classPath) throws IOException {
        Path siteFile = Files.writeString(folder.resolve(name + ".yaml"), EffectiveSettings.text(site));
        Path output = folder.resolve(name + ".txt");
        List<String> command = new ArrayList<>(List.of(
                Path.of(System.getProperty("java.home"), "bin", "java").toString(),
                "-Xmx512m", "-XX:TieredStopAtLevel=1", "-XX:+UseSerialGC", "-cp", classPath,
                "org.sweeptally.cli.Main", "run",
                "--site", siteFile.toString(),
                "--bus", TestBus.address(),
                "--detections", TestBus.names(site).detections(),
                "--state", folder.resolve(name + "-state").toString(),
                "--kafka", "consumer.session.timeout.ms=1500",
                "--kafka", "consumer.heartbeat.interval.ms=400",
                "--kafka", "producer.transaction.timeout.ms=4000"));
        Process process = new ProcessBuilder(command)
                .redirectErrorStream(true)
                .redirectOutput(ProcessBuilder.Redirect.appendTo(output.toFile()))
                .start();
        return new OperatorProcess(process, output);
    }

    /** SIGKILL. */
    void kill() throws InterruptedException {
        process.destroyForcibly().waitFor();
    }

    /** SIGTERM; the exit code. */
    int stop() throws InterruptedException {
        process.destroy();
        if (!process.waitFor(40, TimeUnit.SECONDS)) {
            throw new AssertionError("the operator did not stop: " + said());
        }
        return process.exitValue();
    }

    boolean isAlive() {
        return process.isAlive();
    }

    /** All that it and those before it under its name have said. */
    String said() {
        try {
            return Files.readString(output);
        } catch (IOException e) {
            return "";
        }
    }

    @Override
    public void close() {
        process.destroyForcibly();
    }
}
