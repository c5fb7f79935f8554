package org.sweeptally.stream;

import java.time.Duration;
import java.util.ArrayList;
import java.util.Collection;
import java.util.List;
import java.util.Map;
import java.util.NavigableMap;
import java.util.Optional;
import java.util.Set;
import java.util.TreeMap;
import java.util.TreeSet;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.TimeoutException;
import java.util.concurrent.locks.LockSupport;
import org.apache.kafka.clients.admin.Admin;
import org.apache.kafka.clients.admin.Config;
import org.apache.kafka.clients.admin.ConfigEntry;
import org.apache.kafka.clients.admin.ListConsumerGroupOffsetsOptions;
import org.apache.kafka.clients.admin.NewTopic;
import org.apache.kafka.clients.admin.TopicDescription;
import org.apache.kafka.common.KafkaFuture;
import org.apache.kafka.common.config.ConfigResource;
import org.apache.kafka.common.errors.TopicExistsException;
import org.apache.kafka.common.errors.UnknownTopicOrPartitionException;

/** The topics of a site on the bus: looks at them, and creates what is missing. It never changes what is there. */
public final class Topics implements AutoCloseable {

    private static final long PATIENCE_SECONDS = 30;
    private static final long POLL_NANOS = 20_000_000;

    private final Admin admin;
    private final String bus;

    public Topics(ClientSettings clients) {
        this.admin = Admin.create(clients.admin("topics"));
        this.bus = clients.bus();
    }

    /**
     * The topics as they are, in the order of the plans.
     *
     * @throws OperatorStoppedException if the bus cannot be asked
     */
    public List<TopicState> look(Collection<TopicPlan> plans) {
        Map<String, KafkaFuture<TopicDescription>> described =
                admin.describeTopics(plans.stream().map(TopicPlan::name).toList()).topicNameValues();
        List<TopicState> states = new ArrayList<>();
        for (TopicPlan plan : plans) {
            Optional<Integer> partitions = existing(described.get(plan.name()), plan.name());
            states.add(partitions.isEmpty()
                    ? new TopicState(plan, 0, new TreeMap<>())
                    : new TopicState(plan, partitions.get(), settings(plan.name())));
        }
        return states;
    }

    /** How many partitions a topic has, empty where there is no such topic. */
    public Optional<Integer> partitions(String topic) {
        return existing(admin.describeTopics(List.of(topic)).topicNameValues().get(topic), topic);
    }

    /**
     * The partitions of a topic on which a group has committed offsets.
     *
     * @param settled whether to wait for what is being committed
     */
    Set<Integer> committed(String group, String topic, boolean settled) {
        var offsets = get(
                admin.listConsumerGroupOffsets(group, new ListConsumerGroupOffsetsOptions().requireStable(settled))
                        .partitionsToOffsetAndMetadata(group),
                "asking for the offsets of group " + group);
        Set<Integer> partitions = new TreeSet<>();
        offsets.forEach((partition, offset) -> {
            if (partition.topic().equals(topic) && offset != null) {
                partitions.add(partition.partition());
            }
        });
        return partitions;
    }

    /**
     * Creates topics with the settings of their plans, and as many replicas as the bus gives by itself.
     *
     * @throws OperatorStoppedException if the bus refuses
     */
    public void create(Collection<TopicPlan> plans) {
        List<NewTopic> topics = plans.stream()
                .map(plan -> new NewTopic(plan.name(), Optional.of(plan.partitions()), Optional.empty())
                        .configs(plan.settings()))
                .toList();
        admin.createTopics(topics).values().forEach((name, future) -> {
            try {
                get(future, "creating topic " + name);
            } catch (TopicExistsException e) {
                // Somebody else was quicker; how it differs is seen by looking.
            }
        });
        plans.forEach(plan -> awaitVisible(plan.name()));
    }

    /** The bus's brokers hear of a new topic one after the other, and until then say that there is none. */
    private void awaitVisible(String topic) {
        long begin = System.nanoTime();
        while (partitions(topic).isEmpty()) {
            if (System.nanoTime() - begin > PATIENCE_SECONDS * 1_000_000_000L) {
                throw new OperatorStoppedException(
                        "the bus at " + bus + " created topic " + topic + ", and does not show it");
            }
            LockSupport.parkNanos(POLL_NANOS);
        }
    }

    private Optional<Integer> existing(KafkaFuture<TopicDescription> future, String topic) {
        try {
            return Optional.of(get(future, "looking at topic " + topic).partitions().size());
        } catch (UnknownTopicOrPartitionException e) {
            return Optional.empty();
        }
    }

    private NavigableMap<String, String> settings(String topic) {
        ConfigResource resource = new ConfigResource(ConfigResource.Type.TOPIC, topic);
        Config config = get(
                admin.describeConfigs(List.of(resource)).values().get(resource), "reading the settings of " + topic);
        NavigableMap<String, String> settings = new TreeMap<>();
        for (ConfigEntry entry : config.entries()) {
            if (entry.value() != null) {
                settings.put(entry.name(), entry.value());
            }
        }
        return settings;
    }

    private <T> T get(KafkaFuture<T> future, String doing) {
        try {
            return future.get(PATIENCE_SECONDS, TimeUnit.SECONDS);
        } catch (ExecutionException e) {
            if (e.getCause() instanceof UnknownTopicOrPartitionException unknown) {
                throw unknown;
            }
            if (e.getCause() instanceof TopicExistsException exists) {
                throw exists;
            }
            if (e.getCause() instanceof org.apache.kafka.common.errors.TimeoutException) {
                throw new OperatorStoppedException(
                        "the bus at " + bus + " does not answer: " + doing + ": " + e.getCause().getMessage(),
                        e.getCause());
            }
            throw new OperatorStoppedException(
                    "the bus at " + bus + " refuses: " + doing + ": " + e.getCause().getMessage(), e.getCause());
        } catch (TimeoutException e) {
            throw new OperatorStoppedException(
                    "the bus at " + bus + " does not answer within " + PATIENCE_SECONDS + " s: " + doing, e);
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
            throw new OperatorStoppedException("interrupted: " + doing, e);
        }
    }

    @Override
    public void close() {
        admin.close(Duration.ofSeconds(1));
    }
}
