package org.sweeptally.replay;

import java.util.ArrayList;
import java.util.List;
import java.util.function.Consumer;
import org.apache.avro.specific.SpecificRecordBase;
import org.sweeptally.event.Count;
import org.sweeptally.event.Track;

/** Gathers a machine's records scan by scan: its count completes a scan. */
final class ScanOutputs implements RecordOutputs.Taker {

    private final Consumer<Scan> sink;
    private List<Track> tracks = new ArrayList<>();
    private List<SpecificRecordBase> changes = new ArrayList<>();

    /** The records of one scan; changes are births and ends. */
    record Scan(List<Track> tracks, List<SpecificRecordBase> changes, Count count) {

        /** What names the scan. */
        String name() {
            return count.getSensor() + " " + count.getScanTimeMicros();
        }
    }

    ScanOutputs(Consumer<Scan> sink) {
        this.sink = sink;
    }

    @Override
    public void take(RecordKind kind, SpecificRecordBase record) {
        switch (kind) {
            case TRACKS -> tracks.add((Track) record);
            case BIRTHS, ENDS -> changes.add(record);
            case COUNTS -> {
                sink.accept(new Scan(tracks, changes, (Count) record));
                tracks = new ArrayList<>();
                changes = new ArrayList<>();
            }
            case REJECTS -> { }
        }
    }
}
