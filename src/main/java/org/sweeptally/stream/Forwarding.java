package org.sweeptally.stream;

import java.util.EnumMap;
import java.util.Map;
import org.apache.avro.specific.SpecificRecordBase;
import org.apache.kafka.common.KafkaException;
import org.apache.kafka.streams.processor.api.ProcessorContext;
import org.apache.kafka.streams.processor.api.Record;
import org.sweeptally.event.Birth;
import org.sweeptally.event.Count;
import org.sweeptally.event.End;
import org.sweeptally.event.Finding;
import org.sweeptally.event.Heartbeat;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Picture;
import org.sweeptally.event.Reject;
import org.sweeptally.event.SnapshotPiece;
import org.sweeptally.event.Track;
import org.sweeptally.region.MachineOutputs;
import org.sweeptally.region.wire.Wire;

/** Sends what a processor makes to the sinks of the topology, as bytes. */
final class Forwarding implements MachineOutputs {

    private final ProcessorContext<byte[], byte[]> context;
    private final Map<Output, String> nodes = new EnumMap<>(Output.class);
    private byte[] region;
    private long millis;

    Forwarding(ProcessorContext<byte[], byte[]> context, String processor) {
        this.context = context;
        for (Output output : Output.values()) {
            nodes.put(output, output.node(processor));
        }
    }

    /** Whatever comes next belongs to a region, and follows from a record with a time. */
    Forwarding of(byte[] regionKey, long recordMillis) {
        region = regionKey;
        millis = recordMillis;
        return this;
    }

    @Override
    public void track(Track track) {
        send(Output.TRACKS, track);
    }

    @Override
    public void birth(Birth birth) {
        send(Output.BIRTHS, birth);
    }

    @Override
    public void end(End end) {
        send(Output.ENDS, end);
    }

    @Override
    public void count(Count count) {
        send(Output.COUNTS, count);
    }

    @Override
    public void picture(String key, Picture picture) {
        byte[] value = picture == null ? null : Wire.encode(picture);
        send(Output.PICTURE, RegionPartitions.key(key), value);
    }

    @Override
    public void heartbeat(Heartbeat heartbeat) {
        send(Output.HEARTBEAT, heartbeat);
    }

    @Override
    public void finding(Finding finding) {
        send(Output.FINDINGS, finding);
    }

    @Override
    public void reject(Reject reject) {
        send(Output.REJECTS, reject);
    }

    @Override
    public void append(LogEntry entry) {
        send(Output.REGION_LOG, entry);
    }

    /** The pieces first: a head tells that all of them are there. */
    void snapshot(Snapshot snapshot) {
        for (SnapshotPiece piece : snapshot.pieces()) {
            send(Output.SNAPSHOTS, piece);
        }
        send(Output.SNAPSHOTS, snapshot.head());
    }

    /** Sends bytes. What the bus's library finds amiss must not look like a fault of the machine. */
    void send(Output output, byte[] key, byte[] value) {
        try {
            context.forward(new Record<>(key, value, millis), nodes.get(output));
        } catch (IllegalStateException e) {
            throw new KafkaException("a record could not be handed to the bus: " + e.getMessage(), e);
        }
    }

    private void send(Output output, SpecificRecordBase record) {
        send(output, region, Wire.encode(record));
    }
}
