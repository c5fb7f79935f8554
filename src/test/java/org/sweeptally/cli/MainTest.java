package org.sweeptally.cli;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.InputStream;
import java.io.PrintStream;
import java.nio.file.Files;
import java.nio.file.Path;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class MainTest {

    private static final String SITE = EstuaryRecording.SITE.toString();
    private static final String PARTS = EstuaryRecording.FILE.toString();

    @TempDir
    private Path folder;

    @Test
    void helpTellsWhatItIsForHowToCallItAndWhatItIsNotFor() throws IOException {
        CliRun run = CliRun.of("--help");
        assertThat(run.exitCode()).isZero();
        assertThat(run.err()).isEmpty();
        Golden.assertIs("help.txt", run.out());
    }

    @Test
    void everyCommandHasHelpWithAnExample() throws IOException {
        Golden.assertIs("help-check.txt", CliRun.of("check", "--help").out());
        Golden.assertIs("help-demo.txt", CliRun.of("demo", "--help").out());
        Golden.assertIs("help-dry-run.txt", CliRun.of("dry-run", "--help").out());
    }

    @Test
    void aCallWithoutACommandIsAUsageError() {
        CliRun run = CliRun.of();
        assertThat(run.exitCode()).isEqualTo(2);
        assertThat(run.out()).isEmpty();
        assertThat(run.err())
                .startsWith("a command is missing: check, dry-run, demo, topics, run, publish, replay or archive\n")
                .contains("Usage: sweeptally");
    }

    @ParameterizedTest
    @ValueSource(strings = {
        "sail", "check", "check --site", "check --sight x", "dry-run --site x --parts y", "dry-run --out x --parts y"
    })
    void aCallThatCannotBeMeantIsAUsageErrorWithoutAStackTrace(String call) {
        CliRun run = CliRun.of(call.split(" "));
        assertThat(run.exitCode()).isEqualTo(2);
        assertThat(run.out()).isEmpty();
        assertThat(run.err()).contains("Usage: sweeptally").doesNotContain("\tat ").doesNotContain("Exception");
    }

    @Test
    void aSiteFileThatIsNotThereIsAConfigurationError() {
        String missing = folder.resolve("site.yaml").toString();
        CliRun check = CliRun.of("check", "--site", missing);
        CliRun dryRun = CliRun.of("dry-run", "--site", missing, "--parts", PARTS, "--out", folder.toString());
        assertThat(check.exitCode()).isEqualTo(2);
        assertThat(dryRun.exitCode()).isEqualTo(2);
        assertThat(check.err()).isEqualTo(dryRun.err()).contains("site.yaml").contains("does not exist");
        assertThat(check.err().lines()).hasSize(1);
        assertThat(folder).isEmptyDirectory();
    }

    @Test
    void aRecordingThatIsNotThereFailsInOneSentenceAndLeavesNoFiles() {
        Path out = folder.resolve("picture");
        CliRun run = CliRun.of(
                "dry-run", "--site", SITE, "--parts", folder.resolve("no.ndjson").toString(), "--out", out.toString());
        assertThat(run.exitCode()).isEqualTo(1);
        assertThat(run.err()).isEqualTo("sweeptally: " + folder.resolve("no.ndjson") + ": there is no such file\n");
        assertThat(out).doesNotExist();
    }

    @Test
    void aFolderInPlaceOfARecordingFailsInOneSentence() {
        CliRun run = CliRun.of("dry-run", "--site", SITE, "--parts", folder.toString(), "--out", folder.toString());
        assertThat(run.exitCode()).isEqualTo(1);
        assertThat(run.err()).isEqualTo("sweeptally: " + folder + ": is a folder, not a file of parts\n");
    }

    @Test
    void aFileInPlaceOfTheFolderForRecordsFailsInOneSentence() throws IOException {
        Path file = Files.writeString(folder.resolve("picture"), "mine");
        CliRun run = CliRun.of("dry-run", "--site", SITE, "--parts", PARTS, "--out", file.toString());
        assertThat(run.exitCode()).isEqualTo(1);
        assertThat(run.err())
                .isEqualTo("sweeptally: " + file + ": is a file, and a folder is needed for the records\n");
        assertThat(file).hasContent("mine");
    }

    @Test
    void anInputThatBreaksOffFailsInOneSentence() {
        CliRun run = CliRun.withInput(throwing(new IOException("the line is dead")), "dry-run", "--site", SITE,
                "--parts", "-", "--out", folder.toString());
        assertThat(run.exitCode()).isEqualTo(1);
        assertThat(run.err()).isEqualTo(
                "sweeptally: reading standard input or writing to " + folder + " failed: the line is dead\n");
    }

    @Test
    void aFaultOfTheProgramItselfIsNamedInOneLine() {
        PrintStream standardError = System.err;
        ByteArrayOutputStream log = new ByteArrayOutputStream();
        System.setErr(new PrintStream(log, true));
        CliRun run;
        try {
            run = CliRun.withInput(throwing(new IllegalStateException("impossible")), "dry-run", "--site", SITE,
                    "--parts", "-", "--out", folder.toString());
        } finally {
            System.setErr(standardError);
        }
        assertThat(run.exitCode()).isEqualTo(1);
        assertThat(run.err()).contains("a fault of this program").contains("impossible").contains("the log");
        assertThat(run.err().lines()).hasSize(1);
        assertThat(log.toString()).contains("IllegalStateException: impossible").contains("at org.sweeptally.");
    }

    private static InputStream throwing(Exception cause) {
        return new InputStream() {
            @Override
            public int read() throws IOException {
                if (cause instanceof IOException e) {
                    throw e;
                }
                throw (RuntimeException) cause;
            }
        };
    }

    @Test
    void aRecordingIsNeverOverwrittenByTheRecordsMadeOfIt() throws IOException {
        Path parts = Files.copy(EstuaryRecording.FILE, folder.resolve("tracks.ndjson"));
        CliRun run = CliRun.of(
                "dry-run", "--site", SITE, "--parts", parts.toString(), "--out", folder.resolve(".").toString());
        assertThat(run.exitCode()).isEqualTo(1);
        assertThat(run.err()).contains(parts + ": would be overwritten");
        assertThat(parts).hasSameBinaryContentAs(EstuaryRecording.FILE);
    }
}
