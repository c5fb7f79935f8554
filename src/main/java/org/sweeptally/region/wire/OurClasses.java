package org.sweeptally.region.wire;

import java.util.Map;
import java.util.TreeMap;
import org.apache.avro.Schema;
import org.apache.avro.specific.SpecificData;

/**
 * Tells Avro's readers which class belongs to which of our schemas. Avro refuses to load classes by the names in a
 * schema unless they are declared trustworthy for the whole process; here only generated classes are known, and nothing
 * outside is touched.
 */
final class OurClasses extends SpecificData {

    static final OurClasses DATA = new OurClasses();

    private final Map<String, Class<?>> byName = new TreeMap<>();

    private OurClasses() {
        super(OurClasses.class.getClassLoader());
        // The generated classes' own coders give the same bytes without asking the schema for every field.
        setCustomCoders(true);
        KnownSchemas.ours().all().forEach(record -> {
            learn(record);
            record.getFields().forEach(field -> learn(field.schema()));
        });
    }

    @Override
    @SuppressWarnings("rawtypes")
    public Class getClass(Schema schema) {
        return switch (schema.getType()) {
            case RECORD, ENUM, FIXED -> byName.get(schema.getFullName());
            default -> super.getClass(schema);
        };
    }

    private void learn(Schema schema) {
        switch (schema.getType()) {
            case RECORD, ENUM, FIXED -> byName.computeIfAbsent(schema.getFullName(), OurClasses::generated);
            case UNION -> schema.getTypes().forEach(this::learn);
            case ARRAY -> learn(schema.getElementType());
            default -> { }
        }
    }

    private static Class<?> generated(String name) {
        try {
            return Class.forName(name);
        } catch (ClassNotFoundException e) {
            throw new IllegalStateException("every schema of ours has a generated class, but not " + name, e);
        }
    }
}
