package org.sweeptally.site;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/** Collects what is wrong, so that all of it is told at once. */
final class Faults {

    private final List<Fault> faults = new ArrayList<>();
    private final Map<String, Integer> fileOrder = new LinkedHashMap<>();

    /** Files are told of in the order in which they are named here. */
    void beginFile(String file) {
        fileOrder.putIfAbsent(file, fileOrder.size());
    }

    void add(Node.Position at, String value, String sentence) {
        beginFile(at.file());
        faults.add(new Fault(at.file(), at.line(), at.place(), value, sentence));
    }

    boolean isEmpty() {
        return faults.isEmpty();
    }

    int size() {
        return faults.size();
    }

    /** By file and line. */
    List<Fault> sorted() {
        return faults.stream()
                .sorted(Comparator.<Fault>comparingInt(f -> fileOrder.get(f.file())).thenComparingInt(Fault::line))
                .toList();
    }
}
