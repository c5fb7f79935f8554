package org.sweeptally.stream.attack;

import java.nio.ByteBuffer;
import java.util.ArrayList;
import java.util.HexFormat;
import java.util.List;
import java.util.Optional;
import java.util.TreeMap;
import org.apache.avro.specific.SpecificRecordBase;
import org.sweeptally.event.Birth;
import org.sweeptally.event.Count;
import org.sweeptally.event.End;
import org.sweeptally.event.Finding;
import org.sweeptally.event.Heartbeat;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Picture;
import org.sweeptally.event.Reject;
import org.sweeptally.event.Track;
import org.sweeptally.region.MachineOutputs;
import org.sweeptally.region.wire.Wire;

/** Everything that was put out, as bytes: by kind and key, each in its order; rejects and appends as sets. */
final class Outputs {

    /** The record that must reproduce, from any log with the same events. */
    static final List<String> RECORD = List.of("tracks", "births", "ends", "counts");

    static final String REJECTS = "rejects";
    static final String APPENDS = "appends";

    private static final List<String> SETS = List.of(REJECTS, APPENDS);

    private final TreeMap<String, List<ByteBuffer>> byKindAndKey = new TreeMap<>();

    void add(String kind, String key, byte[] value) {
        String under = SETS.contains(kind) ? kind : kind + " of " + key;
        byKindAndKey.computeIfAbsent(under, k -> new ArrayList<>())
                .add(ByteBuffer.wrap(value == null ? new byte[0] : value));
    }

    void addAll(Outputs other, String kind) {
        other.byKindAndKey.forEach((key, records) -> {
            if (isOf(key, kind)) {
                byKindAndKey.computeIfAbsent(key, k -> new ArrayList<>()).addAll(records);
            }
        });
    }

    long number(String kind) {
        return byKindAndKey.entrySet().stream()
                .filter(entry -> isOf(entry.getKey(), kind))
                .mapToLong(entry -> entry.getValue().size())
                .sum();
    }

    /** The first record of a kind that is not the same in both, empty where all are. */
    Optional<String> differenceFrom(Outputs other, String kind) {
        TreeMap<String, List<ByteBuffer>> keys = new TreeMap<>(byKindAndKey);
        other.byKindAndKey.forEach(keys::putIfAbsent);
        for (String key : keys.keySet()) {
            if (isOf(key, kind)) {
                Optional<String> difference = difference(key, sorted(key), other.sorted(key));
                if (difference.isPresent()) {
                    return difference;
                }
            }
        }
        return Optional.empty();
    }

    private static boolean isOf(String key, String kind) {
        return key.equals(kind) || key.startsWith(kind + " of ");
    }

    private List<ByteBuffer> sorted(String key) {
        List<ByteBuffer> records = new ArrayList<>(byKindAndKey.getOrDefault(key, List.of()));
        if (SETS.contains(key)) {
            records.sort(null);
        }
        return records;
    }

    private static Optional<String> difference(String key, List<ByteBuffer> these, List<ByteBuffer> others) {
        for (int i = 0; i < Math.max(these.size(), others.size()); i++) {
            ByteBuffer here = i < these.size() ? these.get(i) : null;
            ByteBuffer there = i < others.size() ? others.get(i) : null;
            if (here == null || !here.equals(there)) {
                return Optional.of(key + ": record " + i + " of " + these.size() + " is " + hex(here) + ", and of "
                        + others.size() + " " + hex(there));
            }
        }
        return Optional.empty();
    }

    private static String hex(ByteBuffer bytes) {
        return bytes == null ? "missing" : HexFormat.of().formatHex(bytes.array());
    }

    /** Takes what the machine of a region puts out. */
    MachineOutputs of(String region) {
        return new MachineOutputs() {
            @Override
            public void track(Track track) {
                put("tracks", track);
            }

            @Override
            public void birth(Birth birth) {
                put("births", birth);
            }

            @Override
            public void end(End end) {
                put("ends", end);
            }

            @Override
            public void count(Count count) {
                put("counts", count);
            }

            @Override
            public void picture(String key, Picture picture) {
                add("picture", key, picture == null ? null : Wire.encode(picture));
            }

            @Override
            public void heartbeat(Heartbeat heartbeat) {
                put("heartbeat", heartbeat);
            }

            @Override
            public void finding(Finding finding) {
                put("findings", finding);
            }

            @Override
            public void reject(Reject reject) {
                put(REJECTS, reject);
            }

            @Override
            public void append(LogEntry entry) {
                put(APPENDS, entry);
            }

            private void put(String kind, SpecificRecordBase record) {
                add(kind, region, Wire.encode(record));
            }
        };
    }
}
