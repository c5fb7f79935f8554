package org.sweeptally.filter;

import java.util.Arrays;

/**
 * What the unseen part says of each observation of a scan: how dense objects are that would be seen for the first time
 * there. For observation j it is e(j), the integral of probability of detection, unseen intensity and likelihood, per
 * square metre, apart by what it comes from: the grid, and each term whose gate the observation lies in.
 */
final class UnseenEvidence {

    /** By profile. */
    private final double[][] fromGrid;

    private final double[] total;

    private int pairs;
    private int[] pairObservation = new int[64];
    private int[] pairTerm = new int[64];
    private double[] pairValue = new double[64];

    /** Pairs sorted by observation; within one, by term. */
    private int[] start;
    private int[] order;

    UnseenEvidence(int observations, int profiles) {
        fromGrid = new double[profiles][observations];
        total = new double[observations];
    }

    void addGrid(int observation, int profile, double value) {
        fromGrid[profile][observation] = value;
        total[observation] += value;
    }

    void addTerm(int observation, int term, double value) {
        if (pairs == pairValue.length) {
            pairObservation = Arrays.copyOf(pairObservation, 2 * pairs);
            pairTerm = Arrays.copyOf(pairTerm, 2 * pairs);
            pairValue = Arrays.copyOf(pairValue, 2 * pairs);
        }
        pairObservation[pairs] = observation;
        pairTerm[pairs] = term;
        pairValue[pairs] = value;
        pairs++;
        total[observation] += value;
    }

    /** To be called once, after the last pair. */
    void sort() {
        start = new int[total.length + 1];
        for (int i = 0; i < pairs; i++) {
            start[pairObservation[i] + 1]++;
        }
        for (int j = 0; j < total.length; j++) {
            start[j + 1] += start[j];
        }
        int[] next = Arrays.copyOf(start, total.length);
        order = new int[pairs];
        for (int i = 0; i < pairs; i++) {
            order[next[pairObservation[i]]++] = i;
        }
    }

    double total(int observation) {
        return total[observation];
    }

    double fromGrid(int observation, int profile) {
        return fromGrid[profile][observation];
    }

    int pairs() {
        return pairs;
    }

    int firstPair(int observation) {
        return start[observation];
    }

    int endPair(int observation) {
        return start[observation + 1];
    }

    int term(int pair) {
        return pairTerm[order[pair]];
    }

    double value(int pair) {
        return pairValue[order[pair]];
    }
}
