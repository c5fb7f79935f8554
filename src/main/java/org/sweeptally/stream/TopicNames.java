package org.sweeptally.stream;

import org.sweeptally.site.Site;

/**
 * What the topics of a site are called. All are ours and carry the site's name in front, but for the detections, which
 * belong to whoever sends them.
 *
 * @param site       name of the site
 * @param detections topic of the sensors' parts
 */
public record TopicNames(String site, String detections) {

    /** What the detections' topic is called unless the user says otherwise. */
    public static final String DETECTIONS = "detections";

    /** Names for a site whose parts come on the topic {@value #DETECTIONS}. */
    public static TopicNames of(Site site) {
        return new TopicNames(site.name(), DETECTIONS);
    }

    /** The consumer group, and the first part of the names of the bus's own topics for the operator's state. */
    public String applicationId() {
        return ours("operator");
    }

    public String regionLog() {
        return ours("region-log");
    }

    public String tracks() {
        return ours("tracks");
    }

    public String births() {
        return ours("births");
    }

    public String ends() {
        return ours("ends");
    }

    public String counts() {
        return ours("counts");
    }

    public String picture() {
        return ours("picture");
    }

    public String rejects() {
        return ours("rejects");
    }

    public String heartbeat() {
        return ours("heartbeat");
    }

    public String findings() {
        return ours("findings");
    }

    public String snapshots() {
        return ours("snapshots");
    }

    public String settings() {
        return ours("settings");
    }

    /** Topic in which the bus keeps the changes of a store of the operator. */
    String changelog(String store) {
        return applicationId() + "-" + store + "-changelog";
    }

    private String ours(String name) {
        return site + "." + name;
    }
}
