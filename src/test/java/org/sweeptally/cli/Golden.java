package org.sweeptally.cli;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;

/**
 * Output as it was once read and found right, in files under src/test/resources/cli. With -Dsweeptally.golden=write the
 * files are written anew: read the difference before it is committed.
 */
final class Golden {

    private static final Path FOLDER = Path.of("src/test/resources/cli");

    private Golden() {}

    static void assertIs(String file, String text) throws IOException {
        Path golden = FOLDER.resolve(file);
        if ("write".equals(System.getProperty("sweeptally.golden"))) {
            Files.writeString(golden, text);
        }
        assertThat(text).as("the text in %s", golden).isEqualTo(Files.readString(golden));
    }
}
