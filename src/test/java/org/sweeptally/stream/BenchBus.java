package org.sweeptally.stream;

import java.nio.file.Path;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.stream.IntStream;
import org.sweeptally.site.Site;

/** The embedded broker for measurements, with the settings that the product itself chooses for its clients. */
public final class BenchBus {

    private BenchBus() {}

    public static String address() {
        return TestBus.address();
    }

    /** Regions side by side and sensors that all see all of them, under a name of its own; its topics are created. */
    public static Site newSite(int regions, int sensors, int snapshotScans) {
        List<String> names = IntStream.range(0, sensors).mapToObj(BenchBus::sensor).toList();
        Site site = TestSite.withSnapshotScans(TestSite.strips(regions, names), snapshotScans);
        TestBus.createTopics(site, 1, regions);
        return site;
    }

    /** Name of a sensor, by its place. */
    public static String sensor(int place) {
        return "shore-" + place;
    }

    public static TopicNames names(Site site) {
        return TestBus.names(site);
    }

    /** @param further Kafka properties beyond the product's own, keys and values by turns */
    public static ClientSettings clients(String... further) {
        Map<String, String> given = new LinkedHashMap<>();
        given.put("bootstrap.servers", address());
        for (int i = 0; i < further.length; i += 2) {
            given.put(further[i], further[i + 1]);
        }
        return new ClientSettings(given);
    }

    public static OperatorSettings settings(Site site, Path stateFolder, String... further) {
        return new OperatorSettings(site, names(site), clients(further), stateFolder);
    }
}
