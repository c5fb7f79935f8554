package org.sweeptally.region.wire;

import java.util.List;
import org.apache.avro.Schema;

/**
 * Walks over the Avro binary body of a record without building anything, and finds every way in which the bytes are
 * not what the schema says: lengths beyond the end, array counts that the bytes left cannot hold, branches and symbols
 * that do not exist, booleans that are neither 0 nor 1, numbers that do not end, bytes left over. A body that passed
 * can be decoded by Avro's own decoder in memory proportional to its length; one that did not was never decoded.
 *
 * <p>Layout: Apache Avro 1.12 specification, "Binary Encoding". Cost: one pass, no allocation but the result.
 */
public final class BodyWalk {

    /** Deepest nesting of records, unions and arrays; our deepest schema has 14. */
    private static final int DEEPEST = 64;

    private final byte[] bytes;
    private final int from;
    private int at;
    private int depth;
    private String where;

    private BodyWalk(byte[] bytes, int from) {
        this.bytes = bytes;
        this.from = from;
        this.at = from;
    }

    /**
     * What a walk found.
     *
     * @param fieldStart where each field of the record that was reached starts, by its position in the schema
     * @param items      how many items each of these fields has, where it is an array; 0 elsewhere
     * @param fieldsRead how many fields were walked over to their end
     * @param fault      what is wrong, for a person; null if the body is sound
     */
    public record Found(int[] fieldStart, int[] items, int fieldsRead, String fault) {

        /** Whether the body is sound and ends where the bytes end. */
        public boolean sound() {
            return fault == null;
        }
    }

    /** Walks over the body of a record that starts at {@code from} and should end where the bytes end. */
    public static Found over(Schema record, byte[] bytes, int from) {
        return new BodyWalk(bytes, from).record(record);
    }

    private Found record(Schema schema) {
        List<Schema.Field> fields = schema.getFields();
        int[] start = new int[fields.size()];
        int[] items = new int[fields.size()];
        int read = 0;
        try {
            for (; read < fields.size(); read++) {
                where = fields.get(read).name();
                start[read] = at;
                items[read] = value(fields.get(read).schema());
            }
            if (at < bytes.length) {
                return new Found(start, items, read,
                        (bytes.length - at) + " bytes are left over after the record's end at byte "
                        + (at - from) + " of its body");
            }
            return new Found(start, items, read, null);
        } catch (BrokenBody e) {
            return new Found(start, items, read, e.getMessage());
        }
    }

    /** Passes over one value; returns the number of items if it is an array, otherwise 0. */
    private int value(Schema schema) throws BrokenBody {
        if (++depth > DEEPEST) {
            throw broken("values are nested more than " + DEEPEST + " deep");
        }
        int items = 0;
        switch (schema.getType()) {
            case NULL -> { }
            case BOOLEAN -> flag();
            case INT -> number(5);
            case LONG -> number(10);
            case FLOAT -> skip(4, "a number");
            case DOUBLE -> skip(8, "a number");
            case STRING -> skip(number(10), "a text");
            case BYTES -> skip(number(10), "a run of bytes");
            case FIXED -> skip(schema.getFixedSize(), "a run of bytes");
            case ENUM -> choice(schema.getEnumSymbols().size(), "symbol");
            case UNION -> value(schema.getTypes().get(choice(schema.getTypes().size(), "branch")));
            case ARRAY -> items = array(schema.getElementType());
            case RECORD -> {
                for (Schema.Field field : schema.getFields()) {
                    value(field.schema());
                }
            }
            default -> throw new IllegalStateException("our schemas have no " + schema.getType());
        }
        depth--;
        return items;
    }

    /** Blocks of items, each after its count; a negative count is followed by the block's length in bytes. */
    private int array(Schema element) throws BrokenBody {
        long total = 0;
        for (long count = number(10); count != 0; count = number(10)) {
            if (count < 0) {
                skipLength();
                count = -count;
            }
            if (count < 0 || count > bytes.length - at) {
                throw broken("an array says that " + Long.toUnsignedString(count) + " items follow, but only "
                        + (bytes.length - at) + " bytes do");
            }
            total += count;
            for (long i = 0; i < count; i++) {
                int before = at;
                value(element);
                if (at == before) {
                    throw new IllegalStateException("items without bytes cannot be bounded: " + element);
                }
            }
        }
        return (int) total;
    }

    private void skipLength() throws BrokenBody {
        long length = number(10);
        if (length < 0 || length > bytes.length - at) {
            throw broken("a block says that it has " + length + " bytes, but only " + (bytes.length - at) + " follow");
        }
    }

    private void flag() throws BrokenBody {
        skip(1, "a yes or no");
        if (bytes[at - 1] != 0 && bytes[at - 1] != 1) {
            throw broken("a yes or no is " + bytes[at - 1] + ": only 0 and 1 exist");
        }
    }

    private int choice(int choices, String what) throws BrokenBody {
        long chosen = number(5);
        if (chosen < 0 || chosen >= choices) {
            throw broken(what + " " + chosen + " is chosen: only 0 to " + (choices - 1) + " exist");
        }
        return (int) chosen;
    }

    /** A zig-zag number in base 128, lowest digits first. */
    private long number(int longest) throws BrokenBody {
        long value = 0;
        for (int i = 0; i < longest; i++) {
            if (at == bytes.length) {
                throw broken("the bytes end within a number");
            }
            byte digit = bytes[at++];
            value |= (digit & 0x7FL) << (7 * i);
            if (digit >= 0) {
                return longest == 5 ? narrowed(value) : value >>> 1 ^ -(value & 1);
            }
        }
        throw broken("a number has more than " + longest + " bytes");
    }

    private long narrowed(long value) throws BrokenBody {
        if (value > 0xFFFF_FFFFL) {
            throw broken("a number has more than 32 bits");
        }
        return value >>> 1 ^ -(value & 1);
    }

    private void skip(long length, String what) throws BrokenBody {
        if (length < 0 || length > bytes.length - at) {
            throw broken(what + " has " + length + " bytes, but only " + (bytes.length - at) + " follow");
        }
        at += (int) length;
    }

    private BrokenBody broken(String what) {
        return new BrokenBody("in field " + where + ", at byte " + (at - from) + " of the body: " + what);
    }

    /** Leaves the recursion; never leaves this class. */
    private static final class BrokenBody extends Exception {
        private static final long serialVersionUID = 1;

        BrokenBody(String what) {
            super(what, null, false, false);
        }
    }
}
