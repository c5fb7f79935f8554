package org.sweeptally.region;

import java.util.NavigableMap;
import java.util.TreeMap;
import org.sweeptally.event.ProgressMarkBody;

/** How far the detections have been read, by the clock of who read them. */
final class ProgressMarks {

    private final NavigableMap<Integer, Long> wallByPartition = new TreeMap<>();
    private int partitions;

    void mark(ProgressMarkBody mark) {
        partitions = Math.max(partitions, mark.getPartitionCount());
        wallByPartition.merge(mark.getPartition(), mark.getWallMicros(), Math::max);
    }

    /** Whether every partition was read to its end at that moment or later; no mark at all says nothing. */
    boolean allReadAt(long wallMicros) {
        for (int partition = 0; partition < partitions; partition++) {
            Long wall = wallByPartition.get(partition);
            if (wall == null || wall < wallMicros) {
                return false;
            }
        }
        return partitions > 0;
    }

    void write(StateWriter out) {
        out.number(partitions).number(wallByPartition.size());
        wallByPartition.forEach((partition, wall) -> out.number(partition).time(wall));
    }

    static ProgressMarks read(StateReader in) {
        ProgressMarks marks = new ProgressMarks();
        marks.partitions = in.number();
        for (int left = in.number(); left > 0; left--) {
            marks.wallByPartition.put(in.number(), in.time());
        }
        return marks;
    }
}
