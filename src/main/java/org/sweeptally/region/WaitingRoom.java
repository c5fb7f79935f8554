package org.sweeptally.region;

import java.util.Comparator;
import java.util.NavigableMap;
import java.util.TreeMap;
import org.sweeptally.event.LogEntry;

/**
 * What waits for the horizon, in the order in which it takes effect: by log time, kind, sensor or sender, and object or
 * scan.
 */
final class WaitingRoom {

    /** Kinds in the order in which they take effect at one log time. */
    enum Kind {
        SETTINGS,
        INTRODUCTION,
        HANDOVER,
        ENDED,
        SCAN
    }

    /**
     * A place in the order.
     *
     * @param name           the sensor, or the sender
     * @param object         the object that a neighbour's entry is about, else empty
     * @param scanTimeMicros the scan's time, else 0
     */
    record Place(long logTimeMicros, Kind kind, String name, String object, long scanTimeMicros)
            implements Comparable<Place> {

        private static final Comparator<Place> ORDER = Comparator.comparingLong(Place::logTimeMicros)
                .thenComparing(Place::kind)
                .thenComparing(Place::name)
                .thenComparing(Place::object)
                .thenComparingLong(Place::scanTimeMicros);

        static Place of(ScanParts scan) {
            return new Place(scan.logTimeMicros(), Kind.SCAN, scan.sensor(), "", scan.scanTimeMicros());
        }

        static Place ofSettings(long fromMicros) {
            return new Place(fromMicros, Kind.SETTINGS, "", "", 0);
        }

        @Override
        public int compareTo(Place other) {
            return ORDER.compare(this, other);
        }
    }

    /** What waits: a scan, or one entry; the other is null. */
    record Waiting(ScanParts scan, LogEntry entry, long bytes) {

        static Waiting of(ScanParts scan) {
            return new Waiting(scan, null, scan.bytes());
        }

        static Waiting of(LogEntry entry) {
            return new Waiting(null, entry, EntryBytes.of(entry));
        }

        int entries() {
            return scan == null ? 1 : scan.size();
        }
    }

    private final NavigableMap<Place, Waiting> byPlace = new TreeMap<>();
    private long bytes;
    private int entries;

    /** Lets something wait; where its place is taken, the first stands, and this says no. */
    boolean add(Place place, Waiting waiting) {
        if (byPlace.putIfAbsent(place, waiting) != null) {
            return false;
        }
        bytes += waiting.bytes();
        entries += waiting.entries();
        return true;
    }

    void remove(Place place) {
        Waiting waiting = byPlace.remove(place);
        if (waiting != null) {
            bytes -= waiting.bytes();
            entries -= waiting.entries();
        }
    }

    boolean isEmpty() {
        return byPlace.isEmpty();
    }

    /** The next place to take effect; there must be one. */
    Place next() {
        return byPlace.firstKey();
    }

    Waiting poll() {
        Place place = byPlace.firstKey();
        Waiting waiting = byPlace.get(place);
        remove(place);
        return waiting;
    }

    long bytes() {
        return bytes;
    }

    int entries() {
        return entries;
    }

    /** Throws where the state contradicts itself, or where something waits that should have taken effect. */
    void check(long horizonMicros) {
        long sum = 0;
        int count = 0;
        Place before = null;
        for (var entry : byPlace.entrySet()) {
            Place place = entry.getKey();
            Invariant.holds(before == null || before.compareTo(place) < 0, "%s waits before %s", before, place);
            Invariant.holds(place.logTimeMicros() >= horizonMicros, "%s waits, and the horizon is %s", place,
                    horizonMicros);
            sum += entry.getValue().bytes();
            count += entry.getValue().entries();
            before = place;
        }
        Invariant.holds(sum == bytes && count == entries, "%s entries of %s bytes wait, and %s of %s were counted",
                count, sum, entries, bytes);
    }

    void write(StateWriter out) {
        out.number(byPlace.size());
        byPlace.forEach((place, waiting) -> {
            out.time(place.logTimeMicros()).number(place.kind().ordinal()).text(place.name()).text(place.object());
            out.time(place.scanTimeMicros()).flag(waiting.scan() != null);
            if (waiting.scan() != null) {
                waiting.scan().write(out);
            } else {
                out.record(waiting.entry());
            }
        });
    }

    static WaitingRoom read(StateReader in) {
        WaitingRoom room = new WaitingRoom();
        for (int left = in.number(); left > 0; left--) {
            Place place = new Place(in.time(), Kind.values()[in.number()], in.text(), in.text(), in.time());
            boolean scan = in.flag();
            room.add(place, scan ? Waiting.of(ScanParts.read(in)) : Waiting.of(in.record(LogEntry.class)));
        }
        return room;
    }
}
