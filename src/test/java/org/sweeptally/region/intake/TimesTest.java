package org.sweeptally.region.intake;

import static org.assertj.core.api.Assertions.assertThat;

import java.time.Instant;
import java.time.temporal.ChronoUnit;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class TimesTest {

    @Test
    void aTimeIsWrittenInUtcWithSixDigits() {
        assertThat(Times.text(IntakeFixture.SCAN_TIME)).isEqualTo("2031-05-01T04:00:42.500000Z");
        assertThat(Times.text(0)).isEqualTo("1970-01-01T00:00:00.000000Z");
        assertThat(Times.text(-1)).isEqualTo("1969-12-31T23:59:59.999999Z");
        assertThat(Times.text(Long.MAX_VALUE)).startsWith("+294247-01-10T04:00:54.775807Z");
    }

    @Test
    void whatIsWrittenIsReadAgain() {
        Random random = new Random(21);
        for (int i = 0; i < 1_000; i++) {
            long micros = (long) (random.nextDouble() * Times.LATEST_MICROS);
            assertThat(Times.parse(Times.text(micros))).as("seed 21, case %d", i).hasValue(micros);
            assertThat(Times.text(micros).substring(0, 19)).isEqualTo(
                    Instant.EPOCH.plus(micros, ChronoUnit.MICROS).toString().substring(0, 19));
        }
    }

    @Test
    void offsetsAndFewerDigitsAreRead() {
        long expected = IntakeFixture.SCAN_TIME;
        assertThat(Times.parse("2031-05-01T04:00:42.5Z")).hasValue(expected);
        assertThat(Times.parse("2031-05-01T06:00:42.50+02:00")).hasValue(expected);
        assertThat(Times.parse("2031-04-30T23:30:42,5-04:30")).hasValue(expected);
        assertThat(Times.parse("2031-05-01T04:00:42Z")).hasValue(expected - 500_000);
    }

    @Test
    void digitsBeyondTheSixthAreCutOffAndNotRounded() {
        assertThat(Times.parse("2031-05-01T04:00:42.4999999Z")).hasValue(IntakeFixture.SCAN_TIME - 1);
        assertThat(Times.parse("2031-05-01T04:00:42.500000999999Z")).hasValue(IntakeFixture.SCAN_TIME);
    }

    @ParameterizedTest
    @ValueSource(strings = {
        "", "now", "2031-05-01", "2031-05-01T04:00:42", "2031-05-01T04:00Z", "2031-05-01 04:00:42Z",
        "2031-13-01T04:00:42Z", "2031-02-29T04:00:42Z", "2031-05-01T24:00:00Z", "2031-05-01T04:00:60Z",
        "2031-05-01T04:00:42.Z", "2031-05-01T04:00:42+0200", "2031-05-01T04:00:42+19:00", "1935374442.5",
        "2031-05-01T04:00:42.5Z ", "+2031-05-01T04:00:42Z"
    })
    void whatIsNoTimeIsNotGuessed(String text) {
        assertThat(Times.parse(text)).isEmpty();
    }

    @Test
    void theYears1970To2199ArePlausible() {
        assertThat(Times.plausible(Times.parse("1970-01-01T00:00:00Z").getAsLong())).isTrue();
        assertThat(Times.plausible(Times.parse("1969-12-31T23:59:59.999999Z").getAsLong())).isFalse();
        assertThat(Times.plausible(Times.parse("2199-12-31T23:59:59.999999Z").getAsLong())).isTrue();
        assertThat(Times.plausible(Times.parse("2200-01-01T00:00:00Z").getAsLong())).isFalse();
    }
}
