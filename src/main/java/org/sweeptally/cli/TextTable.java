package org.sweeptally.cli;

import java.io.PrintStream;
import java.util.ArrayList;
import java.util.List;

/** A table of text: the first column to the left, columns of numbers to the right. */
final class TextTable {

    private static final String GAP = "  ";

    private final List<String[]> rows = new ArrayList<>();

    TextTable(String... heads) {
        rows.add(heads);
    }

    void row(String... cells) {
        rows.add(cells);
    }

    void print(PrintStream out) {
        int columns = rows.get(0).length;
        for (String[] row : rows) {
            StringBuilder line = new StringBuilder();
            for (int c = 0; c < columns; c++) {
                line.append(c == 0 ? "" : GAP).append(padded(row[c], width(c), isNumeric(c)));
            }
            out.println(line.toString().stripTrailing());
        }
    }

    private int width(int column) {
        return rows.stream().mapToInt(row -> row[column].length()).max().orElse(0);
    }

    /** Whether every cell below the head begins as a number does. */
    private boolean isNumeric(int column) {
        return column > 0
                && rows.stream().skip(1).allMatch(row -> row[column].matches("[-\\d].*") && row[column].length() < 20);
    }

    private static String padded(String text, int width, boolean right) {
        String space = " ".repeat(width - text.length());
        return right ? space + text : text + space;
    }
}
