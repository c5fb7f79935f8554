package org.sweeptally.demo;

import java.io.IOException;
import java.io.OutputStream;
import java.io.PrintStream;
import java.io.UncheckedIOException;
import java.net.BindException;
import java.net.InetAddress;
import java.net.ServerSocket;
import java.nio.file.FileVisitResult;
import java.nio.file.Files;
import java.nio.file.NoSuchFileException;
import java.nio.file.Path;
import java.nio.file.SimpleFileVisitor;
import java.nio.file.attribute.BasicFileAttributes;
import java.util.Properties;
import kafka.server.KafkaConfig;
import kafka.server.KafkaRaftServer;
import org.apache.kafka.common.Uuid;
import org.apache.kafka.common.utils.Time;
import org.apache.kafka.metadata.storage.Formatter;
import org.apache.kafka.server.common.MetadataVersion;

/**
 * A Kafka broker in this process (KRaft: broker and controller in one), which listens on the loopback interface only.
 * For the demo and the tests; it keeps no data beyond its end. It needs the libraries of {@code target/demo-lib},
 * which the operator does without.
 */
public final class EmbeddedBroker implements AutoCloseable {

    /** Another process may take a port between our look and the broker's start. */
    private static final int STARTS = 3;

    private final Path folder;
    private final KafkaRaftServer server;
    private final String bootstrapServers;

    private EmbeddedBroker(Path folder, KafkaRaftServer server, String bootstrapServers) {
        this.folder = folder;
        this.server = server;
        this.bootstrapServers = bootstrapServers;
    }

    /**
     * Starts a broker, which takes two or three seconds the first time in a process.
     *
     * @param folder for its data, made if it is missing; everything in it is deleted when the broker closes
     * @throws IOException if the folder cannot be written, or no free port could be had
     */
    public static EmbeddedBroker start(Path folder) throws IOException {
        boolean started = false;
        try {
            EmbeddedBroker broker = startWithPorts(folder);
            started = true;
            return broker;
        } finally {
            if (!started) {
                deleteTree(folder);
            }
        }
    }

    /** Where clients find it, as host:port. */
    public String bootstrapServers() {
        return bootstrapServers;
    }

    /** Stops the broker and deletes its folder; clients should be closed before. */
    @Override
    public void close() {
        server.shutdown();
        server.awaitShutdown();
        deleteTree(folder);
    }

    private static EmbeddedBroker startWithPorts(Path folder) throws IOException {
        Files.createDirectories(folder);
        for (int attempt = 1; ; attempt++) {
            try {
                return startOnce(folder, folder.resolve("broker-" + attempt));
            } catch (IllegalStateException e) {
                if (attempt == STARTS || !isPortTaken(e)) {
                    throw new IOException("the embedded broker did not start: " + rootOf(e).getMessage(), e);
                }
            }
        }
    }

    private static EmbeddedBroker startOnce(Path folder, Path data) throws IOException {
        Files.createDirectories(data);
        int[] ports = freePorts();
        Properties properties = properties(data, ports[0], ports[1]);
        KafkaRaftServer server = null;
        try {
            format(data);
            server = new KafkaRaftServer(KafkaConfig.fromProps(properties, false), Time.SYSTEM);
            server.startup();
            return new EmbeddedBroker(folder, server, "127.0.0.1:" + ports[0]);
        } catch (Exception e) {
            if (server != null) {
                server.shutdown();
            }
            throw new IllegalStateException(e);
        }
    }

    /** The ports must be known before the start: voters name the controller's, and the broker does not tell its own. */
    private static int[] freePorts() throws IOException {
        InetAddress loopback = InetAddress.getLoopbackAddress();
        try (ServerSocket broker = new ServerSocket(0, 1, loopback);
                ServerSocket controller = new ServerSocket(0, 1, loopback)) {
            return new int[] {broker.getLocalPort(), controller.getLocalPort()};
        }
    }

    private static Properties properties(Path data, int brokerPort, int controllerPort) {
        Properties properties = new Properties();
        properties.put("process.roles", "broker,controller");
        properties.put("node.id", "1");
        properties.put("listeners", "PLAINTEXT://127.0.0.1:" + brokerPort
                + ",CONTROLLER://127.0.0.1:" + controllerPort);
        properties.put("advertised.listeners", "PLAINTEXT://127.0.0.1:" + brokerPort);
        properties.put("listener.security.protocol.map", "PLAINTEXT:PLAINTEXT,CONTROLLER:PLAINTEXT");
        properties.put("controller.listener.names", "CONTROLLER");
        properties.put("inter.broker.listener.name", "PLAINTEXT");
        properties.put("controller.quorum.voters", "1@127.0.0.1:" + controllerPort);
        properties.put("log.dirs", data.toString());
        properties.put("auto.create.topics.enable", "false");
        alone(properties);
        small(properties);
        return properties;
    }

    /** A single broker can hold one copy only, and nobody else will join the groups of one process. */
    private static void alone(Properties properties) {
        for (String topic : new String[] {"offsets.topic", "transaction.state.log", "share.coordinator.state.topic"}) {
            properties.put(topic + ".replication.factor", "1");
            properties.put(topic + ".num.partitions", "1");
        }
        properties.put("transaction.state.log.min.isr", "1");
        properties.put("share.coordinator.state.topic.min.isr", "1");
        properties.put("group.initial.rebalance.delay.ms", "0");
        properties.put("group.streams.initial.rebalance.delay.ms", "0");
        // What a killed operator leaves open is aborted soon after its transaction's timeout.
        properties.put("transaction.abort.timed.out.transaction.cleanup.interval.ms", "1000");
        // Tests set short sessions so that they need not wait for a killed process.
        properties.put("group.min.session.timeout.ms", "1000");
    }

    private static void small(Properties properties) {
        properties.put("log.cleaner.dedupe.buffer.size", Integer.toString(2 << 20));
        properties.put("num.network.threads", "2");
        properties.put("num.io.threads", "2");
        properties.put("background.threads", "2");
    }

    private static void format(Path data) throws Exception {
        try (PrintStream nowhere = new PrintStream(OutputStream.nullOutputStream())) {
            new Formatter()
                    .setClusterId(Uuid.randomUuid().toString())
                    .setNodeId(1)
                    .addDirectory(data.toString())
                    .setMetadataLogDirectory(data.toString())
                    .setReleaseVersion(MetadataVersion.LATEST_PRODUCTION)
                    .setControllerListenerName("CONTROLLER")
                    .setHasDynamicQuorum(false)
                    .setPrintStream(nowhere)
                    .setIgnoreFormatted(false)
                    .run();
        }
    }

    private static boolean isPortTaken(Throwable e) {
        for (Throwable cause = e; cause != null; cause = cause.getCause()) {
            String message = String.valueOf(cause.getMessage());
            if (cause instanceof BindException || message.contains("Address already in use")) {
                return true;
            }
        }
        return false;
    }

    private static Throwable rootOf(Throwable e) {
        Throwable root = e;
        while (root.getCause() != null) {
            root = root.getCause();
        }
        return root;
    }

    private static void deleteTree(Path folder) {
        try {
            Files.walkFileTree(folder, new SimpleFileVisitor<>() {
                @Override
                public FileVisitResult visitFile(Path file, BasicFileAttributes attributes) throws IOException {
                    Files.deleteIfExists(file);
                    return FileVisitResult.CONTINUE;
                }

                @Override
                public FileVisitResult visitFileFailed(Path file, IOException e) throws IOException {
                    // The broker deletes files of its own while it stops.
                    if (e instanceof NoSuchFileException) {
                        return FileVisitResult.CONTINUE;
                    }
                    throw e;
                }

                @Override
                public FileVisitResult postVisitDirectory(Path emptied, IOException e) throws IOException {
                    Files.deleteIfExists(emptied);
                    return FileVisitResult.CONTINUE;
                }
            });
        } catch (IOException e) {
            throw new UncheckedIOException("the folder of the embedded broker, " + folder + ", is not deleted", e);
        }
    }
}
