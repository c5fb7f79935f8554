package org.sweeptally.replay;

import java.util.List;
import java.util.Optional;
import org.apache.avro.Schema;
import org.apache.avro.generic.IndexedRecord;
import org.sweeptally.region.intake.Times;

/** The first field in which two records of one schema differ. Numbers are compared bit by bit. */
record FieldDifference(String field, String recorded, String replayed) {

    private static final int SHOWN = 120;

    static Optional<FieldDifference> between(IndexedRecord recorded, IndexedRecord replayed) {
        return records("", recorded, replayed);
    }

    private static Optional<FieldDifference> records(String path, IndexedRecord a, IndexedRecord b) {
        if (!a.getSchema().equals(b.getSchema())) {
            return differ(path, a, b);
        }
        for (Schema.Field field : a.getSchema().getFields()) {
            String inner = path.isEmpty() ? field.name() : path + "." + field.name();
            Optional<FieldDifference> found = values(inner, a.get(field.pos()), b.get(field.pos()));
            if (found.isPresent()) {
                return found;
            }
        }
        return Optional.empty();
    }

    private static Optional<FieldDifference> values(String path, Object a, Object b) {
        if (a instanceof IndexedRecord left && b instanceof IndexedRecord right) {
            return records(path, left, right);
        }
        if (a instanceof List<?> left && b instanceof List<?> right) {
            for (int i = 0; i < Math.min(left.size(), right.size()); i++) {
                Optional<FieldDifference> found = values(path + "[" + i + "]", left.get(i), right.get(i));
                if (found.isPresent()) {
                    return found;
                }
            }
            return left.size() == right.size()
                    ? Optional.empty()
                    : Optional.of(new FieldDifference(path, left.size() + " long", right.size() + " long"));
        }
        boolean equal = a == null || b == null ? a == b : a.equals(b);
        return equal ? Optional.empty() : differ(path, a, b);
    }

    private static Optional<FieldDifference> differ(String path, Object a, Object b) {
        return Optional.of(new FieldDifference(path, text(path, a), text(path, b)));
    }

    private static String text(String path, Object value) {
        String text = value instanceof Long micros && path.endsWith("Micros") && Times.plausible(micros)
                ? Times.text(micros)
                : String.valueOf(value);
        return text.length() > SHOWN ? text.substring(0, SHOWN) + "..." : text;
    }
}
