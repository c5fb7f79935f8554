package org.sweeptally.region.text;

import com.fasterxml.jackson.core.JsonParser;
import com.fasterxml.jackson.core.JsonToken;
import java.io.IOException;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/**
 * A JSON value as it was written: text as {@link String}, yes and no as {@link Boolean}, nothing as null, the others as
 * the types below. Unlike the usual trees it keeps what a strict reader must see: names given twice.
 */
final class JsonTree {

    /** What one value may hold; an area with the most corners that are allowed has 4000. */
    static final int MOST_VALUES = 20_000;

    private final JsonParser parser;
    private int left = MOST_VALUES;

    private JsonTree(JsonParser parser) {
        this.parser = parser;
    }

    /** @param repeated names that were given more than once; the first value counts */
    record Fields(Map<String, Object> values, List<String> repeated) {
        Fields() {
            this(new LinkedHashMap<>(), new ArrayList<>());
        }

        /** Takes a field in; of two with the same name the first. */
        void put(String name, Object value) {
            if (values.containsKey(name)) {
                repeated.add(name);
            } else {
                values.put(name, value);
            }
        }
    }

    record Items(List<Object> values) {}

    /**
     * @param text  as it was written
     * @param value the nearest double; not finite where the text is NaN, an infinity, or too large
     */
    record Number(String text, double value) {}

    /** Stands for a value with more than {@link #MOST_VALUES} values inside, which nobody's part has. */
    record Excess() {
        @Override
        public String toString() {
            return "something with more than " + MOST_VALUES + " values inside";
        }
    }

    /** Reads the value that begins at the parser's current token, up to its last token. */
    static Object read(JsonParser parser) throws IOException {
        JsonTree tree = new JsonTree(parser);
        Object value = tree.value();
        return tree.left < 0 ? new Excess() : value;
    }

    /** Reads one value; once too many were met the tokens are passed over. */
    private Object value() throws IOException {
        if (--left < 0) {
            parser.skipChildren();
            return null;
        }
        return switch (parser.currentToken()) {
            case START_OBJECT -> fields();
            case START_ARRAY -> items();
            case VALUE_STRING -> parser.getText();
            case VALUE_NUMBER_INT -> new Number(parser.getText(), Double.parseDouble(parser.getText()));
            case VALUE_NUMBER_FLOAT -> new Number(parser.getText(), parser.getDoubleValue());
            case VALUE_TRUE -> Boolean.TRUE;
            case VALUE_FALSE -> Boolean.FALSE;
            case VALUE_NULL -> null;
            default -> throw new IllegalStateException("no value begins with " + parser.currentToken());
        };
    }

    private Fields fields() throws IOException {
        Fields fields = new Fields();
        for (String name = parser.nextFieldName(); name != null; name = parser.nextFieldName()) {
            parser.nextToken();
            Object value = value();
            if (left >= 0) {
                fields.put(name, value);
            }
        }
        return fields;
    }

    private Items items() throws IOException {
        List<Object> items = new ArrayList<>();
        while (parser.nextToken() != JsonToken.END_ARRAY) {
            Object value = value();
            if (left >= 0) {
                items.add(value);
            }
        }
        return new Items(items);
    }
}
