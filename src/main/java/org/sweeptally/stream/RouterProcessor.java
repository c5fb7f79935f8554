package org.sweeptally.stream;

import java.time.Duration;
import java.util.Optional;
import java.util.OptionalLong;
import org.apache.kafka.common.KafkaException;
import org.apache.kafka.streams.processor.PunctuationType;
import org.apache.kafka.streams.processor.api.Processor;
import org.apache.kafka.streams.processor.api.ProcessorContext;
import org.apache.kafka.streams.processor.api.Record;
import org.apache.kafka.streams.processor.api.RecordMetadata;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.Reject;
import org.sweeptally.region.PartRouter;
import org.sweeptally.region.intake.Original;
import org.sweeptally.region.intake.SourcePosition;
import org.sweeptally.region.wire.Wire;

/**
 * Writes each part of one partition of the detections to the logs of the regions that it concerns, and what cannot be
 * used to the rejects. It keeps no state. Every second it tells all regions whether the partition has been read to its
 * end, behind all that it had written before.
 */
final class RouterProcessor implements Processor<byte[], byte[], byte[], byte[]> {

    static final String NAME = "router";

    private static final Duration MARK = Duration.ofSeconds(1);

    private final RouterPlan plan;
    private ProcessorContext<byte[], byte[]> context;
    private Forwarding forwarding;
    private RouterSites sites;
    private int sitesVersion;
    private int partition;
    private ReadingWatch.Reading reading;

    RouterProcessor(RouterPlan plan) {
        this.plan = plan;
    }

    /** May be called again on the same object. */
    @Override
    public void init(ProcessorContext<byte[], byte[]> taskContext) {
        close();
        context = taskContext;
        forwarding = new Forwarding(taskContext, NAME);
        sites = null;
        partition = taskContext.taskId().partition();
        reading = plan.watch().begins(partition);
        taskContext.schedule(MARK, PunctuationType.WALL_CLOCK_TIME, this::mark);
    }

    @Override
    public void process(Record<byte[], byte[]> record) {
        RecordMetadata at = context.recordMetadata()
                .orElseThrow(() -> new IllegalStateException("a part comes from nowhere"));
        forwarding.of(null, record.timestamp());
        SourcePosition source = new SourcePosition(at.partition(), at.offset());
        RouterSites.Read read = sites().read(record.value(), source);
        read.intake().reject().ifPresent(this::reject);
        read.intake().body().ifPresent(body -> route(body, read.router(), source, record));
        reading.routed(at.offset());
    }

    /** Made anew when a new revision has been written: the next part is the first that is read by it. */
    private RouterSites sites() {
        int version = plan.revisions().version();
        if (sites == null || version != sitesVersion) {
            sites = new RouterSites(plan.revisions().all());
            sitesVersion = version;
        }
        return sites;
    }

    private void route(PartBody body, PartRouter router, SourcePosition source, Record<byte[], byte[]> record) {
        PartRouter.Routed routed = router.route(entry(body, source, record));
        if (routed.reject() != null) {
            reject(routed.reject());
        }
        routed.byRegion().forEach((region, part) -> {
            byte[] value = Wire.encode(entry(part, source, record));
            if (value.length > TopicPlan.LARGEST_ENTRY_BYTES - Oversize.RECORD_OVERHEAD_BYTES) {
                Original original = Original.of(record.value(), Optional.of(source));
                reject(Oversize.reject(region, part, value.length, original));
                value = Wire.encode(entry(Oversize.emptied(part), source, record));
            }
            forwarding.send(Output.REGION_LOG, RegionPartitions.key(region), value);
        });
    }

    private LogEntry entry(PartBody body, SourcePosition source, Record<byte[], byte[]> record) {
        Long append = plan.appendTimes() ? record.timestamp() * 1000 : null;
        return OperatorEntries.part(source.partition(), source.offset(), append, body);
    }

    private void reject(Reject reject) {
        byte[] key = reject.getRegion() == null ? null : RegionPartitions.key(reject.getRegion());
        forwarding.send(Output.REJECTS, key, Wire.encode(reject));
    }

    /** As with ticks, no exception of the bus may leave from here. */
    private void mark(long wallMillis) {
        OptionalLong read = reading.readToEndAt();
        if (read.isEmpty()) {
            return;
        }
        byte[] mark = Wire.encode(
                OperatorEntries.progressMark(partition, plan.watch().partitions(), read.getAsLong()));
        try {
            forwarding.of(null, wallMillis);
            for (String region : plan.regions().regions()) {
                forwarding.send(Output.REGION_LOG, RegionPartitions.key(region), mark);
            }
        } catch (KafkaException e) {
            throw new IllegalStateException("a progress mark could not be written: " + e.getMessage(), e);
        }
    }

    @Override
    public void close() {
        if (reading != null) {
            reading.ends();
        }
    }
}
