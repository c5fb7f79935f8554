package org.sweeptally.region;

import java.util.List;
import java.util.NavigableMap;
import java.util.TreeMap;
import java.util.function.Function;
import org.sweeptally.site.Site;

/** All that a region's machine remembers. Its bytes are the snapshot. */
final class RegionState {

    final String region;
    final RegionCounters counters = new RegionCounters();
    final NavigableMap<String, SensorOrder> sensors = new TreeMap<>();
    final NavigableMap<String, Long> neighbourPromises = new TreeMap<>();

    RawEntries raw = new RawEntries();
    ProgressMarks marks = new ProgressMarks();
    WaitingRoom waiting = new WaitingRoom();

    /** Null before the first settings; so is the effect. */
    SettingsTimeline timeline;

    ScanEffect effect;
    /** Everything with an earlier log time has taken effect. */
    long horizonMicros = Micros.BEFORE_ALL;
    /** Greatest log time of all scans that were closed whole. */
    long latestWholeMicros = Micros.BEFORE_ALL;
    /** Latest tick. */
    long wallMicros = Micros.BEFORE_ALL;

    boolean ended;

    private List<SensorOrder> heard = List.of();
    private long checkedHorizonMicros = Micros.BEFORE_ALL;

    RegionState(String region) {
        this.region = region;
    }

    /** The settings in force. */
    RegionRules rules() {
        return timeline.inForce();
    }

    /** The sensors that the settings in force know and the region hears, by name. */
    List<SensorOrder> heard() {
        return heard;
    }

    /** From now on the region waits for the sensors that the settings in force know. */
    void meetSensors() {
        List<SensorOrder> before = heard;
        for (String sensor : rules().sensors().keySet()) {
            sensors.computeIfAbsent(sensor, name -> new SensorOrder(name, horizonMicros));
        }
        listHeard();
        heard.stream().filter(sensor -> !before.contains(sensor)).forEach(sensor -> sensor.join(horizonMicros));
    }

    private void listHeard() {
        heard = rules().sensors().keySet().stream().map(sensors::get).toList();
    }

    /** How far the picture may go by what has come so far. */
    Horizon horizon() {
        return ended ? new Horizon(Micros.AFTER_ALL, null) : Horizon.of(heard, latestWholeMicros);
    }

    /** Bytes of all entries that have not taken effect, those of open scans included. */
    long waitingBytes() {
        long bytes = waiting.bytes() + raw.bytes();
        for (SensorOrder sensor : sensors.values()) {
            for (ScanParts scan : sensor.open().values()) {
                bytes += scan.bytes();
            }
        }
        return bytes;
    }

    int waitingEntries() {
        int entries = waiting.entries() + raw.size();
        for (SensorOrder sensor : sensors.values()) {
            for (ScanParts scan : sensor.open().values()) {
                entries += scan.size();
            }
        }
        return entries;
    }

    /**
     * @throws IllegalStateException where the state contradicts itself, or the horizon went back since the last check
     */
    void check() {
        Invariant.holds(horizonMicros >= checkedHorizonMicros, "the horizon went back from %s to %s",
                checkedHorizonMicros, horizonMicros);
        checkedHorizonMicros = horizonMicros;
        waiting.check(horizonMicros);
        sensors.values().forEach(SensorOrder::check);
        if (timeline != null) {
            Invariant.holds(raw.size() == 0, "%s entries wait raw, and there are settings", raw.size());
            Invariant.holds(effect.lastEffectMicros() < horizonMicros || horizonMicros == Micros.AFTER_ALL
                            || effect.lastEffectMicros() == Micros.BEFORE_ALL,
                    "a scan of %s took effect, and the horizon is %s", effect.lastEffectMicros(), horizonMicros);
            effect.check();
        }
    }

    void write(StateWriter out) {
        out.text(region).time(horizonMicros).time(latestWholeMicros).time(wallMicros).flag(ended);
        out.piece(counters::write);
        raw.write(out);
        marks.write(out);
        waiting.write(out);
        out.number(neighbourPromises.size());
        neighbourPromises.forEach((neighbour, promise) -> out.text(neighbour).time(promise));
        out.number(sensors.size());
        sensors.values().forEach(sensor -> sensor.write(out));
        out.flag(timeline != null);
        if (timeline != null) {
            timeline.write(out);
            effect.write(out);
        }
    }

    static RegionState read(StateReader in, Function<String, Site> settingsReader) {
        RegionState state = new RegionState(in.text());
        state.horizonMicros = in.time();
        state.latestWholeMicros = in.time();
        state.wallMicros = in.time();
        state.ended = in.flag();
        in.piece(i -> {
            state.counters.read(i);
            return state;
        });
        state.raw = RawEntries.read(in);
        state.marks = ProgressMarks.read(in);
        state.waiting = WaitingRoom.read(in);
        for (int left = in.number(); left > 0; left--) {
            state.neighbourPromises.put(in.text(), in.time());
        }
        for (int left = in.number(); left > 0; left--) {
            SensorOrder sensor = SensorOrder.read(in);
            state.sensors.put(sensor.sensor(), sensor);
        }
        if (in.flag()) {
            state.timeline = SettingsTimeline.read(in, state.region, settingsReader);
            state.effect = ScanEffect.read(in, state.rules());
            state.listHeard();
        }
        return state;
    }
}
