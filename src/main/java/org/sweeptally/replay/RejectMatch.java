package org.sweeptally.replay;

import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.List;
import java.util.Optional;
import java.util.TreeMap;
import java.util.TreeSet;
import org.apache.avro.specific.SpecificRecordBase;
import org.sweeptally.event.Digest;
import org.sweeptally.event.Reject;
import org.sweeptally.region.wire.Digests;
import org.sweeptally.region.wire.Wire;

/**
 * Rejects have no log time, so where those of a replay begin on the topic is not known beforehand: they must be found
 * there, all of them and none between. Only their digests are held.
 */
final class RejectMatch {

    private final List<Digest> replayed = new ArrayList<>();
    private final List<String> names = new ArrayList<>();

    void replayed(SpecificRecordBase reject) {
        replayed.add(Digests.sha256(Wire.encode(reject)));
        names.add(((Reject) reject).getSentence());
    }

    int size() {
        return replayed.size();
    }

    /**
     * Looks for a run of the recorded rejects that holds those of the replay as a set; what differs if there is
     * none.
     */
    Optional<Difference> compare(RecordCursor recorded) {
        TreeMap<Digest, Integer> open = new TreeMap<>();
        replayed.forEach(digest -> add(open, digest, 1));
        TreeSet<Digest> wanted = new TreeSet<>(replayed);
        TreeMap<Digest, Integer> published = new TreeMap<>();
        Deque<Digest> window = new ArrayDeque<>();
        while (!open.isEmpty()) {
            RecordCursor.Recorded next = recorded.next();
            if (next == null) {
                return Optional.of(difference(published));
            }
            Digest digest = Digests.sha256(next.value());
            if (wanted.contains(digest)) {
                add(published, digest, 1);
            }
            window.add(digest);
            add(open, digest, -1);
            if (window.size() > replayed.size()) {
                add(open, window.remove(), 1);
            }
        }
        return Optional.empty();
    }

    /** Counts that come to zero are let go, so that what is open is no more than the window and the replay. */
    private static void add(TreeMap<Digest, Integer> counts, Digest digest, int number) {
        if (counts.merge(digest, number, Integer::sum) == 0) {
            counts.remove(digest);
        }
    }

    private Difference difference(TreeMap<Digest, Integer> seen) {
        for (int i = 0; i < replayed.size(); i++) {
            if (seen.merge(replayed.get(i), -1, Integer::sum) < 0) {
                return new Difference(RecordKind.REJECTS, names.get(i), "",
                        "the replay rejects: " + names.get(i) + "; no such reject was published");
            }
        }
        return new Difference(RecordKind.REJECTS, names.get(0), "", "all " + replayed.size()
                + " rejects of the replay were published, but with others between them");
    }
}
