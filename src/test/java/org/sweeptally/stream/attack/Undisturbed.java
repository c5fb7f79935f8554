package org.sweeptally.stream.attack;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.TreeMap;
import org.apache.kafka.clients.consumer.ConsumerRecord;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.region.LocalSite;
import org.sweeptally.region.PartRouter;
import org.sweeptally.region.RegionMachine;
import org.sweeptally.region.intake.Intake;
import org.sweeptally.region.intake.PartDecoder;
import org.sweeptally.region.intake.SourcePosition;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.EffectiveSettings;
import org.sweeptally.site.Site;

/**
 * The same detections through the machines without a bus, without ticks, and without trouble: all settings first, each
 * with its log time, then one partition of the detections after the other. The revisions may differ only in what the
 * router does not look at.
 */
final class Undisturbed {

    private final Outputs outputs = new Outputs();
    private final Outputs routed = new Outputs();
    private final List<Committed.LoggedPart> parts = new ArrayList<>();
    private final Map<String, RegionMachine> machines = new TreeMap<>();

    Undisturbed(List<Site> revisions, String detections) {
        Site site = revisions.get(0);
        site.regions().forEach(region ->
                machines.put(region.name(), new RegionMachine(region.name(), LocalSite::readSettings)));
        revisions.forEach(revision -> machines.keySet().forEach(region -> apply(region, settings(revision))));
        PartDecoder decoder = new PartDecoder(site);
        PartRouter router = new PartRouter(site);
        Bus.committed(detections).forEach(record -> part(record, decoder, router));
    }

    private void part(ConsumerRecord<byte[], byte[]> record, PartDecoder decoder, PartRouter router) {
        Intake intake = decoder.decode(
                record.value(), Optional.of(new SourcePosition(record.partition(), record.offset())));
        intake.reject().ifPresent(reject -> routed.add(Outputs.REJECTS, "", Wire.encode(reject)));
        intake.body().ifPresent(whole -> router.route(entry(record, whole)).byRegion().forEach((region, body) -> {
            parts.add(new Committed.LoggedPart(region, record.partition(), record.offset(), Wire.digest(body)));
            apply(region, entry(record, body));
        }));
    }

    private void apply(String region, LogEntry entry) {
        machines.get(region).apply(entry, outputs.of(region));
    }

    private static LogEntry settings(Site site) {
        Long from = site.fromMicros().isPresent() ? site.fromMicros().getAsLong() : null;
        return new LogEntry(from, "operator", null, null, null, new SettingsBody(
                EffectiveSettings.text(site), site.revision(), RegionMachine.MACHINE_VERSION));
    }

    private static LogEntry entry(ConsumerRecord<byte[], byte[]> record, PartBody body) {
        return new LogEntry(null, body.getPart().getSensor(), record.partition(), record.offset(), null, body);
    }

    /** What the machines put out. */
    Outputs outputs() {
        return outputs;
    }

    /** How many records there are that another run must reproduce. */
    long number() {
        long records = outputs.number(Outputs.REJECTS) + routed.number(Outputs.REJECTS);
        for (String kind : Outputs.RECORD) {
            records += outputs.number(kind);
        }
        return records;
    }

    /** What was rejected before any machine heard it. */
    Outputs routed() {
        return routed;
    }

    /** Every part that some region must hear, once. */
    List<Committed.LoggedPart> parts() {
        return parts;
    }
}
