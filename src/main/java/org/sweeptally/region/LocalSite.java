package org.sweeptally.region;

import java.util.ArrayDeque;
import java.util.Collection;
import java.util.Deque;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.Optional;
import java.util.function.Function;
import org.sweeptally.event.EndOfInputBody;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.ProgressMarkBody;
import org.sweeptally.event.Reject;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.event.TickBody;
import org.sweeptally.region.intake.SourcePosition;
import org.sweeptally.site.EffectiveSettings;
import org.sweeptally.site.Site;
import org.sweeptally.site.SiteReader;
import org.sweeptally.site.SiteResult;

/**
 * All regions of a site in one place without a bus: each region's log is what this object applies to its machine, one
 * entry after the other, and what a machine wants appended follows at once. Time is whatever the caller says it is.
 */
public final class LocalSite {

    private static final String OPERATOR = "operator";

    private final PartRouter router;
    private final Map<String, RegionMachine> machines = new LinkedHashMap<>();
    private final Map<String, MachineOutputs> outputs = new LinkedHashMap<>();
    private long beyondReach;
    private long outside;

    /** @param outputsOf where a region's records go; {@link MachineOutputs#append} is not called on it */
    public LocalSite(Site site, Function<String, MachineOutputs> outputsOf) {
        router = new PartRouter(site);
        SettingsBody settings =
                new SettingsBody(EffectiveSettings.text(site), site.revision(), RegionMachine.MACHINE_VERSION);
        site.regions().forEach(region -> {
            machines.put(region.name(), new RegionMachine(region.name(), LocalSite::readSettings));
            outputs.put(region.name(), outputsOf.apply(region.name()));
            apply(region.name(), operatorEntry(settings));
        });
    }

    /** Reads settings that were written out by {@link EffectiveSettings}. */
    public static Site readSettings(String text) {
        if (SiteReader.readText(text) instanceof SiteResult.Valid valid) {
            return valid.site();
        }
        throw new IllegalArgumentException("effective settings that cannot be read back: " + text);
    }

    /** Sends a part to the regions that it concerns; what rejectOutside asks to reject is handed to the caller. */
    public Optional<Reject> part(PartBody whole, SourcePosition source) {
        String sensor = whole.getPart().getSensor();
        PartRouter.Routed routed = router.route(partEntry(sensor, source, whole));
        beyondReach += routed.beyondReach();
        outside += routed.outside();
        routed.byRegion().forEach((region, body) -> apply(region, partEntry(sensor, source, body)));
        return Optional.ofNullable(routed.reject());
    }

    /** Lets the clock strike in every region, after all that was sent has been read. */
    public void tick(long wallMicros) {
        for (String region : machines.keySet()) {
            apply(region, operatorEntry(new ProgressMarkBody(0, 1, wallMicros)));
            apply(region, operatorEntry(new TickBody(wallMicros)));
        }
    }

    /** Says that nothing more will come: whatever waits takes effect. */
    public void endOfInput() {
        machines.keySet().forEach(region -> apply(region, operatorEntry(new EndOfInputBody())));
    }

    public Collection<RegionMachine> machines() {
        return machines.values();
    }

    /** Detections that lay beyond their sensor's reach. */
    public long beyondReach() {
        return beyondReach;
    }

    /** Detections within reach that lay outside every region and its apron. */
    public long outside() {
        return outside;
    }

    private void apply(String region, LogEntry entry) {
        Deque<LogEntry> entries = new ArrayDeque<>();
        entries.add(entry);
        MachineOutputs out = new AppendingOutputs(outputs.get(region), entries::add);
        while (!entries.isEmpty()) {
            machines.get(region).apply(entries.remove(), out);
        }
    }

    private static LogEntry operatorEntry(Object body) {
        return new LogEntry(null, OPERATOR, null, null, null, body);
    }

    private static LogEntry partEntry(String sensor, SourcePosition source, PartBody body) {
        return new LogEntry(null, sensor, source.partition(), source.offset(), null, body);
    }
}
