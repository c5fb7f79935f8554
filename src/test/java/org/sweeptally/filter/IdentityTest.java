package org.sweeptally.filter;

import static org.assertj.core.api.Assertions.assertThat;

import java.time.Instant;
import java.time.ZoneOffset;
import java.time.format.DateTimeFormatter;
import java.time.temporal.ChronoUnit;
import java.util.Random;
import org.junit.jupiter.api.Test;

class IdentityTest {

    private static final long SECOND = 1_000_000;

    /** Pattern letters by the documentation of {@link DateTimeFormatter}. */
    private static final DateTimeFormatter EXPECTED =
            DateTimeFormatter.ofPattern("yyyyMMdd'T'HHmmss.SSSSSS'Z'").withZone(ZoneOffset.UTC);

    @Test
    void theNameHoldsTheTimeAsAFormatterWritesIt() {
        Random random = new Random(7);
        long first = Instant.parse("0001-01-01T00:00:00Z").getEpochSecond() * SECOND;
        long last = Instant.parse("9999-12-31T23:59:59Z").getEpochSecond() * SECOND + 999_999;
        for (int i = 0; i < 10_000; i++) {
            check(first + (long) (random.nextDouble() * (last - first)));
        }
        for (long micros : new long[] {first, last, 0, -1, 1, 999_999, SECOND, 951_782_400 * SECOND}) {
            check(micros);
        }
    }

    @Test
    void yearsOfMoreThanFourDigitsAreNamedAsBefore() {
        long micros = Instant.parse("+10000-01-01T00:00:00.5Z").getEpochSecond() * SECOND + 500_000;
        assertThat(new Identity("a", micros, 1, 2).text()).isEqualTo("a-+100000101T000000.500000Z-1-2");
    }

    private static void check(long micros) {
        Identity identity = new Identity("north-shore", micros, 0, 31);
        String time = EXPECTED.format(Instant.EPOCH.plus(micros, ChronoUnit.MICROS));
        assertThat(identity.text()).as("at %d", micros).isEqualTo("north-shore-" + time + "-0-31");
        assertThat(Identity.parse(identity.text())).isEqualTo(identity);
    }
}
