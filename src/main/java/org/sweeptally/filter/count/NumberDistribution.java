package org.sweeptally.filter.count;

import java.util.Arrays;

/**
 * The distribution of a number of objects, listed over a band.
 *
 * @param mean       expected number
 * @param variance   of the number
 * @param bandOffset number that the band's first probability belongs to
 * @param band       probabilities of bandOffset, bandOffset + 1, ...; at least one
 * @param below      probability of fewer than the band lists
 * @param above      probability of more than the band lists
 */
public record NumberDistribution(
        double mean, double variance, int bandOffset, double[] band, double below, double above) {
    /** Cumulative probabilities this near to a quantile count as equal to it: that much is not listed either. */
    private static final double TIE = PoissonBinomial.TAIL;

    public NumberDistribution {
        band = band.clone();
    }

    @Override
    public double[] band() {
        return band.clone();
    }

    /** Probability of exactly this number; 0 outside the band, where it is at most {@link PoissonBinomial#TAIL}. */
    public double probability(int number) {
        int k = number - bandOffset;
        return k >= 0 && k < band.length ? band[k] : 0;
    }

    /**
     * Lower end of the central interval: the largest k with P(N &lt; k) at most (1 - level) / 2.
     *
     * @param level probability that the interval shall hold at least, between 0 and 1, such as 0.9
     */
    public int least(double level) {
        double outside = outside(level);
        double fewer = below + band[0];
        int k = 0;
        while (k < band.length - 1 && fewer <= outside + TIE) {
            fewer += band[++k];
        }
        return bandOffset + k;
    }

    /** Upper end of the central interval: the smallest k with P(N &lt;= k) at least 1 - (1 - level) / 2. */
    public int most(double level) {
        double outside = outside(level);
        double more = above + band[band.length - 1];
        int k = band.length - 1;
        while (k > 0 && more <= outside + TIE) {
            more += band[--k];
        }
        return bandOffset + k;
    }

    /** Probability that the central interval really holds: numbers are whole, so it is mostly more than the level. */
    public double held(double level) {
        double sum = 0;
        int most = most(level);
        for (int k = least(level); k <= most; k++) {
            sum += band[k - bandOffset];
        }
        return sum;
    }

    @Override
    public boolean equals(Object other) {
        return other instanceof NumberDistribution that
                && Double.compare(mean, that.mean) == 0
                && Double.compare(variance, that.variance) == 0
                && bandOffset == that.bandOffset
                && Arrays.equals(band, that.band)
                && Double.compare(below, that.below) == 0
                && Double.compare(above, that.above) == 0;
    }

    @Override
    public int hashCode() {
        return Arrays.hashCode(band) + bandOffset;
    }

    private static double outside(double level) {
        if (!(level > 0 && level < 1)) {
            throw new IllegalArgumentException("level is " + level + "; between 0 and 1 needed");
        }
        return (1 - level) / 2;
    }
}
