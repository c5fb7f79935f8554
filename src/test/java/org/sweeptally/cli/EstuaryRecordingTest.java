package org.sweeptally.cli;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import org.junit.jupiter.api.Test;

class EstuaryRecordingTest {

    @Test
    void theFileIsWhatItsGeneratorMakes() throws IOException {
        assertThat(Files.readAllLines(EstuaryRecording.FILE))
                .as("after a change run the generator's main again")
                .isEqualTo(new EstuaryRecording(CliRun.site(EstuaryRecording.SITE)).lines());
    }

    @Test
    void itIsSmallEnoughToComeWithTheProgram() throws IOException {
        assertThat(Files.size(EstuaryRecording.FILE)).isLessThan(200_000);
    }
}
