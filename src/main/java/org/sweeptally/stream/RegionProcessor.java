package org.sweeptally.stream;

import java.time.Duration;
import java.util.Optional;
import java.util.function.Consumer;
import org.apache.kafka.common.KafkaException;
import org.apache.kafka.streams.processor.PunctuationType;
import org.apache.kafka.streams.processor.api.Processor;
import org.apache.kafka.streams.processor.api.ProcessorContext;
import org.apache.kafka.streams.processor.api.Record;
import org.apache.kafka.streams.state.KeyValueStore;
import org.sweeptally.region.NewerMachineVersionException;
import org.sweeptally.region.wire.Wire;

/**
 * Applies the entries of one partition of the region log to the machines of its regions. What the machines hold is
 * never in a store of the bus; the stores hold the last snapshots, and how far the log has been applied, which come to
 * last in the same transaction as the outputs. After a failure the rest is made again from the log.
 */
final class RegionProcessor implements Processor<byte[], byte[], byte[], byte[]> {

    static final String NAME = "region";
    static final String SNAPSHOTS = "snapshots";
    static final String PROGRESS = "progress";

    private static final String PROGRESS_KEY = "progress";
    private static final Duration TICK = Duration.ofSeconds(1);

    private final RegionPlan plan;
    private final Consumer<String> says;
    private Forwarding forwarding;
    private SnapshotStore snapshots;
    private KeyValueStore<String, byte[]> progress;
    private ProcessorContext<byte[], byte[]> context;
    private LiveRegions live;

    /** @param says what happens, a sentence each, for whoever runs the operator */
    RegionProcessor(RegionPlan plan, Consumer<String> says) {
        this.plan = plan;
        this.says = says;
    }

    /** Called again on the same object when a task is revived, so nothing of before may stay. */
    @Override
    public void init(ProcessorContext<byte[], byte[]> taskContext) {
        live = null;
        context = taskContext;
        forwarding = new Forwarding(taskContext, NAME);
        snapshots = new SnapshotStore(taskContext.getStateStore(SNAPSHOTS));
        progress = taskContext.getStateStore(PROGRESS);
        live = recover(taskContext.taskId().partition());
        taskContext.schedule(TICK, PunctuationType.WALL_CLOCK_TIME, this::tick);
    }

    private LiveRegions recover(int partition) {
        long begin = System.nanoTime();
        Recovery recovery = new Recovery(() -> plan.begin(partition), plan.reader());
        Optional<Progress> applied = Optional.ofNullable(progress.get(PROGRESS_KEY)).map(Progress::of);
        if (applied.isEmpty()) {
            plan.freshStart().refusal(partition).ifPresent(why -> {
                throw new OperatorStoppedException("partition " + partition + " of the region log: " + why);
            });
        }
        Recovery.Recovered recovered;
        try {
            recovered = recovery.recover(snapshots.all(), applied);
        } catch (IllegalArgumentException | IllegalStateException | NewerMachineVersionException e) {
            throw new OperatorStoppedException("partition " + partition + " of the region log cannot be recovered: "
                    + e.getMessage(), e);
        }
        if (applied.isPresent()) {
            long millis = (System.nanoTime() - begin) / 1_000_000;
            says.accept("partition " + partition + " is back: regions " + recovered.regions().names() + ", "
                    + recovered.entriesAgain() + " of " + applied.get().entries() + " entries applied again in "
                    + millis + " ms");
            if (millis > plan.longestTail().toMillis()) {
                says.accept("partition " + partition + " took longer than half the transaction timeout to come back"
                        + " (" + millis + " ms, of " + plan.longestTail().toMillis() + " ms): lower snapshotScans, or"
                        + " give the process fewer regions");
            }
        }
        return recovered.regions();
    }

    @Override
    public void process(Record<byte[], byte[]> record) {
        long offset = context.recordMetadata()
                .orElseThrow(() -> new IllegalStateException("an entry of the region log comes from nowhere"))
                .offset();
        checkIsNext(offset);
        LogRecord entry = LogRecord.of(live, offset, record.key(), record.value());
        forwarding.of(record.key(), record.timestamp());
        try {
            live.apply(entry.region(), offset, entry.entry(), forwarding);
        } catch (IllegalArgumentException | IllegalStateException | NewerMachineVersionException e) {
            throw new OperatorStoppedException("offset " + offset + " of partition " + live.partition()
                    + " of the region log: " + e.getMessage() + "; nothing after it was used", e);
        }
        LiveRegion region = live.region(entry.region());
        if (region.isSnapshotDue()) {
            Snapshot snapshot = region.snapshot(live.partition(), offset);
            snapshots.put(snapshot);
            forwarding.snapshot(snapshot);
        }
        progress.put(PROGRESS_KEY, live.progress().toBytes());
    }

    /** Offset and state are committed together, so only somebody else can set the group back. */
    private void checkIsNext(long offset) {
        if (offset <= live.applied()) {
            throw new OperatorStoppedException("offset " + offset + " of partition " + live.partition()
                    + " of the region log comes again, it was applied up to " + live.applied() + ": the offsets of"
                    + " the operator's group have been set back or deleted; set them to " + (live.applied() + 1)
                    + "; nothing was used twice");
        }
    }

    /**
     * Writes a tick to every region's log; it acts when it comes back from there. An exception of the bus must not
     * leave from here: the bus's library would commit what it should abort.
     */
    private void tick(long wallMillis) {
        plan.tailStarts().startsAt(live.partition(), live.progress().tailStart());
        try {
            byte[] tick = Wire.encode(OperatorEntries.tick(wallMillis * 1000));
            for (String region : live.names()) {
                forwarding.of(RegionPartitions.key(region), wallMillis);
                forwarding.send(Output.REGION_LOG, RegionPartitions.key(region), tick);
            }
        } catch (KafkaException e) {
            throw new IllegalStateException("a tick could not be written: " + e.getMessage(), e);
        }
    }

    @Override
    public void close() {
        if (live != null) {
            plan.tailStarts().ends(live.partition());
        }
        live = null;
    }
}
