package org.sweeptally.cli;

import java.io.IOException;
import java.io.Reader;
import java.nio.file.Files;
import java.nio.file.NoSuchFileException;
import java.nio.file.Path;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.Properties;
import java.util.TreeSet;
import org.sweeptally.site.Site;
import org.sweeptally.stream.ClientSettings;
import org.sweeptally.stream.TopicNames;
import picocli.CommandLine.Option;

/** Options that say where the bus is and how to talk to it. */
final class BusOptions {

    private static final String BOOTSTRAP = "bootstrap.servers";

    @Option(
            names = "--bus",
            paramLabel = "HOST:PORT",
            description = "Where the bus is, one or several with commas between (default: "
                    + ClientSettings.USUAL_BUS + ").")
    private String bus;

    @Option(
            names = "--kafka-file",
            paramLabel = "FILE",
            description = "Kafka properties for every client: security, sizes, times.")
    private Path file;

    @Option(
            names = "--kafka",
            paramLabel = "KEY=VALUE",
            description = "One Kafka property; stands above the file. May be given several times.")
    private Map<String, String> properties = new LinkedHashMap<>();

    @Option(
            names = "--detections",
            paramLabel = "TOPIC",
            description = "The topic of the sensors' parts (default: " + TopicNames.DETECTIONS + ").")
    private String detections = TopicNames.DETECTIONS;

    ClientSettings clients() {
        Map<String, String> given = new LinkedHashMap<>();
        if (file != null) {
            given.putAll(read());
        }
        given.putAll(properties);
        if (bus != null) {
            given.put(BOOTSTRAP, bus);
        }
        return new ClientSettings(given);
    }

    TopicNames topics(Site site) {
        return new TopicNames(site.name(), detections);
    }

    private Map<String, String> read() {
        Properties read = new Properties();
        try (Reader reader = Files.newBufferedReader(file)) {
            read.load(reader);
        } catch (NoSuchFileException e) {
            throw new CommandFailedException(file + ": there is no such file");
        } catch (IOException | IllegalArgumentException e) {
            throw new CommandFailedException(file + ": cannot be read: " + e.getMessage());
        }
        Map<String, String> given = new LinkedHashMap<>();
        new TreeSet<>(read.stringPropertyNames()).forEach(name -> given.put(name, read.getProperty(name)));
        return given;
    }
}
