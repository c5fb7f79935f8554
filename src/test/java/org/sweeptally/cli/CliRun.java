package org.sweeptally.cli;

import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.InputStream;
import java.io.PrintStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import org.sweeptally.site.Site;
import org.sweeptally.site.SiteReader;
import org.sweeptally.site.SiteResult;

/** One run of the command line in this process, and what it said. */
record CliRun(int exitCode, String out, String err) {

    static CliRun of(String... args) {
        return withInput(new byte[0], args);
    }

    static CliRun withInput(byte[] in, String... args) {
        return withInput(new ByteArrayInputStream(in), args);
    }

    static CliRun withInput(InputStream in, String... args) {
        ByteArrayOutputStream out = new ByteArrayOutputStream();
        ByteArrayOutputStream err = new ByteArrayOutputStream();
        int exitCode = Main.run(args, in, printer(out), printer(err));
        return new CliRun(exitCode, text(out), text(err));
    }

    static Site site(Path file) {
        if (SiteReader.read(file) instanceof SiteResult.Valid valid) {
            return valid.site();
        }
        throw new IllegalArgumentException("a site with faults: " + file);
    }

    private static PrintStream printer(ByteArrayOutputStream bytes) {
        return new PrintStream(bytes, true, StandardCharsets.UTF_8);
    }

    private static String text(ByteArrayOutputStream bytes) {
        return bytes.toString(StandardCharsets.UTF_8).replace("\r\n", "\n");
    }
}
