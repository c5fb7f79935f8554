package org.sweeptally.region;

import java.util.List;
import java.util.Map;
import java.util.TreeMap;
import java.util.function.Function;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/**
 * The settings of a region by the time from which they hold: those in force, later ones that wait for their turn, and
 * those before, as long as a scan that began under them may still come. A scan is ordered by the settings that hold at
 * its own time, so that it does not matter whether it comes before or after the settings have taken effect.
 */
final class SettingsTimeline {

    private static final int PAST_REVISIONS = 8;

    private final TreeMap<Long, RegionRules> byFrom = new TreeMap<>();

    /** Settings that others replaced before they took effect, by revision: a writer may write them again. */
    private final TreeMap<Integer, SettingsBody> superseded = new TreeMap<>();

    private long inForceFromMicros = Micros.BEFORE_ALL;

    /** The first settings hold from the beginning. */
    SettingsTimeline(RegionRules first) {
        byFrom.put(Micros.BEFORE_ALL, first);
    }

    RegionRules inForce() {
        return byFrom.get(inForceFromMicros);
    }

    /** The rules that hold at a time, as far as is known. */
    RegionRules at(long micros) {
        Map.Entry<Long, RegionRules> entry = byFrom.floorEntry(micros);
        return entry == null ? byFrom.firstEntry().getValue() : entry.getValue();
    }

    /** The last settings of a sensor that hold at a time or held before, as far as is known; null if none do. */
    SensorSettings lastBefore(long micros, String sensor) {
        for (RegionRules rules : byFrom.headMap(micros, true).descendingMap().values()) {
            if (rules.sensor(sensor) != null) {
                return rules.sensor(sensor);
            }
        }
        return null;
    }

    /** Whether the settings are among those held, so that they say nothing new. */
    boolean holds(SettingsBody body) {
        SettingsBody replaced = superseded.get(body.getRevision());
        return (replaced != null && replaced.getText().equals(body.getText()))
                || byFrom.values().stream().anyMatch(rules -> rules.revision() == body.getRevision()
                        && rules.body().getText().equals(body.getText()));
    }

    /** The highest revision known, in force or waiting. */
    RegionRules latest() {
        return byFrom.lastEntry().getValue();
    }

    /**
     * Adds settings with a revision above all others. They are the last word from their time on: what was to take
     * effect then or later does not any more.
     *
     * @return times of the settings that were waiting and no longer are
     */
    List<Long> add(long fromMicros, RegionRules rules) {
        List<Long> replaced = byFrom.tailMap(fromMicros, true).keySet().stream()
                .filter(from -> from > inForceFromMicros)
                .toList();
        for (long from : replaced) {
            SettingsBody body = byFrom.remove(from).body();
            superseded.put(body.getRevision(), body);
        }
        byFrom.put(fromMicros, rules);
        return replaced;
    }

    /** Lets the settings that hold from a time take effect. */
    void takeEffect(long fromMicros) {
        if (!byFrom.containsKey(fromMicros)) {
            throw new IllegalStateException("no settings hold from " + Micros.text(fromMicros));
        }
        inForceFromMicros = fromMicros;
    }

    /**
     * Forgets settings under which no scan can have begun that takes effect at the horizon or later. The last few stay
     * in any case, so that what is said of a part that comes much too late does not depend on when it comes.
     */
    void forgetBefore(long horizonMicros) {
        while (byFrom.headMap(inForceFromMicros).size() > PAST_REVISIONS) {
            long until = byFrom.higherKey(byFrom.firstKey());
            long lastEffect = Micros.plus(until, byFrom.firstEntry().getValue().longestSweepMicros());
            if (lastEffect > horizonMicros) {
                return;
            }
            byFrom.pollFirstEntry();
        }
    }

    void write(StateWriter out) {
        out.number(byFrom.size());
        byFrom.forEach((from, rules) -> out.time(from).record(rules.body()));
        out.time(inForceFromMicros);
        out.number(superseded.size());
        superseded.values().forEach(out::record);
    }

    static SettingsTimeline read(StateReader in, String region, Function<String, Site> reader) {
        int size = in.number();
        long from = in.time();
        RegionRules rules = RegionRules.first(in.record(SettingsBody.class), region, reader);
        SettingsTimeline timeline = new SettingsTimeline(rules);
        timeline.byFrom.clear();
        timeline.byFrom.put(from, rules);
        for (int i = 1; i < size; i++) {
            from = in.time();
            rules = rules.next(in.record(SettingsBody.class), reader);
            timeline.byFrom.put(from, rules);
        }
        timeline.takeEffect(in.time());
        for (int left = in.number(); left > 0; left--) {
            SettingsBody body = in.record(SettingsBody.class);
            timeline.superseded.put(body.getRevision(), body);
        }
        return timeline;
    }
}
