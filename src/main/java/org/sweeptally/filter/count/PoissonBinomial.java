package org.sweeptally.filter.count;

import java.util.Arrays;

/**
 * The distribution of the number of events that happen, of independent events with probabilities of their own
 * (Poisson binomial; Wang 1993, Statistica Sinica 3:295-312, from memory).
 *
 * <p>One event after another: P(k) becomes P(k) (1 - r) + P(k - 1) r. Nothing is subtracted, so no value is ever
 * negative, as it may be by Fourier transform. Only a band is kept: of n events with standard deviation sigma about
 * 18 sigma + a few entries, so the cost is n sigma; probabilities of exactly 0 and 1 cost nothing.
 *
 * <p><b>Error.</b> While events are added, each side loses at most {@link #WORKING_TAIL} in all (a share of it per
 * event): that much a listed probability may be too low, beside one rounding an event, and the sum of all is brought
 * back to 1. At the end each tail that sums to at most {@link #TAIL} is cut off and carried as {@code below} and
 * {@code above}, with what was lost on its side: below + above is at most 2 TAIL.
 */
public final class PoissonBinomial {
    /** Greatest probability carried, not listed, on each side of the band. */
    public static final double TAIL = 1e-12;

    /** Greatest probability that each side may lose while events are added. */
    static final double WORKING_TAIL = 1e-16;

    private double[] band = {1, 0};
    private double[] next = new double[2];
    private int offset;
    private int length = 1;
    private double below;
    private double above;

    private PoissonBinomial() {}

    /** The number of events among all of these. */
    public static NumberDistribution of(double[] probabilities) {
        return of(probabilities, probabilities.length);
    }

    /**
     * The number of events among the first so many.
     *
     * @param probabilities each from 0 to 1
     */
    public static NumberDistribution of(double[] probabilities, int events) {
        PoissonBinomial sum = new PoissonBinomial();
        double mean = 0;
        double variance = 0;
        for (int i = 0; i < events; i++) {
            double r = probabilities[i];
            if (!(r >= 0 && r <= 1)) {
                throw new IllegalArgumentException("probability " + i + " is " + r + "; 0 to 1 needed");
            }
            mean += r;
            variance += r * (1 - r);
            sum.add(r);
            sum.trim(WORKING_TAIL * (i + 1) / events);
        }
        sum.normalise();
        sum.trim(TAIL);
        return new NumberDistribution(
                mean, variance, sum.offset, Arrays.copyOf(sum.band, sum.length), sum.below, sum.above);
    }

    private void add(double r) {
        if (r == 0) {
            return;
        }
        if (r == 1) {
            offset++;
            return;
        }
        if (next.length < length + 2) {
            next = new double[2 * length + 2];
        }
        double missing = 1 - r;
        next[0] = band[0] * missing;
        for (int k = 1; k < length; k++) {
            next[k] = band[k] * missing + band[k - 1] * r;
        }
        next[length] = band[length - 1] * r;
        length++;
        double[] old = band;
        band = next;
        next = old;
    }

    /** Cuts off what leaves below and above at most at the limit; at least one entry stays. */
    private void trim(double limit) {
        int first = 0;
        while (first < length - 1 && below + band[first] <= limit) {
            below += band[first++];
        }
        while (length - 1 > first && above + band[length - 1] <= limit) {
            above += band[--length];
        }
        if (first > 0) {
            System.arraycopy(band, first, band, 0, length - first);
            length -= first;
            offset += first;
        }
    }

    /** Rounding moves the sum of all by about one rounding an event. */
    private void normalise() {
        double sum = below;
        for (int k = 0; k < length; k++) {
            sum += band[k];
        }
        sum += above;
        for (int k = 0; k < length; k++) {
            band[k] /= sum;
        }
    }
}
