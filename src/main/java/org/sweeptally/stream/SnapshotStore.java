package org.sweeptally.stream;

import java.util.ArrayList;
import java.util.List;
import org.apache.kafka.streams.KeyValue;
import org.apache.kafka.streams.state.KeyValueIterator;
import org.apache.kafka.streams.state.KeyValueStore;
import org.sweeptally.event.SnapshotHead;
import org.sweeptally.event.SnapshotPiece;
import org.sweeptally.region.wire.Wire;

/** The last snapshot of every region of a task, in its state store: pieces and head of each under its region. */
final class SnapshotStore {

    private static final String HEAD = "/head";

    private final KeyValueStore<String, byte[]> store;

    SnapshotStore(KeyValueStore<String, byte[]> store) {
        this.store = store;
    }

    /** Puts a snapshot in the place of the region's last one. */
    void put(Snapshot snapshot) {
        String region = snapshot.head().getRegion();
        byte[] last = store.get(headKey(region));
        int lastPieces = last == null ? 0 : Wire.decode(last, SnapshotHead.class).getPieces();
        for (SnapshotPiece piece : snapshot.pieces()) {
            store.put(pieceKey(region, piece.getPiece()), Wire.encode(piece));
        }
        for (int piece = snapshot.pieces().size(); piece < lastPieces; piece++) {
            store.delete(pieceKey(region, piece));
        }
        store.put(headKey(region), Wire.encode(snapshot.head()));
    }

    /** The last snapshot of every region that has one. */
    List<Snapshot> all() {
        List<Snapshot> snapshots = new ArrayList<>();
        for (SnapshotHead head : heads()) {
            List<SnapshotPiece> pieces = new ArrayList<>();
            for (int piece = 0; piece < head.getPieces(); piece++) {
                byte[] bytes = store.get(pieceKey(head.getRegion(), piece));
                if (bytes != null) {
                    pieces.add(Wire.decode(bytes, SnapshotPiece.class));
                }
            }
            snapshots.add(new Snapshot(head, pieces));
        }
        return snapshots;
    }

    private List<SnapshotHead> heads() {
        List<SnapshotHead> heads = new ArrayList<>();
        try (KeyValueIterator<String, byte[]> all = store.all()) {
            while (all.hasNext()) {
                KeyValue<String, byte[]> next = all.next();
                if (next.key.endsWith(HEAD)) {
                    heads.add(Wire.decode(next.value, SnapshotHead.class));
                }
            }
        }
        return heads;
    }

    private static String headKey(String region) {
        return region + HEAD;
    }

    private static String pieceKey(String region, int piece) {
        return String.format("%s/piece-%06d", region, piece);
    }
}
