package org.sweeptally.stream;

import java.util.Collection;
import java.util.List;
import java.util.TreeMap;

/** The revisions of a site's settings that are known so far. One thread may add while others read. */
final class Revisions {

    private final TreeMap<Integer, Revision> byNumber = new TreeMap<>();
    private volatile List<Revision> all = List.of();
    private volatile int version;

    Revisions(Collection<Revision> known) {
        known.forEach(this::add);
    }

    /** Adds a revision; one that is known changes nothing. */
    synchronized void add(Revision revision) {
        if (byNumber.putIfAbsent(revision.number(), revision) == null) {
            all = List.copyOf(byNumber.values());
            version++;
        }
    }

    /** All of them, the lowest first. */
    List<Revision> all() {
        return all;
    }

    /** Grows with every revision that is added. */
    int version() {
        return version;
    }
}
