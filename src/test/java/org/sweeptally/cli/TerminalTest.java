package org.sweeptally.cli;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.ByteArrayOutputStream;
import java.io.InputStream;
import java.io.PrintStream;
import java.nio.charset.StandardCharsets;
import org.junit.jupiter.api.Test;

class TerminalTest {

    private final ByteArrayOutputStream out = new ByteArrayOutputStream();
    private final ByteArrayOutputStream err = new ByteArrayOutputStream();

    @Test
    void progressIsShownOnStandardErrorAndClearedAtTheEnd() {
        Terminal terminal = terminal(true);
        terminal.progress("200 lines read");
        terminal.endProgress();
        assertThat(err.toString(StandardCharsets.UTF_8)).contains("200 lines read").endsWith("\r\u001b[K");
        assertThat(out.size()).isZero();
    }

    @Test
    void whereNobodyWatchesThereIsNoProgress() {
        terminal(false).progress("200 lines read");
        terminal(false).endProgress();
        assertThat(err.size()).isZero();
    }

    private Terminal terminal(boolean watched) {
        return new Terminal(InputStream.nullInputStream(), new PrintStream(out), new PrintStream(err), watched);
    }
}
