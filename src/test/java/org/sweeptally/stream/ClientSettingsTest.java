package org.sweeptally.stream;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatCode;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.Map;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** What may be said to Kafka, and what is said to it. */
class ClientSettingsTest {

    @ParameterizedTest
    @CsvSource(delimiter = '|', value = {
        "processing.guarantee | at_least_once | only exactly_once_v2 is allowed",
        "processing.exception.handler | x.Y | would part the picture from its log",
        "isolation.level | read_uncommitted | only read_committed is allowed",
        "main.consumer.isolation.level | read_uncommitted | only read_committed is allowed",
        "state.dir | /tmp/x | --state says it",
        "application.id | x | the site's name makes it",
        "producer.transactional.id | x | every writer has its own",
        "commit.interval.ms | soon | commit.interval.ms",
        "commit.interval.ms | 60000 | transaction.timeout.ms",
        "producer.transaction.timeout.ms | long | transaction.timeout.ms",
        "producer.acks | 1 | acks",
        "max.poll.records | -3 | max.poll.records",
        "security.protocol | SECRET | security.protocol",
    })
    void whatCannotBeIsRefusedBeforeAnythingBegins(String name, String value, String words) {
        assertThatThrownBy(() -> new ClientSettings(Map.of(name, value)))
                .isInstanceOf(SettingsRefusedException.class)
                .hasMessageContaining(words);
    }

    @Test
    void otherPropertiesGoWhereTheyBelong() {
        ClientSettings clients = new ClientSettings(Map.of(
                "num.stream.threads", "3", "client.rack", "a", "producer.linger.ms", "7", "isolation.level",
                "read_committed"));
        assertThat(clients.streams("an-id", "a-folder")).containsEntry("num.stream.threads", "3");
        assertThat(clients.consumer("c")).containsEntry("client.rack", "a").doesNotContainKey("num.stream.threads");
        assertThat(clients.producer("p")).containsEntry("linger.ms", "7");
        assertThatCode(() -> new ClientSettings(Map.of("group.protocol", "streams"))).doesNotThrowAnyException();
    }

    /** Or a second batch might be taken by a broker that has turned the first one away. */
    @Test
    void oneRequestOfAProducerIsUnderWayAtATime() {
        ClientSettings clients = new ClientSettings(Map.of("max.in.flight.requests.per.connection", "5"));
        assertThat(clients.producer("p"))
                .containsEntry("max.in.flight.requests.per.connection", "1")
                .containsEntry("enable.idempotence", "true");
    }
}
