package org.sweeptally.demo;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.security.MessageDigest;
import java.util.HexFormat;
import java.util.Optional;
import java.util.TreeMap;
import java.util.TreeSet;
import java.util.function.Function;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.Birth;
import org.sweeptally.event.Count;
import org.sweeptally.event.End;
import org.sweeptally.event.Finding;
import org.sweeptally.event.Heartbeat;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Picture;
import org.sweeptally.event.Reject;
import org.sweeptally.event.Track;
import org.sweeptally.filter.LogOdds;
import org.sweeptally.filter.ObjectEvidence;
import org.sweeptally.filter.ObjectEvidence.Fate;
import org.sweeptally.filter.ObjectEvidence.Kind;
import org.sweeptally.filter.ObjectEvidence.Step;
import org.sweeptally.filter.ScanEvidence;
import org.sweeptally.region.LocalSite;
import org.sweeptally.region.MachineOutputs;
import org.sweeptally.region.intake.PartDecoder;
import org.sweeptally.region.intake.SourcePosition;
import org.sweeptally.region.wire.Digests;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/** The evidence for every object of the demo's estuary, all the recording long. */
class DemoEvidenceTest {

    private final MessageDigest records = Digests.newSha256();
    private final TreeMap<String, Double> lastAfter = new TreeMap<>();
    private final TreeMap<Kind, Integer> kinds = new TreeMap<>();
    private final TreeSet<String> objects = new TreeSet<>();
    private final TreeMap<String, ObjectEvidence> ofScan = new TreeMap<>();
    private final TreeMap<String, TreeMap<String, Double>> pending = new TreeMap<>();
    private long scans;
    private long tracks;
    private long returns;

    @Test
    void theStepsSumToTheWholeChangeAndAreWhatWasPublished() {
        String without = run(false);
        records.reset();
        assertThat(run(true)).as("observing changes no bit").isEqualTo(without);
        assertThat(kinds).containsOnlyKeys(Kind.values());
        assertThat(kinds.values()).allMatch(count -> count > 0);
        assertThat(returns).isPositive();
        System.out.println("DemoEvidenceTest: " + scans + " scans, " + objects.size() + " objects, " + tracks
                + " tracks compared with their evidence, " + returns + " returns after recycling; steps " + kinds);
    }

    private String run(boolean observed) {
        Site site = EstuaryWorld.site();
        EstuaryWorld world = new EstuaryWorld(site, 1, Demo.USUAL_BEGIN_MICROS, Demo.USUAL_SECONDS);
        LocalSite machines = new LocalSite(site, (Function<String, MachineOutputs>) Outputs::new);
        if (observed) {
            machines.machines().forEach(machine ->
                    machine.observe(scan -> scan(machine.region(), scan)));
        }
        PartDecoder decoder = new PartDecoder(site);
        long offset = 0;
        for (Optional<EstuaryWorld.Sending> next = world.next(); next.isPresent(); next = world.next()) {
            SourcePosition source = new SourcePosition(0, offset++);
            decoder.decode(Wire.encode(next.get().part()), Optional.of(source))
                    .body()
                    .ifPresent(body -> machines.part(body, source));
        }
        return HexFormat.of().formatHex(records.digest());
    }

    private void scan(String region, ScanEvidence scan) {
        scans++;
        TreeSet<String> here = new TreeSet<>();
        for (ObjectEvidence object : scan.objects()) {
            String name = region + "/" + object.identity().text();
            assertThat(here.add(name)).as("%s twice in a scan", name).isTrue();
            objects.add(name);
            ofScan.put(name, object);
            check(name, object);
        }
        lastAfter.keySet().removeIf(name -> name.startsWith(region + "/") && !here.contains(name));
    }

    private void check(String name, ObjectEvidence object) {
        double sum = Double.isNaN(object.before()) ? 0 : object.before();
        for (Step step : object.steps()) {
            sum += step.change();
            kinds.merge(step.kind(), 1, Integer::sum);
            returns += step.kind() == Kind.RETURNED ? 1 : 0;
        }
        assertThat(sum).as(name).isCloseTo(object.after(), within(1e-9));
        boolean begun = object.beginning() != null;
        assertThat(Double.isNaN(object.before())).isEqualTo(begun);
        assertThat(lastAfter.containsKey(name)).as("%s is continued, unless it begins here", name).isEqualTo(!begun);
        if (!begun) {
            assertThat(object.before()).as(name).isEqualTo(lastAfter.get(name));
        }
        object.steps().stream().filter(step -> step.kind() == Kind.MISSED).forEach(step -> assertThat(step.change())
                .isCloseTo(StrictMath.log(1 - object.probabilityOfDetection()), within(1e-12)));
        if (object.fate() == Fate.KEPT) {
            lastAfter.put(name, object.after());
        } else {
            lastAfter.remove(name);
        }
    }

    /** What a machine publishes: all of it into one digest, and tracks against their evidence. */
    private final class Outputs implements MachineOutputs {

        private final String region;

        Outputs(String region) {
            this.region = region;
        }

        @Override
        public void track(Track track) {
            records.update(Wire.encode(track));
            pending.computeIfAbsent(region, r -> new TreeMap<>()).put(track.getObject(), track.getExistence());
        }

        @Override
        public void count(Count count) {
            records.update(Wire.encode(count));
            pending.getOrDefault(region, new TreeMap<>()).forEach((object, existence) -> {
                ObjectEvidence evidence = ofScan.get(region + "/" + object);
                if (evidence != null) {
                    assertThat(LogOdds.probability(evidence.after())).as(object).isEqualTo(existence);
                    tracks++;
                }
            });
            pending.remove(region);
        }

        @Override
        public void birth(Birth birth) {
            records.update(Wire.encode(birth));
        }

        @Override
        public void end(End end) {
            records.update(Wire.encode(end));
        }

        @Override
        public void picture(String key, Picture picture) {}

        @Override
        public void heartbeat(Heartbeat heartbeat) {}

        @Override
        public void finding(Finding finding) {}

        @Override
        public void reject(Reject reject) {
            records.update(Wire.encode(reject));
        }

        @Override
        public void append(LogEntry entry) {}
    }
}
