package org.sweeptally.region;

import java.util.List;
import java.util.Map;
import java.util.NavigableMap;
import java.util.TreeMap;
import org.sweeptally.event.Count;
import org.sweeptally.event.EndWhy;
import org.sweeptally.event.Picture;
import org.sweeptally.event.Track;
import org.sweeptally.filter.Component;
import org.sweeptally.filter.Identity;
import org.sweeptally.filter.ObjectFilter;
import org.sweeptally.filter.ScanResult;
import org.sweeptally.geo.LatLon;

/**
 * Says what of a filter's state is in the picture. An object is published while it is confirmed and its mean is in the
 * region's core; that it begins to be is a birth, that it no longer is an end.
 */
final class Publisher {

    /** How often, at most, the picture repeats a key, in log time. */
    private static final long PICTURE_PERIOD_MICROS = 1_000_000;

    private final RegionArea area;
    /** When each published object was last put into the picture. */
    private final NavigableMap<Identity, Long> published = new TreeMap<>();

    private long countPicturedMicros = Micros.BEFORE_ALL;
    private long sequence;

    Publisher(RegionArea area) {
        this.area = area;
    }

    long sequence() {
        return sequence;
    }

    /** Publishes the state after a scan: births, tracks and ends by identity, then the count that completes them. */
    void publish(ScanParts scan, int revision, ObjectFilter filter, ScanResult result, MachineOutputs out) {
        sequence++;
        ScanRecords records = new ScanRecords(area, scan, sequence);
        NavigableMap<Identity, Shown> shown = shown(filter);
        int births = 0;
        for (Shown object : shown.values()) {
            Component component = object.component();
            if (!published.containsKey(component.identity())) {
                out.birth(records.birth(component, object.place()));
                component.markBorn();
                published.put(component.identity(), Micros.BEFORE_ALL);
                births++;
            }
            track(records.track(component, object.place(), filter.tellsStill()), component.identity(), out);
        }
        int ends = endOthers(shown, filter, result, records, out);
        Count count = records.count(filter, shown.size(), births, ends, revision);
        out.count(count);
        if (isDue(countPicturedMicros, count.getTimeMicros())) {
            countPicturedMicros = count.getTimeMicros();
            out.picture(area.name(), new Picture(area.name(), count));
        }
    }

    /** A component that is in the picture, and where on the ellipsoid its mean is. */
    private record Shown(Component component, LatLon place) {}

    private NavigableMap<Identity, Shown> shown(ObjectFilter filter) {
        NavigableMap<Identity, Shown> shown = new TreeMap<>();
        for (Component component : filter.components()) {
            if (component.confirmed()) {
                LatLon place = ScanRecords.placeOf(component, area);
                if (area.owns(place)) {
                    shown.put(component.identity(), new Shown(component, place));
                }
            }
        }
        return shown;
    }

    private void track(Track track, Identity identity, MachineOutputs out) {
        out.track(track);
        if (isDue(published.get(identity), track.getTimeMicros())) {
            published.put(identity, track.getTimeMicros());
            out.picture(key(track.getObject()), new Picture(area.name(), track));
        }
    }

    private static boolean isDue(long lastMicros, long nowMicros) {
        return lastMicros == Micros.BEFORE_ALL || nowMicros - lastMicros >= PICTURE_PERIOD_MICROS;
    }

    private String key(String object) {
        return area.name() + "/" + object;
    }

    /** Ends whatever was published and is not shown any more; says how many. */
    private int endOthers(
            NavigableMap<Identity, Shown> shown,
            ObjectFilter filter,
            ScanResult result,
            ScanRecords records,
            MachineOutputs out) {
        // All that is shown has been published, so equal numbers mean that nothing else has.
        if (published.size() == shown.size()) {
            return 0;
        }
        List<Identity> ended =
                published.keySet().stream().filter(identity -> !shown.containsKey(identity)).toList();
        NavigableMap<Identity, Ending> endings = endings(filter, result);
        for (Identity identity : ended) {
            Ending ending = endings.get(identity);
            Invariant.holds(ending != null, "%s was published, and the filter has lost it", identity);
            out.end(records.end(ending.component(), ending.why()));
            out.picture(key(identity.text()), null);
            published.remove(identity);
        }
        return ended.size();
    }

    private record Ending(Component component, EndWhy why) {}

    /** Why each published object would end, if it does. */
    private NavigableMap<Identity, Ending> endings(ObjectFilter filter, ScanResult result) {
        NavigableMap<Identity, Ending> endings = new TreeMap<>();
        addEndings(result.recycled(), EndWhy.BOUND, endings);
        addEndings(result.gone(), EndWhy.LEFT, endings);
        addEndings(filter.components(), EndWhy.LEFT, endings);
        return endings;
    }

    private void addEndings(List<Component> from, EndWhy ifConfirmed, Map<Identity, Ending> endings) {
        for (Component component : from) {
            if (published.containsKey(component.identity())) {
                EndWhy why = component.confirmed() ? ifConfirmed : EndWhy.FADED;
                endings.put(component.identity(), new Ending(component, why));
            }
        }
    }

    /** Throws where something is published that the filter does not hold. */
    void check(List<Component> components) {
        NavigableMap<Identity, Component> live = new TreeMap<>();
        for (Component component : components) {
            Component other = live.put(component.identity(), component);
            Invariant.holds(other == null, "two live components are %s", component.identity());
        }
        for (Identity identity : published.keySet()) {
            Component component = live.get(identity);
            Invariant.holds(component != null, "%s is published and not live", identity);
            Invariant.holds(component.bornBefore(), "%s is published and was never born", identity);
        }
    }

    void write(StateWriter out) {
        out.time(sequence).time(countPicturedMicros).number(published.size());
        published.forEach((identity, pictured) -> out.text(identity.text()).time(pictured));
    }

    static Publisher read(StateReader in, RegionArea area) {
        Publisher publisher = new Publisher(area);
        publisher.sequence = in.time();
        publisher.countPicturedMicros = in.time();
        for (int left = in.number(); left > 0; left--) {
            publisher.published.put(Identity.parse(in.text()), in.time());
        }
        return publisher;
    }
}
