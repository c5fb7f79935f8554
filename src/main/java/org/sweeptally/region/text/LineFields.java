package org.sweeptally.region.text;

import java.util.List;
import java.util.OptionalLong;
import java.util.function.Supplier;
import org.sweeptally.region.intake.FaultSink;
import org.sweeptally.region.intake.Shown;
import org.sweeptally.region.intake.Times;

/**
 * The fields of one JSON object, taken one by one with the type that they must have. A field that is not there, or
 * null, is taken as null; one of the wrong type also, and it is a fault. So are names that nobody knows, and names
 * given twice.
 */
final class LineFields {

    private static final double LARGEST_EXACT = 9_007_199_254_740_992.0; // 2^53

    private final JsonTree.Fields fields;
    private final String prefix;
    private final FaultSink sink;

    /**
     * @param prefix what stands before the names in sentences, such as "coverage."; empty for the object itself
     * @param known  the names that may be there
     */
    LineFields(JsonTree.Fields fields, String prefix, List<String> known, FaultSink sink) {
        this.fields = fields;
        this.prefix = prefix;
        this.sink = sink;
        for (String name : fields.repeated()) {
            add(name, () -> Shown.name(prefix + name) + " is given more than once: once is allowed");
        }
        for (String name : fields.values().keySet()) {
            if (!known.contains(name)) {
                add(name, () -> Shown.name(prefix + name) + " is no field known here: the nearest that is known is "
                        + prefix + Nearest.to(name, known));
            }
        }
    }

    boolean has(String name) {
        return fields.values().get(name) != null;
    }

    /** A field that must be there is not. */
    void missing(String name, String because) {
        add(name, () -> prefix + name + " is missing: " + because);
    }

    String text(String name) {
        Object value = fields.values().get(name);
        if (value == null || value instanceof String) {
            return (String) value;
        }
        return wrong(name, value, "a text is expected");
    }

    Boolean flag(String name) {
        Object value = fields.values().get(name);
        if (value == null || value instanceof Boolean) {
            return (Boolean) value;
        }
        return wrong(name, value, "true or false is expected");
    }

    /** A number, be it finite or not: that is judged where it is known what the number means. */
    Double number(String name) {
        Object value = fields.values().get(name);
        if (value == null) {
            return null;
        }
        return value instanceof JsonTree.Number number
                ? (Double) number.value()
                : wrong(name, value, "a number is expected");
    }

    /** A whole number; 17.0 is one. */
    Long whole(String name, long least, long most) {
        Object value = fields.values().get(name);
        if (value == null) {
            return null;
        }
        if (value instanceof JsonTree.Number number) {
            OptionalLong whole = whole(number);
            if (whole.isPresent() && whole.getAsLong() >= least && whole.getAsLong() <= most) {
                return whole.getAsLong();
            }
        }
        return wrong(name, value, "a whole number from " + least + " to " + most + " is expected");
    }

    /** A time, in microseconds since 1970-01-01T00:00:00Z. */
    Long time(String name) {
        Object value = fields.values().get(name);
        if (value == null) {
            return null;
        }
        OptionalLong micros = value instanceof String text ? Times.parse(text) : OptionalLong.empty();
        if (micros.isEmpty()) {
            return wrong(name, value, Times.FORM);
        }
        return Times.plausible(micros.getAsLong()) ? (Long) micros.getAsLong() : wrong(name, value, Times.ALLOWED);
    }

    JsonTree.Fields object(String name, String what) {
        Object value = fields.values().get(name);
        if (value == null || value instanceof JsonTree.Fields) {
            return (JsonTree.Fields) value;
        }
        return wrong(name, value, "an object with " + what + " is expected");
    }

    JsonTree.Items items(String name, String what) {
        Object value = fields.values().get(name);
        if (value == null || value instanceof JsonTree.Items) {
            return (JsonTree.Items) value;
        }
        return wrong(name, value, "a list of " + what + " is expected");
    }

    /** A value as a sentence shows it. */
    static String shown(Object value) {
        if (value instanceof String text) {
            return Shown.text(text);
        }
        if (value instanceof JsonTree.Number number) {
            return Shown.name(number.text());
        }
        if (value instanceof JsonTree.Fields) {
            return "an object";
        }
        return value instanceof JsonTree.Items ? "a list" : String.valueOf(value);
    }

    private static OptionalLong whole(JsonTree.Number number) {
        try {
            return OptionalLong.of(Long.parseLong(number.text()));
        } catch (NumberFormatException e) {
            double value = number.value();
            return value == Math.rint(value) && Math.abs(value) <= LARGEST_EXACT
                    ? OptionalLong.of((long) value)
                    : OptionalLong.empty();
        }
    }

    private <T> T wrong(String name, Object value, String expected) {
        add(name, () -> prefix + name + " is " + shown(value) + ": " + expected);
        return null;
    }

    private void add(String name, Supplier<String> sentence) {
        sink.add(Shown.name(prefix + name), sentence);
    }
}
