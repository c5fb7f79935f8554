package org.sweeptally.stream;

import java.nio.file.Path;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.OptionalLong;
import org.sweeptally.site.Site;

/** The embedded broker for measurements, with the settings that the product itself chooses for its clients. */
public final class BenchBus {

    private BenchBus() {}

    public static String address() {
        return TestBus.address();
    }

    /** Two regions and the one sensor that sees both, under a name of its own; its topics are created. */
    public static Site newSite(int snapshotScans) {
        Site site = TestSite.withSnapshotScans(TestSite.twins(), snapshotScans);
        for (String sensor : new String[] {"south-shore", "pilot-house"}) {
            site = TestSite.withoutSensor(site, 1, OptionalLong.empty(), sensor);
        }
        TestBus.createTopics(site, 1, site.regions().size());
        return site;
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
