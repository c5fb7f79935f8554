package org.sweeptally.stream;

import static org.assertj.core.api.Assertions.assertThat;

import org.apache.kafka.common.errors.TimeoutException;
import org.apache.kafka.streams.errors.StreamsException;
import org.junit.jupiter.api.Test;

/** After which failures of a thread the operator goes on. */
class FailuresTest {

    private final Failures failures = new Failures();

    @Test
    void fiveThreadsAreReplacedAndTheSixthFailureEndsWithOneSentence() {
        StreamsException away = new StreamsException("a thread", new TimeoutException("the bus is away"));
        for (int i = 0; i < 5; i++) {
            assertThat(failures.fatal(away)).as("failure %s", i + 1).isEmpty();
        }
        assertThat(failures.fatal(away)).hasValue("5 failed threads were replaced within 10 minutes, and one more"
                + " failed: TimeoutException: the bus is away");
    }

    @Test
    void whatAnotherThreadWouldOnlyMeetAgainEndsItAtOnce() {
        assertThat(failures.fatal(new StreamsException("a thread", new OperatorStoppedException("the sentence"))))
                .hasValue("the sentence");
        assertThat(failures.fatal(new StreamsException("a thread", new OutOfMemoryError("heap")))).isPresent();
    }
}
