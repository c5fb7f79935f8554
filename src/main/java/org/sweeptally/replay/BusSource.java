package org.sweeptally.replay;

import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import java.util.NavigableMap;
import java.util.Optional;
import java.util.OptionalLong;
import java.util.TreeMap;
import java.util.concurrent.ExecutionException;
import org.apache.avro.specific.SpecificRecordBase;
import org.apache.kafka.clients.admin.Admin;
import org.apache.kafka.clients.admin.ListConsumerGroupOffsetsOptions;
import org.apache.kafka.clients.consumer.ConsumerRecord;
import org.apache.kafka.clients.consumer.OffsetAndMetadata;
import org.apache.kafka.common.TopicPartition;
import org.apache.kafka.common.errors.UnknownTopicOrPartitionException;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.event.SnapshotHead;
import org.sweeptally.event.SnapshotPiece;
import org.sweeptally.region.wire.Message;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.stream.ClientSettings;
import org.sweeptally.stream.RegionPartitions;
import org.sweeptally.stream.Snapshot;
import org.sweeptally.stream.TopicNames;

/** A running bus. The operator may go on meanwhile, and notices nothing. */
public final class BusSource implements RecordedSource {

    /** Rejects are looked for from so long before the snapshot was appended: other topics may have been slower. */
    private static final long REJECTS_BEFORE_MILLIS = 600_000;

    /** Records of other regions, and marks of transactions, that may stand between a head and its pieces. */
    private static final int RECORDS_BETWEEN = 16;

    /** And so many times as far where that was not enough. */
    private static final int FARTHER = 8;

    private final ClientSettings clients;
    private final TopicNames names;
    private final RegionPartitions regions;
    private final List<String> regionNames;
    private final Admin admin;
    private final NavigableMap<String, Long> snapshotMillis = new TreeMap<>();

    /** @param regions names of all regions of the site: they tell what stands on which partition */
    public BusSource(ClientSettings clients, TopicNames names, List<String> regions) {
        this.clients = clients;
        this.names = names;
        this.regions = new RegionPartitions(regions);
        this.regionNames = regions.stream().sorted().toList();
        this.admin = Admin.create(clients.admin("replay"));
    }

    @Override
    public String site() {
        return names.site();
    }

    @Override
    public List<String> regions() {
        return regionNames;
    }

    @Override
    public List<SettingsBody> settings() {
        NavigableMap<Integer, SettingsBody> byRevision = new TreeMap<>();
        try (BusPartition topic = new BusPartition(clients, admin, names.settings(), 0, site())) {
            for (ConsumerRecord<byte[], byte[]> record = topic.next(); record != null; record = topic.next()) {
                if (record.value() != null
                        && Wire.decode(record.value(), LogEntry.class).getBody() instanceof SettingsBody body) {
                    byRevision.put(body.getRevision(), body);
                }
            }
        }
        return List.copyOf(byRevision.values());
    }

    @Override
    public Beginning before(String region, long micros) {
        try (BusPartition snapshots = open(names.snapshots(), region);
                BusPartition log = open(names.regionLog(), region)) {
            Optional<ConsumerRecord<byte[], byte[]>> head = headBefore(snapshots, micros);
            if (head.isPresent()) {
                snapshotMillis.put(region, head.get().timestamp());
                return new Beginning(Optional.of(assemble(snapshots, head.get())));
            }
            snapshotMillis.remove(region);
            if (log.begin() > 0) {
                throw new ReplayFailedException("region " + region + " has no snapshot on " + names.snapshots()
                        + " of before --from, and " + names.regionLog() + " begins at offset " + log.begin()
                        + " only: a replay can begin later, where there is a snapshot");
            }
            return new Beginning(Optional.empty());
        }
    }

    private static Optional<ConsumerRecord<byte[], byte[]>> headBefore(BusPartition snapshots, long micros) {
        snapshots.seek(snapshots.search(micros, BusSource::pictureMicros));
        ConsumerRecord<byte[], byte[]> last = null;
        for (ConsumerRecord<byte[], byte[]> record = snapshots.next(); record != null; record = snapshots.next()) {
            OptionalLong picture = pictureMicros(record);
            if (picture.isPresent()) {
                if (picture.getAsLong() >= micros) {
                    break;
                }
                last = record;
            }
        }
        return Optional.ofNullable(last);
    }

    /** Of a snapshot's head: the time of its picture, the beginning where it has none yet; empty of a piece. */
    private static OptionalLong pictureMicros(ConsumerRecord<byte[], byte[]> record) {
        if (!isOf(record, SnapshotHead.class)) {
            return OptionalLong.empty();
        }
        Long micros = Wire.decode(record.value(), SnapshotHead.class).getPictureMicros();
        return OptionalLong.of(micros == null ? Long.MIN_VALUE : micros);
    }

    private static boolean isOf(ConsumerRecord<byte[], byte[]> record, Class<?> type) {
        return record.value() != null
                && Wire.open(record.value()) instanceof Message.Ours ours
                && ours.schema().getFullName().equals(type.getName());
    }

    /** The pieces stand before their head, close by. */
    private Snapshot assemble(BusPartition snapshots, ConsumerRecord<byte[], byte[]> headRecord) {
        SnapshotHead head = Wire.decode(headRecord.value(), SnapshotHead.class);
        long back = head.getPieces() + RECORDS_BETWEEN;
        while (true) {
            long from = Math.max(snapshots.begin(), headRecord.offset() - back);
            List<SnapshotPiece> pieces = pieces(snapshots, head, from, headRecord.offset());
            if (pieces.size() == head.getPieces() || from == snapshots.begin()) {
                return new Snapshot(head, pieces);
            }
            back *= FARTHER;
        }
    }

    private static List<SnapshotPiece> pieces(BusPartition snapshots, SnapshotHead head, long from, long until) {
        List<SnapshotPiece> pieces = new ArrayList<>();
        snapshots.seek(from);
        ConsumerRecord<byte[], byte[]> record = snapshots.next();
        while (record != null && record.offset() < until) {
            if (isOf(record, SnapshotPiece.class)) {
                SnapshotPiece piece = Wire.decode(record.value(), SnapshotPiece.class);
                if (piece.getSnapshot() == head.getSnapshot()) {
                    pieces.add(piece);
                }
            }
            record = snapshots.next();
        }
        return pieces;
    }

    @Override
    public LogCursor log(String region, Beginning beginning) {
        long applied = applied(region);
        BusPartition log = open(names.regionLog(), region);
        log.endAt(applied);
        long from = beginning.offset() + 1;
        if (log.begin() > from) {
            log.close();
            throw new ReplayFailedException(names.regionLog() + " begins at offset " + log.begin() + ", and region "
                    + region + " needs it from offset " + from + ": its retention has cut it; choose a later --from");
        }
        log.seek(from);
        return new BusLog(log);
    }

    /** Offset up to which the operator has committed what follows from the log; all there is where nobody knows. */
    private long applied(String region) {
        TopicPartition partition = new TopicPartition(names.regionLog(), partition(names.regionLog(), region));
        try {
            OffsetAndMetadata offset = admin.listConsumerGroupOffsets(
                            names.applicationId(), new ListConsumerGroupOffsetsOptions().requireStable(true))
                    .partitionsToOffsetAndMetadata(names.applicationId())
                    .get()
                    .get(partition);
            return offset == null ? Long.MAX_VALUE : offset.offset();
        } catch (ExecutionException e) {
            throw new ReplayFailedException("asking how far the operator of site " + names.site() + " has come: "
                    + e.getCause().getMessage(), e);
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
            throw new ReplayFailedException("interrupted", e);
        }
    }

    private record BusLog(BusPartition log) implements LogCursor {
        @Override
        public Logged next() {
            ConsumerRecord<byte[], byte[]> record = log.next();
            if (record != null && record.value() == null) {
                throw new ReplayFailedException(log.where(record) + " holds a record without a value");
            }
            return record == null ? null : new Logged(record.offset(), record.value());
        }

        @Override
        public long end() {
            return log.end();
        }

        @Override
        public void close() {
            log.close();
        }
    }

    @Override
    public RecordCursor records(RecordKind kind, String region, Beginning beginning, long fromMicros) {
        BusPartition topic = open(kind.topic(names), region);
        if (kind != RecordKind.REJECTS) {
            topic.seek(topic.search(fromMicros, record -> timeOf(kind, record)));
        } else if (beginning.snapshot().isPresent() && snapshotMillis.containsKey(region)) {
            topic.seekToAppended(snapshotMillis.get(region) - REJECTS_BEFORE_MILLIS);
        }
        return new BusRecords(kind, topic, fromMicros);
    }

    private static OptionalLong timeOf(RecordKind kind, ConsumerRecord<byte[], byte[]> record) {
        try {
            SpecificRecordBase decoded = kind.decode(record.value());
            return OptionalLong.of(RecordKind.timeMicros(decoded));
        } catch (IllegalArgumentException e) {
            return OptionalLong.empty();
        }
    }

    private static final class BusRecords implements RecordCursor {

        private final RecordKind kind;
        private final BusPartition topic;
        private final long fromMicros;
        private boolean begun;

        BusRecords(RecordKind kind, BusPartition topic, long fromMicros) {
            this.kind = kind;
            this.topic = topic;
            this.fromMicros = fromMicros;
            this.begun = kind == RecordKind.REJECTS;
        }

        @Override
        public Recorded next() {
            ConsumerRecord<byte[], byte[]> record = topic.next();
            while (record != null && !begun) {
                OptionalLong time = timeOf(kind, record);
                begun = time.isPresent() && time.getAsLong() >= fromMicros;
                record = begun ? record : topic.next();
            }
            return record == null ? null : new Recorded(record.value(), topic.where(record));
        }

        @Override
        public void close() {
            topic.close();
        }
    }

    private BusPartition open(String topic, String region) {
        return new BusPartition(clients, admin, topic, partition(topic, region), region);
    }

    private int partition(String topic, String region) {
        try {
            int partitions = admin.describeTopics(List.of(topic))
                    .topicNameValues()
                    .get(topic)
                    .get()
                    .partitions()
                    .size();
            return regions.partition(region, partitions);
        } catch (ExecutionException e) {
            throw new ReplayFailedException(e.getCause() instanceof UnknownTopicOrPartitionException
                    ? "topic " + topic + " is missing on the bus at " + clients.bus()
                    : "the bus at " + clients.bus() + " does not answer: " + e.getCause().getMessage(), e);
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
            throw new ReplayFailedException("interrupted", e);
        }
    }

    @Override
    public void close() {
        admin.close(Duration.ofSeconds(1));
    }
}
