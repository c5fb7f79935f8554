package org.sweeptally.region;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;

/** The same log gives the same bytes, whoever turns the code into instructions. */
class DeterminismTest {

    @Test
    void theInterpreterAndTheCompilersAgree() throws Exception {
        String here = LogDigest.digest();
        assertThat(inChild("-Xint")).as("interpreter").isEqualTo(here);
        assertThat(inChild("-XX:TieredStopAtLevel=1")).as("quick compiler").isEqualTo(here);
        assertThat(inChild("-XX:-TieredCompilation")).as("thorough compiler").isEqualTo(here);
    }

    private static String inChild(String... options) throws IOException, InterruptedException {
        List<String> command = new ArrayList<>();
        command.add(Path.of(System.getProperty("java.home"), "bin", "java").toString());
        command.addAll(List.of(options));
        command.addAll(List.of("-cp", System.getProperty("java.class.path"), LogDigest.class.getName()));
        Process child = new ProcessBuilder(command).redirectError(ProcessBuilder.Redirect.INHERIT).start();
        String printed = new String(child.getInputStream().readAllBytes(), StandardCharsets.UTF_8);
        assertThat(child.waitFor()).as("exit code with %s", List.of(options)).isZero();
        return printed.strip();
    }
}
