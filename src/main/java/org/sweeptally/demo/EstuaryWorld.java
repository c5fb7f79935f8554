package org.sweeptally.demo;

import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Map;
import java.util.NavigableMap;
import java.util.Optional;
import java.util.PriorityQueue;
import java.util.SplittableRandom;
import java.util.TreeMap;
import org.sweeptally.event.Part;
import org.sweeptally.event.SensorPromise;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.site.Site;
import org.sweeptally.site.SiteReader;
import org.sweeptally.site.SiteResult;

/**
 * The invented estuary of the demo, Skellmouth: what sails there, what its three sensors send of it, and beside it the
 * truth, which the operator never sees. The same seed gives the same world, on any machine. At its end every sensor
 * promises that nothing more will come. One thread may draw parts while another asks for the truth.
 */
public final class EstuaryWorld {

    /** Middle of the estuary's plane: where the regions meet. */
    private static final LocalPlane PLANE = new LocalPlane(new LatLon(44.0, -33.475));

    private static final double SECOND = 1e6;

    /** Parts of a scan follow each other at this distance. */
    private static final long PART_MICROS = 40_000;

    private final Traffic traffic;
    private final List<Watch> watches = new ArrayList<>();
    private final long beginMicros;
    private final double lengthSeconds;
    private final Mishaps mishaps = new Mishaps();
    private final PriorityQueue<Sending> queue =
            new PriorityQueue<>(Comparator.comparingLong(Sending::dueMicros).thenComparingLong(Sending::serial));
    private final NavigableMap<Scan, List<LatLon>> faceValues = new TreeMap<>();
    private long serial;

    /**
     * A scan's name.
     *
     * @param timeMicros scan time, microseconds since 1970-01-01T00:00:00Z
     */
    public record Scan(long timeMicros, String sensor) implements Comparable<Scan> {
        @Override
        public int compareTo(Scan other) {
            int byTime = Long.compare(timeMicros, other.timeMicros);
            return byTime != 0 ? byTime : sensor.compareTo(other.sensor);
        }
    }

    /**
     * A part on its way.
     *
     * @param dueMicros when it reaches the bus, microseconds since 1970-01-01T00:00:00Z
     * @param serial    parts that are due at once come in this order
     */
    public record Sending(long dueMicros, long serial, Part part) {}

    /** A sensor, and when it looks next. */
    private static final class Watch {

        private final ShoreSensor sensor;
        private final double offsetSeconds;
        private long scans;

        Watch(ShoreSensor sensor, double offsetSeconds) {
            this.sensor = sensor;
            this.offsetSeconds = offsetSeconds;
        }

        double nextSeconds() {
            return offsetSeconds + scans * sensor.intervalSeconds();
        }
    }

    /**
     * A world that begins now.
     *
     * @param beginMicros   microseconds since 1970-01-01T00:00:00Z
     * @param lengthSeconds when it ends, infinite for a world that never does
     */
    public EstuaryWorld(Site site, long seed, long beginMicros, double lengthSeconds) {
        SplittableRandom random = new SplittableRandom(seed);
        this.traffic = new Traffic(random.split());
        this.beginMicros = beginMicros;
        this.lengthSeconds = lengthSeconds;
        Map<String, ShoreSensor.Writing> writings = new TreeMap<>(Map.of(
                "north-shore", ShoreSensor.Writing.PLACES,
                "pilot-house", ShoreSensor.Writing.OFFSETS,
                "south-shore", ShoreSensor.Writing.OFFSETS));
        double offsetSeconds = 0;
        for (Map.Entry<String, ShoreSensor.Writing> entry : writings.entrySet()) {
            Chance chance = new Chance(random.split());
            watches.add(new Watch(
                    new ShoreSensor(site.sensor(entry.getKey()).orElseThrow(), entry.getValue(), 24, chance),
                    offsetSeconds));
            offsetSeconds += 0.3;
        }
    }

    /** The site file of the estuary, as it comes with the program. */
    public static Site site() {
        try (InputStream in = EstuaryWorld.class.getResourceAsStream("/demo/site.yaml")) {
            String text = new String(in.readAllBytes(), StandardCharsets.UTF_8);
            if (SiteReader.readText(text) instanceof SiteResult.Valid valid) {
                return valid.site();
            }
            throw new IllegalStateException("the demo's site file has faults");
        } catch (IOException e) {
            throw new UncheckedIOException("the demo's site file cannot be read", e);
        }
    }

    /** The next part in the order of arrival, empty after the world's end. */
    public synchronized Optional<Sending> next() {
        Watch watch = earliest();
        while (isOpen(watch) && (queue.isEmpty() || queue.peek().dueMicros() >= micros(watch.nextSeconds()))) {
            look(watch);
            watch = earliest();
        }
        return Optional.ofNullable(queue.poll());
    }

    /** The last scan of all; only a world that ends has one. */
    public Scan lastScan() {
        Scan last = null;
        for (Watch watch : watches) {
            double interval = watch.sensor.intervalSeconds();
            double looks = StrictMath.ceil((lengthSeconds - watch.offsetSeconds) / interval);
            Scan scan = new Scan(micros(watch.offsetSeconds + (looks - 1) * interval), watch.sensor.name());
            last = last == null || scan.compareTo(last) > 0 ? scan : last;
        }
        return last;
    }

    /** Where every vessel truly is. */
    public synchronized List<LatLon> truth(long timeMicros) {
        return places((timeMicros - beginMicros) / SECOND);
    }

    /** Where a scan's detections are, each taken for an object; empty where there was no such scan. */
    public synchronized List<LatLon> faceValue(Scan scan) {
        return faceValues.getOrDefault(scan, List.of());
    }

    /** Forgets what was before a time, for which nobody will ask any more. */
    public synchronized void forgetBefore(long timeMicros) {
        traffic.forgetBefore((timeMicros - beginMicros) / SECOND);
        faceValues.headMap(new Scan(timeMicros, ""), false).clear();
    }

    private Watch earliest() {
        return watches.stream().min(Comparator.comparingDouble(Watch::nextSeconds)).orElseThrow();
    }

    private boolean isOpen(Watch watch) {
        return watch.nextSeconds() < lengthSeconds;
    }

    private void look(Watch watch) {
        double seconds = watch.nextSeconds();
        long timeMicros = micros(seconds);
        watch.scans++;
        ShoreSensor.Sent sent = watch.sensor.scan(places(seconds), timeMicros, watch.scans);
        faceValues.put(new Scan(timeMicros, watch.sensor.name()), sent.places());
        double leftSeconds = lengthSeconds - watch.nextSeconds();
        if (leftSeconds <= 0) {
            Part closing = sent.parts().get(sent.parts().size() - 1);
            closing.setPromise(new SensorPromise(null));
        }
        for (Part part : sent.parts()) {
            long due = timeMicros + (part.getPart() + 1) * PART_MICROS;
            if (leftSeconds > 4 * watch.sensor.intervalSeconds()) {
                due += mishaps.happenTo(part, watch.scans, micros(watch.nextSeconds()) - timeMicros);
            }
            queue.add(new Sending(due, serial++, part));
        }
    }

    private List<LatLon> places(double seconds) {
        return traffic.at(seconds).stream().map(PLANE::toGeodetic).toList();
    }

    private long micros(double seconds) {
        return beginMicros + Math.round(seconds * SECOND);
    }
}
