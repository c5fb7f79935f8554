package org.sweeptally.demo;

import java.nio.charset.StandardCharsets;
import java.util.List;
import java.util.NavigableMap;
import java.util.TreeMap;
import org.sweeptally.event.Count;
import org.sweeptally.event.GaveUpBody;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.Reject;
import org.sweeptally.event.SilentBody;
import org.sweeptally.event.Track;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.score.Ospa;
import org.sweeptally.site.Site;
import org.sweeptally.stream.TopicNames;

/** What a subscriber makes of a site's topics, record by record: a row for each region, scores, and the digest. */
final class PictureTally {

    /** An object that is missed, or shown and not there, costs as much as one that is shown 100 m off. */
    static final Ospa OSPA = new Ospa(100, 1);

    private final TopicNames names;
    private final EstuaryWorld world;
    private final NavigableMap<String, RegionPicture> regions = new TreeMap<>();
    private final RecordDigest digest = new RecordDigest();
    private long rejects;
    private long silences;

    PictureTally(Site site, TopicNames names, EstuaryWorld world) {
        this.names = names;
        this.world = world;
        site.regions().forEach(region ->
                regions.put(region.name(), new RegionPicture(site, region, OSPA, world)));
    }

    /** The topics whose records it takes. */
    static List<String> topics(TopicNames names) {
        return List.of(names.tracks(), names.births(), names.ends(), names.counts(), names.picture(), names.rejects(),
                names.regionLog());
    }

    /** The next record of a partition. */
    void take(String topic, byte[] key, byte[] value) {
        if (topic.equals(names.rejects())) {
            digest.addToSet(topic, value);
            reject(Wire.decode(value, Reject.class));
            return;
        }
        String keyText = new String(key, StandardCharsets.UTF_8);
        if (topic.equals(names.regionLog())) {
            entry(regions.get(keyText), Wire.decode(value, LogEntry.class).getBody());
            return;
        }
        digest.add(topic, keyText, value);
        if (topic.equals(names.tracks())) {
            regions.get(keyText).track(Wire.decode(value, Track.class));
        } else if (topic.equals(names.counts())) {
            regions.get(keyText).count(Wire.decode(value, Count.class));
        } else if (topic.equals(names.births())) {
            regions.get(keyText).birth();
        } else if (topic.equals(names.ends())) {
            regions.get(keyText).end();
        }
    }

    private void reject(Reject reject) {
        rejects++;
        if (reject.getRegion() != null) {
            regions.get(reject.getRegion()).reject();
        }
    }

    private void entry(RegionPicture region, Object body) {
        if (body instanceof PartBody part) {
            region.heard(part.getPart().getDetections().size());
        } else if (body instanceof SilentBody || body instanceof GaveUpBody) {
            silences++;
        }
    }

    /** Whether every region's picture has come to a scan. */
    boolean hasComeTo(EstuaryWorld.Scan scan) {
        return regions.values().stream().allMatch(region -> region.last() != null
                && new EstuaryWorld.Scan(region.last().getScanTimeMicros(), region.last().getSensor())
                        .compareTo(scan) >= 0);
    }

    /** The time that every region's picture has come to, microseconds since 1970-01-01T00:00:00Z; least before any. */
    long pictureMicros() {
        return regions.values().stream()
                .mapToLong(region -> region.last() == null ? Long.MIN_VALUE : region.last().getTimeMicros())
                .min()
                .orElseThrow();
    }

    /** How much of a world that began at a time every region's picture covers. */
    double pictureSeconds(long beginMicros) {
        return pictureMicros() == Long.MIN_VALUE ? 0 : (pictureMicros() - beginMicros) / 1e6;
    }

    /** Lets the world forget what no scan will be scored against any more. */
    void letForget(long keptMicros) {
        if (pictureMicros() > Long.MIN_VALUE) {
            world.forgetBefore(pictureMicros() - keptMicros);
        }
    }

    /** Shown and true numbers of objects by region, for a line of progress. */
    String numbers() {
        StringBuilder text = new StringBuilder();
        regions.forEach((name, region) -> {
            if (region.last() != null) {
                text.append(text.length() == 0 ? "" : ", ").append(name).append(" shows ")
                        .append(region.last().getTracks()).append(" of ").append(region.trueNumber());
            }
        });
        return text.toString();
    }

    DemoReport report(long seed, long beginMicros) {
        long scored = regions.values().stream().mapToLong(RegionPicture::scoredScans).sum();
        double ospa = regions.values().stream().mapToDouble(RegionPicture::ospaSum).sum();
        double faceValue = regions.values().stream().mapToDouble(RegionPicture::faceValueSum).sum();
        return new DemoReport(
                seed,
                pictureSeconds(beginMicros),
                regions.values().stream().map(RegionPicture::row).toList(),
                ospa / Math.max(1, scored),
                faceValue / Math.max(1, scored),
                rejects,
                silences,
                digest.text());
    }
}
