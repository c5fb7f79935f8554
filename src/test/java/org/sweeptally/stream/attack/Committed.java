package org.sweeptally.stream.attack;

import java.io.ByteArrayOutputStream;
import java.nio.ByteBuffer;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;
import org.apache.kafka.clients.consumer.ConsumerRecord;
import org.sweeptally.event.Digest;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.SilentBody;
import org.sweeptally.event.SnapshotHead;
import org.sweeptally.event.SnapshotPiece;
import org.sweeptally.region.LocalSite;
import org.sweeptally.region.RegionMachine;
import org.sweeptally.region.wire.Digests;
import org.sweeptally.region.wire.Message;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.stream.TopicNames;

/** What stands committed on the bus after an operator has stopped, and what the machines make of the committed log. */
final class Committed {

    private final TopicNames names;
    private final List<ConsumerRecord<byte[], byte[]>> log;
    private final List<Long> applied;
    private final Outputs published = new Outputs();
    private final Outputs folded = new Outputs();
    private final Map<String, SnapshotHead> heads = new LinkedHashMap<>();
    private final Map<String, List<SnapshotPiece>> pieces = new TreeMap<>();
    private final List<String> wrongSnapshots = new ArrayList<>();
    private int snapshotsCompared;

    /** A part in a region's log. */
    record LoggedPart(String region, int partition, long offset, Digest body) {}

    Committed(TopicNames names) {
        this.names = names;
        this.log = Bus.committed(names.regionLog()).stream().filter(record -> isOf("LogEntry", record)).toList();
        this.applied = Bus.committedOffsets(names.applicationId(), names.regionLog());
        readPublished();
        readSnapshots();
        fold();
    }

    private void readPublished() {
        Map<String, String> topics = Map.of(
                "tracks", names.tracks(), "births", names.births(), "ends", names.ends(), "counts", names.counts(),
                "picture", names.picture(), "heartbeat", names.heartbeat(), "findings", names.findings(),
                Outputs.REJECTS, names.rejects());
        topics.forEach((kind, topic) -> Bus.committed(topic).forEach(
                record -> published.add(kind, record.key() == null ? "" : key(record), record.value())));
        log.stream()
                .filter(record -> entry(record).getBody() instanceof SilentBody)
                .forEach(record -> published.add(Outputs.APPENDS, key(record), record.value()));
    }

    private void readSnapshots() {
        for (ConsumerRecord<byte[], byte[]> record : Bus.committed(names.snapshots())) {
            if (isOf("SnapshotHead", record)) {
                SnapshotHead head = Wire.decode(record.value(), SnapshotHead.class);
                heads.put(head.getLogPartition() + "@" + head.getLogOffset(), head);
            } else {
                SnapshotPiece piece = Wire.decode(record.value(), SnapshotPiece.class);
                pieces.computeIfAbsent(piece.getRegion() + " " + piece.getSnapshot(), k -> new ArrayList<>())
                        .add(piece);
            }
        }
    }

    /** One machine a region, over what the operator has committed to have applied. */
    private void fold() {
        Map<String, RegionMachine> machines = new TreeMap<>();
        for (ConsumerRecord<byte[], byte[]> record : log) {
            if (record.offset() < applied.get(record.partition())) {
                RegionMachine machine = machines.computeIfAbsent(
                        key(record), region -> new RegionMachine(region, LocalSite::readSettings));
                machine.apply(entry(record), folded.of(key(record)));
                compareSnapshot(heads.get(record.partition() + "@" + record.offset()), machine);
            }
        }
    }

    /** A snapshot must be the state of a machine that took in the log up to its offset, bit for bit. */
    private void compareSnapshot(SnapshotHead head, RegionMachine machine) {
        if (head != null) {
            byte[] state = machine.snapshot();
            byte[] written = assembled(head);
            if (!head.getRegion().equals(machine.region())
                    || head.getSequence() != machine.sequence()
                    || !head.getSha256().equals(Digests.sha256(state))
                    || !Arrays.equals(written, state)
                    || !Arrays.equals(RegionMachine.restore(written, LocalSite::readSettings).snapshot(), state)) {
                wrongSnapshots.add(head + " is not the state at its offset");
            }
            snapshotsCompared++;
        }
    }

    private byte[] assembled(SnapshotHead head) {
        ByteArrayOutputStream state = new ByteArrayOutputStream();
        for (SnapshotPiece piece : pieces.get(head.getRegion() + " " + head.getSnapshot())) {
            ByteBuffer bytes = piece.getBytes().duplicate();
            byte[] copy = new byte[bytes.remaining()];
            bytes.get(copy);
            state.writeBytes(copy);
        }
        return state.toByteArray();
    }

    Outputs published() {
        return published;
    }

    Outputs folded() {
        return folded;
    }

    int snapshots() {
        return heads.size();
    }

    int snapshotsCompared() {
        return snapshotsCompared;
    }

    /** Snapshots that are not what the machines over the log hold at their offsets, a sentence each. */
    List<String> wrongSnapshots() {
        return wrongSnapshots;
    }

    /** How many entries the logs of all regions hold. */
    int entries() {
        return log.size();
    }

    long silences() {
        return log.stream().filter(record -> entry(record).getBody() instanceof SilentBody).count();
    }

    /** The parts of the log, by where they stood in the detections. */
    List<LoggedPart> parts() {
        List<LoggedPart> parts = new ArrayList<>();
        for (ConsumerRecord<byte[], byte[]> record : log) {
            LogEntry entry = entry(record);
            if (entry.getBody() instanceof PartBody body) {
                parts.add(new LoggedPart(key(record), entry.getSourcePartition(), entry.getSourceOffset(),
                        Wire.digest(body)));
            }
        }
        return parts;
    }

    /** Whether a record is ours, and of this schema. */
    static boolean isOf(String schema, ConsumerRecord<byte[], byte[]> record) {
        return Wire.open(record.value()) instanceof Message.Ours ours && ours.schema().getName().equals(schema);
    }

    private static LogEntry entry(ConsumerRecord<byte[], byte[]> record) {
        return Wire.decode(record.value(), LogEntry.class);
    }

    private static String key(ConsumerRecord<byte[], byte[]> record) {
        return new String(record.key(), StandardCharsets.UTF_8);
    }
}
