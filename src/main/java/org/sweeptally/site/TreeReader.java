package org.sweeptally.site;

import com.fasterxml.jackson.core.JsonFactory;
import com.fasterxml.jackson.core.JsonParser;
import com.fasterxml.jackson.core.JsonProcessingException;
import com.fasterxml.jackson.core.JsonToken;
import com.fasterxml.jackson.dataformat.yaml.YAMLFactory;
import com.fasterxml.jackson.dataformat.yaml.YAMLParser;
import java.io.IOException;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.stream.Collectors;
import org.sweeptally.site.Node.Position;

/** Reads YAML or JSON into values that know their line. */
final class TreeReader {

    private static final JsonFactory JSON = new JsonFactory();
    private static final YAMLFactory YAML = new YAMLFactory();

    private final Faults faults;
    private final String file;

    private TreeReader(String file, Faults faults) {
        this.file = file;
        this.faults = faults;
    }

    static Optional<Node> yaml(String file, String text, Faults faults) {
        return new TreeReader(file, faults).read(YAML, text, "YAML");
    }

    static Optional<Node> json(String file, String text, Faults faults) {
        return new TreeReader(file, faults).read(JSON, text, "JSON");
    }

    /** The whole text as one value; empty, with one fault, where it is not of its format. */
    private Optional<Node> read(JsonFactory format, String text, String formatName) {
        Position top = new Position(file, 0, "");
        try (JsonParser parser = format.createParser(text)) {
            if (parser.nextToken() == null) {
                faults.add(top, "", "is empty");
                return Optional.empty();
            }
            Node node = value(parser, new Position(file, 1, ""));
            if (parser.nextToken() != null) {
                faults.add(new Position(file, line(parser), ""), "", "goes on after its end, must be one document");
                return Optional.empty();
            }
            return Optional.of(node);
        } catch (JsonProcessingException e) {
            int line = e.getLocation() == null ? 0 : Math.max(0, e.getLocation().getLineNr());
            String wrong = oneLine(e.getOriginalMessage());
            faults.add(new Position(file, line, ""), "", "is not " + formatName + ": " + wrong);
            return Optional.empty();
        } catch (IOException e) {
            throw new IllegalStateException("reading a text in memory failed", e);
        }
    }

    private Node value(JsonParser parser, Position at) throws IOException {
        if (parser instanceof YAMLParser yaml && yaml.isCurrentAlias()) {
            faults.add(at, "an alias", "must be written out");
            return new Node.Scalar(at, null);
        }
        JsonToken token = parser.currentToken();
        if (token == JsonToken.START_OBJECT) {
            return mapping(parser, at);
        }
        if (token == JsonToken.START_ARRAY) {
            return sequence(parser, at);
        }
        return new Node.Scalar(at, token == JsonToken.VALUE_NULL ? null : parser.getText());
    }

    private Node mapping(JsonParser parser, Position at) throws IOException {
        Map<String, Node> entries = new LinkedHashMap<>();
        while (parser.nextToken() != JsonToken.END_OBJECT) {
            String key = parser.currentName();
            Position place = at.key(key, line(parser));
            parser.nextToken();
            Node node = value(parser, place);
            Node first = entries.putIfAbsent(key, node);
            if (first != null) {
                faults.add(place, "", "is given twice, first on line " + first.at().line());
            }
        }
        return new Node.Mapping(at, entries);
    }

    private Node sequence(JsonParser parser, Position at) throws IOException {
        List<Node> items = new ArrayList<>();
        while (parser.nextToken() != JsonToken.END_ARRAY) {
            items.add(value(parser, at.index(items.size(), line(parser))));
        }
        return new Node.Sequence(at, items);
    }

    private static int line(JsonParser parser) {
        return parser.currentTokenLocation().getLineNr();
    }

    /**
     * Parsers explain over several lines, with extracts indented: what is not indented says it. What follows about
     * their own insides helps nobody.
     */
    private static String oneLine(String message) {
        return message.lines()
                .filter(line -> !line.isBlank() && !Character.isWhitespace(line.charAt(0)))
                .collect(Collectors.joining(", "))
                .replaceFirst("( \\(for |, got this instead| at \\[Source).*", "")
                .replaceFirst(", from `[^`]*`", "");
    }
}
