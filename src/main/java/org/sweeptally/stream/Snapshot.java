package org.sweeptally.stream;

import java.io.ByteArrayOutputStream;
import java.nio.ByteBuffer;
import java.util.ArrayList;
import java.util.List;
import java.util.OptionalLong;
import org.sweeptally.event.SnapshotHead;
import org.sweeptally.event.SnapshotPiece;
import org.sweeptally.region.RegionCounters;
import org.sweeptally.region.RegionMachine;
import org.sweeptally.region.wire.Digests;

/**
 * The whole state of a region as records that fit any bus: pieces under 512 KiB, and a head that tells what they add up
 * to.
 */
public record Snapshot(SnapshotHead head, List<SnapshotPiece> pieces) {

    /** With the record around it a piece stays under 512 KiB. */
    static final int PIECE_BYTES = 500 * 1024;

    /** The state of a machine that has just applied the entry at an offset. */
    static Snapshot of(RegionMachine machine, long number, int logPartition, long logOffset) {
        byte[] state = machine.snapshot();
        List<SnapshotPiece> pieces = pieces(machine.region(), number, state);
        OptionalLong picture = machine.pictureMicros();
        SnapshotHead head = SnapshotHead.newBuilder()
                .setRegion(machine.region())
                .setSnapshot(number)
                .setFormatVersion(RegionMachine.FORMAT_VERSION)
                .setMachineVersion(RegionMachine.MACHINE_VERSION)
                .setSettingsRevision(machine.settingsRevision().orElse(0))
                .setLogPartition(logPartition)
                .setLogOffset(logOffset)
                .setEntries(machine.counters().get(RegionCounters.Name.ENTRIES))
                .setSequence(machine.sequence())
                .setPictureMicros(picture.isPresent() ? picture.getAsLong() : null)
                .setPieces(pieces.size())
                .setLengthBytes(state.length)
                .setSha256(Digests.sha256(state))
                .build();
        return new Snapshot(head, pieces);
    }

    static List<SnapshotPiece> pieces(String region, long number, byte[] state) {
        List<SnapshotPiece> pieces = new ArrayList<>();
        for (int from = 0; from < state.length; from += PIECE_BYTES) {
            ByteBuffer bytes = ByteBuffer.wrap(state, from, Math.min(PIECE_BYTES, state.length - from)).slice();
            pieces.add(new SnapshotPiece(region, number, pieces.size(), bytes));
        }
        return pieces;
    }

    /**
     * The state that the pieces add up to.
     *
     * @throws IllegalStateException if they are not what the head says
     */
    public byte[] state() {
        ByteArrayOutputStream state = new ByteArrayOutputStream((int) head.getLengthBytes());
        for (SnapshotPiece piece : pieces) {
            ByteBuffer bytes = piece.getBytes().duplicate();
            byte[] copy = new byte[bytes.remaining()];
            bytes.get(copy);
            state.writeBytes(copy);
        }
        byte[] whole = state.toByteArray();
        if (pieces.size() != head.getPieces() || !Digests.sha256(whole).equals(head.getSha256())) {
            throw new IllegalStateException("snapshot " + head.getSnapshot() + " of region " + head.getRegion()
                    + " should have " + head.getPieces() + " pieces and " + head.getLengthBytes() + " bytes, and has "
                    + pieces.size() + " and " + whole.length + ", or others");
        }
        return whole;
    }
}
