package org.sweeptally.stream;

import java.util.Collections;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.NavigableMap;
import java.util.Properties;
import java.util.Set;
import java.util.TreeMap;
import org.apache.kafka.clients.admin.AdminClientConfig;
import org.apache.kafka.clients.consumer.ConsumerConfig;
import org.apache.kafka.clients.producer.ProducerConfig;
import org.apache.kafka.common.config.ConfigException;
import org.apache.kafka.common.serialization.ByteArrayDeserializer;
import org.apache.kafka.common.serialization.ByteArraySerializer;
import org.apache.kafka.streams.StreamsConfig;

/**
 * How the operator talks to the bus: what it chooses by itself, and above it whatever Kafka property the user gave. A
 * property may carry one of Kafka's prefixes ({@code consumer.}, {@code producer.}, {@code admin.}); without one it
 * holds for every client that knows it.
 */
public final class ClientSettings {

    /** Where the bus is looked for unless the user says otherwise. */
    public static final String USUAL_BUS = "localhost:9092";

    private static final String READ_COMMITTED = "read_committed";

    private static final String CONSUMER = "consumer.";
    private static final String PRODUCER = "producer.";
    private static final String ADMIN = "admin.";

    /** A dead process's transaction holds back every reader of the region log for at most this long. */
    private static final int TRANSACTION_TIMEOUT_MILLIS = 10_000;

    private final NavigableMap<String, String> given;

    /**
     * @param given Kafka properties of the user
     * @throws SettingsRefusedException if one of them takes away what the operator's promises rest on
     */
    public ClientSettings(Map<String, String> given) {
        this.given = Collections.unmodifiableNavigableMap(new TreeMap<>(given));
        refuseWhatBreaksPromises();
        refuseWhatIsNotOursToChoose();
        refuseWhatKafkaRefuses();
    }

    private void refuseWhatBreaksPromises() {
        String guarantee = given.get(StreamsConfig.PROCESSING_GUARANTEE_CONFIG);
        if (guarantee != null && !guarantee.equals(StreamsConfig.EXACTLY_ONCE_V2)) {
            throw new SettingsRefusedException(StreamsConfig.PROCESSING_GUARANTEE_CONFIG + " is " + guarantee
                    + ": only " + StreamsConfig.EXACTLY_ONCE_V2 + " is allowed, or records would be doubled");
        }
        for (String name : given.keySet()) {
            if (name.contains("exception.handler")) {
                throw new SettingsRefusedException(name + " may not be set: an entry of the region log that is passed"
                        + " over would part the picture from its log");
            }
            if (name.endsWith(ConsumerConfig.ISOLATION_LEVEL_CONFIG) && !given.get(name).equals(READ_COMMITTED)) {
                throw new SettingsRefusedException(name + " is " + given.get(name) + ": only " + READ_COMMITTED
                        + " is allowed, or what is undone would be read");
            }
        }
    }

    private void refuseWhatIsNotOursToChoose() {
        Map<String, String> chosen = new TreeMap<>();
        chosen.put(StreamsConfig.APPLICATION_ID_CONFIG, "the site's name makes it");
        chosen.put(StreamsConfig.STATE_DIR_CONFIG, "--state says it");
        chosen.put(ProducerConfig.TRANSACTIONAL_ID_CONFIG, "every writer has its own");
        for (String name : given.keySet()) {
            chosen.forEach((refused, why) -> {
                if (name.equals(refused) || name.endsWith("." + refused)) {
                    throw new SettingsRefusedException(name + " may not be set: " + why);
                }
            });
        }
    }

    /** Before anything begins, and with the property's name; the rest is told by the client that meets it. */
    private void refuseWhatKafkaRefuses() {
        try {
            StreamsConfig streams = new StreamsConfig(streams("check", "."));
            new ConsumerConfig(decoded(streams.getMainConsumerConfigs("check", "check", 0)));
            new ProducerConfig(encoded(streams.getProducerConfigs("check")));
            new ConsumerConfig(consumer("check"));
            new ProducerConfig(producer("check"));
            new AdminClientConfig(admin("check"));
            transactionTimeoutMillis();
        } catch (ConfigException | IllegalArgumentException e) {
            throw new SettingsRefusedException("Kafka refuses its properties: " + e.getMessage());
        }
    }

    /** The bus, as the user names it. */
    public String bus() {
        return given.getOrDefault(ProducerConfig.BOOTSTRAP_SERVERS_CONFIG, USUAL_BUS);
    }

    /** Milliseconds after which the bus ends the transaction of a process that died. */
    int transactionTimeoutMillis() {
        String value = given.get(PRODUCER + ProducerConfig.TRANSACTION_TIMEOUT_CONFIG);
        value = value == null ? given.get(ProducerConfig.TRANSACTION_TIMEOUT_CONFIG) : value;
        return value == null ? TRANSACTION_TIMEOUT_MILLIS : Integer.parseInt(value);
    }

    /** Settings of the stream processing itself. */
    Properties streams(String applicationId, String stateFolder) {
        Map<String, String> settings = new LinkedHashMap<>();
        settings.put(StreamsConfig.BOOTSTRAP_SERVERS_CONFIG, USUAL_BUS);
        settings.put(StreamsConfig.COMMIT_INTERVAL_MS_CONFIG, "100");
        settings.put(StreamsConfig.REPLICATION_FACTOR_CONFIG, "-1");
        settings.put(StreamsConfig.ENSURE_EXPLICIT_INTERNAL_RESOURCE_NAMING_CONFIG, "true");
        settings.put(StreamsConfig.STATESTORE_CACHE_MAX_BYTES_CONFIG, Integer.toString(1024 * 1024));
        // Streams itself would wait 100 ms at each of the two hops.
        settings.put(PRODUCER + ProducerConfig.LINGER_MS_CONFIG, "5");
        settings.put(PRODUCER + ProducerConfig.TRANSACTION_TIMEOUT_CONFIG,
                Integer.toString(TRANSACTION_TIMEOUT_MILLIS));
        settings.put(PRODUCER + ProducerConfig.MAX_REQUEST_SIZE_CONFIG,
                Integer.toString(TopicPlan.LARGEST_ENTRY_BYTES + 64 * 1024));
        settings.put(PRODUCER + ProducerConfig.BUFFER_MEMORY_CONFIG, Integer.toString(64 * 1024 * 1024));
        settings.put(PRODUCER + ProducerConfig.COMPRESSION_TYPE_CONFIG, "lz4");
        if (!"streams".equals(given.get(StreamsConfig.GROUP_PROTOCOL_CONFIG))) {
            // The least that a bus allows by default: nobody takes over from a dead process before.
            settings.put(CONSUMER + ConsumerConfig.SESSION_TIMEOUT_MS_CONFIG, "6000");
            settings.put(CONSUMER + ConsumerConfig.HEARTBEAT_INTERVAL_MS_CONFIG, "1500");
        }
        settings.putAll(given);
        settings.put(StreamsConfig.PROCESSING_GUARANTEE_CONFIG, StreamsConfig.EXACTLY_ONCE_V2);
        settings.put(StreamsConfig.APPLICATION_ID_CONFIG, applicationId);
        settings.put(StreamsConfig.STATE_DIR_CONFIG, stateFolder);
        Properties properties = new Properties();
        properties.putAll(settings);
        return properties;
    }

    /** Settings of a consumer of raw bytes that reads what is committed, in no group, from where it is told to. */
    public Map<String, Object> consumer(String clientId) {
        Map<String, Object> settings = client(CONSUMER, ConsumerConfig.configNames(), clientId);
        settings.remove(ConsumerConfig.GROUP_ID_CONFIG);
        settings.remove(ConsumerConfig.GROUP_INSTANCE_ID_CONFIG);
        settings.remove(ConsumerConfig.GROUP_PROTOCOL_CONFIG);
        settings.remove(ConsumerConfig.SESSION_TIMEOUT_MS_CONFIG);
        settings.remove(ConsumerConfig.HEARTBEAT_INTERVAL_MS_CONFIG);
        settings.put(ConsumerConfig.ISOLATION_LEVEL_CONFIG, READ_COMMITTED);
        settings.put(ConsumerConfig.AUTO_OFFSET_RESET_CONFIG, "none");
        settings.put(ConsumerConfig.ENABLE_AUTO_COMMIT_CONFIG, "false");
        settings.put(ConsumerConfig.ALLOW_AUTO_CREATE_TOPICS_CONFIG, "false");
        return decoded(settings);
    }

    private static Map<String, Object> decoded(Map<String, Object> settings) {
        settings.put(ConsumerConfig.KEY_DESERIALIZER_CLASS_CONFIG, ByteArrayDeserializer.class.getName());
        settings.put(ConsumerConfig.VALUE_DESERIALIZER_CLASS_CONFIG, ByteArrayDeserializer.class.getName());
        return settings;
    }

    /**
     * Settings of a producer of raw bytes that are written once each and in order. One request is under way at a time:
     * a broker that does not know the producer yet takes any of its batches for the first. Where a topic has just been
     * created, the first may be turned away because the broker has not heard of the topic, and the second be taken;
     * then the first could never follow (out of order sequence), or would follow in the wrong place.
     */
    public Map<String, Object> producer(String clientId) {
        Map<String, Object> settings = client(PRODUCER, ProducerConfig.configNames(), clientId);
        settings.put(ProducerConfig.ACKS_CONFIG, "all");
        settings.put(ProducerConfig.ENABLE_IDEMPOTENCE_CONFIG, "true");
        settings.put(ProducerConfig.MAX_IN_FLIGHT_REQUESTS_PER_CONNECTION, "1");
        return encoded(settings);
    }

    private static Map<String, Object> encoded(Map<String, Object> settings) {
        settings.put(ProducerConfig.KEY_SERIALIZER_CLASS_CONFIG, ByteArraySerializer.class.getName());
        settings.put(ProducerConfig.VALUE_SERIALIZER_CLASS_CONFIG, ByteArraySerializer.class.getName());
        return settings;
    }

    public Map<String, Object> admin(String clientId) {
        return client(ADMIN, AdminClientConfig.configNames(), clientId);
    }

    private Map<String, Object> client(String prefix, Set<String> known, String clientId) {
        Map<String, Object> settings = new LinkedHashMap<>();
        settings.put(ProducerConfig.BOOTSTRAP_SERVERS_CONFIG, USUAL_BUS);
        given.forEach((name, value) -> {
            if (known.contains(name)) {
                settings.put(name, value);
            }
        });
        given.tailMap(prefix, true).forEach((name, value) -> {
            if (name.startsWith(prefix)) {
                settings.put(name.substring(prefix.length()), value);
            }
        });
        settings.put(ProducerConfig.CLIENT_ID_CONFIG, clientId);
        return settings;
    }
}
