package org.sweeptally.cli;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.OptionalLong;
import org.junit.jupiter.api.Test;

class FileClockTest {

    private static final long SECOND = 1_000_000;

    private final FileClock clock = new FileClock(60);

    @Test
    void itStrikesFirstAtTheFirstPartAndThenOnceASecond() {
        assertThat(hear("a", 100)).isEqualTo(at(100));
        assertThat(clock.hear("a", 100 * SECOND + SECOND - 1)).isEmpty();
        assertThat(hear("b", 101)).isEqualTo(at(101));
    }

    @Test
    void itNeverGoesBack() {
        hear("a", 100);
        assertThat(hear("b", 90)).isEmpty();
        assertThat(hear("b", 100.5)).isEmpty();
        assertThat(hear("b", 101)).isEqualTo(at(101));
    }

    @Test
    void aSensorThatIsAnHourAheadOfOthersIsNotBelieved() {
        hear("a", 100);
        hear("b", 101);
        assertThat(hear("b", 3700)).isEmpty();
        assertThat(hear("b", 3703)).isEmpty();
        assertThat(hear("a", 102.5)).isEqualTo(at(102.5));
    }

    @Test
    void whatTwoSensorsSayIsBelieved() {
        hear("a", 100);
        hear("b", 101);
        assertThat(hear("b", 3700)).isEmpty();
        assertThat(hear("a", 3701)).isEqualTo(at(3701)); // the recording has a gap
    }

    @Test
    void aGapInTheRecordingOfTheOnlySensorIsBelieved() {
        hear("a", 100);
        assertThat(hear("a", 3700)).isEqualTo(at(3700));
    }

    private OptionalLong hear(String sensor, double seconds) {
        return clock.hear(sensor, Math.round(seconds * SECOND));
    }

    private static OptionalLong at(double seconds) {
        return OptionalLong.of(Math.round(seconds * SECOND));
    }
}
