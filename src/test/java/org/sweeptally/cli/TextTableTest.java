package org.sweeptally.cli;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.ByteArrayOutputStream;
import java.io.PrintStream;
import java.nio.charset.StandardCharsets;
import org.junit.jupiter.api.Test;

class TextTableTest {

    @Test
    void namesAreToTheLeftAndNumbersToTheRight() {
        TextTable table = new TextTable("region", "scans", "found");
        table.row("north", "9", "a bank of fog");
        table.row("south-east", "1,200", "nothing");
        assertThat(printed(table)).isEqualTo("""
                region      scans  found
                north           9  a bank of fog
                south-east  1,200  nothing
                """);
    }

    private static String printed(TextTable table) {
        ByteArrayOutputStream bytes = new ByteArrayOutputStream();
        table.print(new PrintStream(bytes, true, StandardCharsets.UTF_8));
        return bytes.toString(StandardCharsets.UTF_8).replace("\r\n", "\n");
    }
}
