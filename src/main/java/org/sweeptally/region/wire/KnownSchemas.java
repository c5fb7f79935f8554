package org.sweeptally.region.wire;

import java.util.Collection;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.TreeMap;
import org.apache.avro.Schema;
import org.apache.avro.SchemaNormalization;
import org.apache.avro.message.SchemaStore;
import org.sweeptally.event.ArchivedMessage;
import org.sweeptally.event.Birth;
import org.sweeptally.event.End;
import org.sweeptally.event.Finding;
import org.sweeptally.event.Heartbeat;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Part;
import org.sweeptally.event.Picture;
import org.sweeptally.event.Reject;
import org.sweeptally.event.SnapshotHead;
import org.sweeptally.event.SnapshotPiece;

/**
 * The schemas of every record that this version writes, by the fingerprint that a message begins with: CRC-64-AVRO of
 * the parsing canonical form (Apache Avro 1.12 specification, "Schema Fingerprints"), so that documentation, defaults
 * and property annotations make no difference.
 */
public final class KnownSchemas implements SchemaStore {

    /** Records that stand alone in a topic; every record within them is known too. */
    private static final List<Schema> MESSAGES = List.of(
            Part.getClassSchema(),
            LogEntry.getClassSchema(),
            Picture.getClassSchema(),
            Birth.getClassSchema(),
            End.getClassSchema(),
            Reject.getClassSchema(),
            Heartbeat.getClassSchema(),
            Finding.getClassSchema(),
            SnapshotHead.getClassSchema(),
            SnapshotPiece.getClassSchema(),
            ArchivedMessage.getClassSchema());

    private static final KnownSchemas OURS = new KnownSchemas();

    private final Map<Long, Schema> byFingerprint = new TreeMap<>();

    private KnownSchemas() {
        MESSAGES.forEach(this::learn);
    }

    /** The one store; it never changes and may be shared. */
    public static KnownSchemas ours() {
        return OURS;
    }

    /** CRC-64-AVRO of a schema's parsing canonical form. */
    public static long fingerprint(Schema schema) {
        return SchemaNormalization.parsingFingerprint64(schema);
    }

    /** The schema with a fingerprint, or null, as Avro's own decoders expect it. */
    @Override
    public Schema findByFingerprint(long fingerprint) {
        return byFingerprint.get(fingerprint);
    }

    /** The schema with a fingerprint, if it is one of ours. */
    public Optional<Schema> find(long fingerprint) {
        return Optional.ofNullable(findByFingerprint(fingerprint));
    }

    /** Every schema known, in the order of the fingerprints. */
    public Collection<Schema> all() {
        return List.copyOf(byFingerprint.values());
    }

    private void learn(Schema schema) {
        switch (schema.getType()) {
            case RECORD -> {
                if (byFingerprint.putIfAbsent(fingerprint(schema), schema) == null) {
                    schema.getFields().forEach(field -> learn(field.schema()));
                }
            }
            case UNION -> schema.getTypes().forEach(this::learn);
            case ARRAY -> learn(schema.getElementType());
            default -> { }
        }
    }
}
