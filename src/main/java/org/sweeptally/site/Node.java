package org.sweeptally.site;

import java.util.List;
import java.util.Map;

/** A value of a settings file, with the place where it stands. */
sealed interface Node {

    /** Longer values are shortened in what is said of them. */
    int SHOWN_CHARACTERS = 60;

    Position at();

    /** A text on one line of bounded length, without control characters. */
    static String plain(String text) {
        String line = text.replaceAll("[\\s\\p{Cntrl}]+", " ");
        return line.length() <= SHOWN_CHARACTERS ? line : line.substring(0, SHOWN_CHARACTERS) + "...";
    }

    /** The value as a sentence names it. */
    String shown();

    /**
     * @param place keys and indices from the top, such as {@code sensors.north-shore.detectionProbability[1]}
     */
    record Position(String file, int line, String place) {

        Position key(String key, int keyLine) {
            return new Position(file, keyLine, place.isEmpty() ? plain(key) : place + "." + plain(key));
        }

        Position index(int index, int itemLine) {
            return new Position(file, itemLine, place + "[" + index + "]");
        }
    }

    /** @param entries in the order of the file */
    record Mapping(Position at, Map<String, Node> entries) implements Node {
        @Override
        public String shown() {
            return "a mapping";
        }
    }

    record Sequence(Position at, List<Node> items) implements Node {
        @Override
        public String shown() {
            return "a list";
        }
    }

    /** @param text as it is written; null for null */
    record Scalar(Position at, String text) implements Node {
        @Override
        public String shown() {
            return text == null || text.isBlank() ? "empty" : plain(text);
        }
    }
}
