package org.sweeptally.stream;

import java.util.Locale;
import java.util.function.Function;

/** What the operator writes to: the topic's part in it, and its node in the topology. */
enum Output {
    REGION_LOG(TopicNames::regionLog),
    TRACKS(TopicNames::tracks),
    BIRTHS(TopicNames::births),
    ENDS(TopicNames::ends),
    COUNTS(TopicNames::counts),
    PICTURE(TopicNames::picture),
    REJECTS(TopicNames::rejects),
    HEARTBEAT(TopicNames::heartbeat),
    FINDINGS(TopicNames::findings),
    SNAPSHOTS(TopicNames::snapshots);

    private final Function<TopicNames, String> topic;

    Output(Function<TopicNames, String> topic) {
        this.topic = topic;
    }

    String topic(TopicNames names) {
        return topic.apply(names);
    }

    /** Name of the sink by which a processor writes to it. */
    String node(String processor) {
        return processor + "-to-" + name().toLowerCase(Locale.ROOT).replace('_', '-');
    }
}
