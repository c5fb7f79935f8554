package org.sweeptally.filter;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;

/** Which components are so close that an observation may well be one's or the other's, directly or through a third. */
final class Crowds {

    /** Two components are close if both caused one observation with at least this probability. */
    private static final double LEAST_SHARED = 0.1;

    private Crowds() {}

    /** The crowds, most of one component, by their first one; each with its components in order. */
    static List<int[]> of(ScanHypotheses hypotheses) {
        int[] first = first(hypotheses);
        int[] sizes = new int[first.length];
        for (int crowd : first) {
            sizes[crowd]++;
        }
        List<int[]> crowds = new ArrayList<>();
        for (int i = 0; i < first.length; i++) {
            if (sizes[i] > 0) {
                crowds.add(members(first, i, sizes[i]));
            }
        }
        return crowds;
    }

    /** For each component the first one of its crowd: itself, if it shares no observation with an earlier one. */
    private static int[] first(ScanHypotheses hypotheses) {
        int[] crowd = new int[hypotheses.components().size()];
        int[] firstUser = new int[hypotheses.scan().observations().size()];
        Arrays.fill(firstUser, -1);
        for (int i = 0; i < crowd.length; i++) {
            crowd[i] = i;
            for (int pair = hypotheses.firstPair(i); pair < hypotheses.endPair(i); pair++) {
                if (hypotheses.probability(pair) >= LEAST_SHARED) {
                    int j = hypotheses.observationOf(pair);
                    if (firstUser[j] < 0) {
                        firstUser[j] = i;
                    } else {
                        unite(crowd, firstUser[j], i);
                    }
                }
            }
        }
        for (int i = 0; i < crowd.length; i++) {
            crowd[i] = root(crowd, i);
        }
        return crowd;
    }

    private static void unite(int[] crowd, int a, int b) {
        int rootA = root(crowd, a);
        int rootB = root(crowd, b);
        crowd[Math.max(rootA, rootB)] = Math.min(rootA, rootB);
    }

    private static int root(int[] crowd, int i) {
        int at = i;
        while (crowd[at] != at) {
            at = crowd[at];
        }
        return at;
    }

    private static int[] members(int[] first, int crowd, int count) {
        int[] members = new int[count];
        int at = 0;
        for (int i = crowd; at < count; i++) {
            if (first[i] == crowd) {
                members[at++] = i;
            }
        }
        return members;
    }
}
