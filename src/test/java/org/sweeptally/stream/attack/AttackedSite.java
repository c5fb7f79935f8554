package org.sweeptally.stream.attack;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Instant;
import java.time.temporal.ChronoUnit;
import java.util.List;
import java.util.concurrent.atomic.AtomicInteger;
import org.sweeptally.site.Site;
import org.sweeptally.site.SiteReader;
import org.sweeptally.site.SiteResult;
import org.sweeptally.stream.TopicNames;
import org.sweeptally.stream.TopicPlan;
import org.sweeptally.stream.Topics;

/** The invented estuary of the demo under a name of its own, as files that an operator process reads. */
final class AttackedSite {

    static final int DETECTION_PARTITIONS = 2;
    static final int LOG_PARTITIONS = 2;

    private static final AtomicInteger SITES = new AtomicInteger();

    private final Path folder;
    private final String name = "attacked-" + SITES.incrementAndGet();

    /** @param folder where the site files go */
    AttackedSite(Path folder) {
        this.folder = folder;
    }

    TopicNames names() {
        return new TopicNames(name, name + "-detections");
    }

    /** Creates all topics, but for those that are left out. */
    void createTopics(String... leftOut) {
        try (Topics topics = new Topics(Bus.clients())) {
            topics.create(TopicPlan.of(names(), LOG_PARTITIONS).stream()
                    .filter(plan -> !List.of(leftOut).contains(plan.name()))
                    .map(plan -> plan.ours() ? plan : withPartitions(plan, DETECTION_PARTITIONS))
                    .toList());
        }
    }

    static TopicPlan withPartitions(TopicPlan plan, int partitions) {
        return new TopicPlan(plan.name(), plan.purpose(), plan.ours(), partitions, plan.settings());
    }

    /** The first revision, with snapshots so often that recoveries begin at many of them. */
    Path first() {
        return write(1, text());
    }

    /** The first revision, with sensors that look four times as seldom. */
    Path withSlowSensors() {
        return write(1, text()
                .replace("intervalSeconds: 2.5", "intervalSeconds: 10")
                .replace("intervalSeconds: 3", "intervalSeconds: 12")
                .replace("intervalSeconds: 1\n", "intervalSeconds: 4\n"));
    }

    /** A second revision that shows objects later, from a log time on, and whose settings change nothing else. */
    Path second(long fromMicros) {
        String from = Instant.EPOCH.plus(fromMicros, ChronoUnit.MICROS).toString();
        return write(2, text()
                .replace("revision: 1", "revision: 2\nfrom: " + from)
                .replace("confirming: 0.9", "confirming: 0.97"));
    }

    /** A second revision in which one region has been drawn anew. */
    Path withAnotherRegion() {
        return write(2, text()
                .replace("revision: 1", "revision: 2")
                .replace("[-33.425, 44.018]", "[-33.424, 44.018]"));
    }

    private String text() {
        try {
            String text = Files.readString(Path.of("src/main/resources/demo/site.yaml"));
            return text.replace("site: skell", "site: " + name) + "\nbounds: {snapshotScans: 20, snapshotSeconds: 5}\n";
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    private Path write(int revision, String text) {
        try {
            return Files.writeString(folder.resolve(name + "-" + revision + ".yaml"), text);
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    static Site read(Path file) {
        if (SiteReader.read(file) instanceof SiteResult.Valid valid) {
            return valid.site();
        }
        throw new IllegalArgumentException("a site file with faults: " + SiteReader.read(file));
    }
}
