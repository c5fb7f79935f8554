package org.sweeptally.stream;

import java.io.ByteArrayInputStream;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.OptionalLong;
import java.util.TreeSet;
import org.sweeptally.event.Part;
import org.sweeptally.event.SensorPromise;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;
import org.sweeptally.region.intake.Intake;
import org.sweeptally.region.text.PartLines;
import org.sweeptally.site.BoundSettings;
import org.sweeptally.site.RegionSettings;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;
import org.sweeptally.site.SiteReader;
import org.sweeptally.site.SiteResult;
import org.sweeptally.site.ThresholdSettings;

/** The invented estuary under other names, and its recording. */
final class TestSite {

    private static final Path ESTUARY = Path.of("src/main/resources/estuary");

    private TestSite() {}

    static Site estuary() {
        return named(read(ESTUARY.resolve("site.yaml")), TestBus.newSiteName());
    }

    /** The estuary with its region cut in two from north to south. */
    static Site twins() {
        Site site = estuary();
        RegionSettings whole = site.regions().get(0);
        return with(site, site.name(), site.revision(), site.fromMicros(),
                List.of(part(whole, "east-side", -33.5, -33.475), part(whole, "west-side", -33.525, -33.5)),
                site.thresholds(), site.bounds());
    }

    /** The estuary cut from north to south into strips of the same width, seen by like sensors at the same place. */
    static Site strips(int regions, List<String> sensors) {
        Site site = estuary();
        RegionSettings whole = site.regions().get(0);
        double width = 0.05 / regions;
        List<RegionSettings> strips = new ArrayList<>();
        for (int i = 0; i < regions; i++) {
            strips.add(part(whole, "strip-" + i, -33.525 + i * width, -33.525 + (i + 1) * width));
        }
        SensorSettings s = site.sensor("north-shore").orElseThrow();
        List<SensorSettings> like = sensors.stream()
                .map(name -> new SensorSettings(name, s.position(), s.roams(), s.reachMetres(), s.noise(),
                        s.detectionProbability(), s.clutterPerScan(), s.intervalSeconds(), s.sweepSeconds(),
                        s.leastIntervalSeconds(), s.disorderSeconds(), s.silentSeconds()))
                .toList();
        return new Site(site.name(), site.revision(), site.fromMicros(), like, strips, site.motion(),
                site.lifetimeSeconds(), site.unseen(), site.thresholds(), site.bounds(), site.rejectOutside());
    }

    private static RegionSettings part(RegionSettings whole, String name, double west, double east) {
        GeoPolygon core = new GeoPolygon(
                List.of(new LatLon(43.982, west), new LatLon(43.982, east), new LatLon(44.018, east),
                        new LatLon(44.018, west)),
                List.of());
        return new RegionSettings(name, core, whole.apronMetres(), whole.unseenCellMetres());
    }

    static Site read(Path file) {
        if (SiteReader.read(file) instanceof SiteResult.Valid valid) {
            return valid.site();
        }
        throw new IllegalArgumentException("a site with faults: " + file);
    }

    static Site named(Site site, String name) {
        return with(site, name, site.revision(), site.fromMicros(), site.regions(), site.thresholds(), site.bounds());
    }

    /** The same site with another revision that shows objects at another existence. */
    static Site revised(Site site, int revision, OptionalLong fromMicros, double confirming) {
        return with(site, site.name(), revision, fromMicros, site.regions(),
                new ThresholdSettings(confirming, site.thresholds().ending()), site.bounds());
    }

    static Site withRegions(Site site, int revision, List<RegionSettings> regions) {
        return with(site, site.name(), revision, site.fromMicros(), regions, site.thresholds(), site.bounds());
    }

    static Site withoutSensor(Site s, int revision, OptionalLong fromMicros, String sensor) {
        return new Site(s.name(), revision, fromMicros,
                s.sensors().stream().filter(kept -> !kept.name().equals(sensor)).toList(), s.regions(), s.motion(),
                s.lifetimeSeconds(), s.unseen(), s.thresholds(), s.bounds(), s.rejectOutside());
    }

    static Site withSnapshotScans(Site site, int scans) {
        BoundSettings b = site.bounds();
        return with(site, site.name(), site.revision(), site.fromMicros(), site.regions(), site.thresholds(),
                new BoundSettings(b.gateSigmas(), b.components(), b.unseenTerms(), b.exactAssociationSteps(),
                        b.propagationSweeps(), b.detectionsPerPart(), b.waitingBytes(), b.clockAheadSeconds(), scans,
                        b.snapshotSeconds(), b.leastTermWeight(), b.gatedPairs()));
    }

    private static Site with(
            Site s,
            String name,
            int revision,
            OptionalLong fromMicros,
            List<RegionSettings> regions,
            ThresholdSettings thresholds,
            BoundSettings bounds) {
        return new Site(name, revision, fromMicros, s.sensors(), regions, s.motion(), s.lifetimeSeconds(), s.unseen(),
                thresholds, bounds, s.rejectOutside());
    }

    /** The estuary's recording in order of arrival; the last part of each sensor promises that nothing follows. */
    static List<Part> recording(Site site) {
        try {
            return parts(Files.readAllBytes(ESTUARY.resolve("parts.ndjson")), site);
        } catch (IOException e) {
            throw new IllegalStateException(e);
        }
    }

    /** The whole parts of lines; the last of each sensor promises that nothing follows. */
    static List<Part> parts(byte[] lines, Site site) {
        List<Part> parts = new ArrayList<>();
        try {
            PartLines reader = new PartLines(new ByteArrayInputStream(lines), site);
            for (Optional<Intake> line = reader.next(); line.isPresent(); line = reader.next()) {
                if (line.get().reject().isEmpty()) {
                    parts.add(line.get().body().orElseThrow().getPart());
                }
            }
        } catch (IOException e) {
            throw new IllegalStateException(e);
        }
        promiseEnds(parts);
        return parts;
    }

    static byte[] lines(List<String> lines) {
        return String.join("\n", lines).getBytes(StandardCharsets.UTF_8);
    }

    private static void promiseEnds(List<Part> parts) {
        TreeSet<String> ended = new TreeSet<>();
        for (int i = parts.size() - 1; i >= 0; i--) {
            if (ended.add(parts.get(i).getSensor())) {
                parts.get(i).setPromise(new SensorPromise((Long) null));
            }
        }
    }

    /** The same part at another time, without number or promise. */
    static Part at(Part p, long scanTimeMicros) {
        return new Part(p.getSensor(), scanTimeMicros, null, p.getPart(), p.getClosesScan(), null, p.getCoverage(),
                p.getSensorPosition(), p.getSensorHeadingDegrees(), p.getSensorEastMetresPerSecond(),
                p.getSensorNorthMetresPerSecond(), p.getDetections());
    }

    /** The same scans again and again, each time later by so much, with new promises. */
    static List<Part> repeated(List<Part> recording, int times, long laterMicros) {
        List<Part> parts = new ArrayList<>();
        for (int i = 0; i < times; i++) {
            long shift = i * laterMicros;
            recording.forEach(part -> parts.add(at(part, part.getScanTimeMicros() + shift)));
        }
        promiseEnds(parts);
        return parts;
    }
}
