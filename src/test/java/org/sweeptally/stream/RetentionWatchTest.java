package org.sweeptally.stream;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import org.apache.kafka.clients.consumer.MockConsumer;
import org.apache.kafka.common.TopicPartition;
import org.junit.jupiter.api.Test;

/** That the region log reaches back far enough is watched. */
class RetentionWatchTest {

    private final MockConsumer<byte[], byte[]> consumer = new MockConsumer<>("none");
    private final List<String> said = new ArrayList<>();
    private final RetentionWatch watch = new RetentionWatch(consumer, "a-site.region-log", said::add);

    private void begins(long offset) {
        consumer.updateBeginningOffsets(Map.of(new TopicPartition("a-site.region-log", 1), offset));
    }

    @Test
    void aLogThatNoLongerReachesBackIsToldOnceAnEpisode() {
        watch.startsAt(1, 40);
        begins(40);
        watch.look();
        assertThat(said).isEmpty();
        begins(41);
        watch.look();
        watch.look();
        assertThat(said).singleElement().asString()
                .contains("partition 1 of a-site.region-log begins at offset 41, and is needed from offset 40");
        watch.startsAt(1, 60);
        watch.look();
        begins(61);
        watch.look();
        assertThat(said).hasSize(2);
    }

    @Test
    void aPartitionThatIsNoLongerHereIsNotLookedAt() {
        watch.startsAt(1, 40);
        begins(41);
        watch.ends(1);
        watch.look();
        assertThat(said).isEmpty();
    }
}
