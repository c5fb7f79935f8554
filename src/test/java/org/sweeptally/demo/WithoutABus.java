package org.sweeptally.demo;

import java.nio.charset.StandardCharsets;
import java.util.Optional;
import org.apache.avro.specific.SpecificRecordBase;
import org.sweeptally.event.Birth;
import org.sweeptally.event.Count;
import org.sweeptally.event.End;
import org.sweeptally.event.Finding;
import org.sweeptally.event.Heartbeat;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Picture;
import org.sweeptally.event.Reject;
import org.sweeptally.event.Track;
import org.sweeptally.region.LocalSite;
import org.sweeptally.region.MachineOutputs;
import org.sweeptally.region.intake.Intake;
import org.sweeptally.region.intake.PartDecoder;
import org.sweeptally.region.intake.SourcePosition;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;
import org.sweeptally.stream.TopicNames;

/** The demo's world through the region machines alone, tallied as the demo's subscriber does. */
final class WithoutABus {

    private final Site site = EstuaryWorld.site();
    private final TopicNames names = TopicNames.of(site);
    private final EstuaryWorld world;
    private final PictureTally tally;

    private WithoutABus(EstuaryWorld world) {
        this.world = world;
        this.tally = new PictureTally(site, names, world);
    }

    static DemoReport report(long seed, long beginMicros, double seconds) {
        WithoutABus run = new WithoutABus(new EstuaryWorld(EstuaryWorld.site(), seed, beginMicros, seconds));
        run.run();
        return run.tally.report(seed, beginMicros);
    }

    private void run() {
        LocalSite machines = new LocalSite(site, Topics::new);
        PartDecoder decoder = new PartDecoder(site);
        long offset = 0;
        for (Optional<EstuaryWorld.Sending> next = world.next(); next.isPresent(); next = world.next()) {
            SourcePosition source = new SourcePosition(0, offset++);
            Intake intake = decoder.decode(Wire.encode(next.get().part()), Optional.of(source));
            intake.reject().ifPresent(reject -> take(names.rejects(), "", reject));
            intake.body().flatMap(body -> machines.part(body, source))
                    .ifPresent(reject -> take(names.rejects(), "", reject));
        }
    }

    private void take(String topic, String key, SpecificRecordBase recordOrNull) {
        byte[] value = recordOrNull == null ? null : Wire.encode(recordOrNull);
        tally.take(topic, key.getBytes(StandardCharsets.UTF_8), value);
    }

    /** What a region's machine says, as it would stand on the topics. */
    private final class Topics implements MachineOutputs {

        private final String region;

        Topics(String region) {
            this.region = region;
        }

        @Override
        public void track(Track track) {
            take(names.tracks(), region, track);
        }

        @Override
        public void birth(Birth birth) {
            take(names.births(), region, birth);
        }

        @Override
        public void end(End end) {
            take(names.ends(), region, end);
        }

        @Override
        public void count(Count count) {
            take(names.counts(), region, count);
        }

        @Override
        public void picture(String key, Picture picture) {
            take(names.picture(), key, picture);
        }

        @Override
        public void reject(Reject reject) {
            take(names.rejects(), region, reject);
        }

        @Override
        public void heartbeat(Heartbeat heartbeat) {
            throw new IllegalStateException("without ticks there is no heartbeat");
        }

        @Override
        public void finding(Finding finding) {
            throw new IllegalStateException("the estuary is as its site file says: " + finding);
        }

        @Override
        public void append(LogEntry entry) {
            throw new IllegalStateException("entries for the log belong into it");
        }
    }
}
