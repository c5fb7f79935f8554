package org.sweeptally.score;

/**
 * How good stated probabilities are (Brier 1950), and in which way, by the decomposition of Murphy 1973: the score is
 * reliability - resolution + uncertainty, exactly so where forecasts of a bin are equal.
 *
 * @param score       mean square of forecast minus outcome; 0 is perfect
 * @param reliability mean square of forecast minus frequency, bin by bin; 0 where what is said to happen in 30 % of
 *                    cases happens in 30 % of them
 * @param resolution  mean square of a bin's frequency minus the overall one
 * @param uncertainty variance of the outcome itself
 * @param forecasts   how many there were
 */
public record BrierScore(
        double score, double reliability, double resolution, double uncertainty, long forecasts) {

    /** Collects forecasts with their outcomes, in bins of equal width. */
    public static final class Tally {

        private final long[] count;
        private final double[] forecast;
        private final double[] happened;
        private double squares;

        public Tally(int bins) {
            count = new long[bins];
            forecast = new double[bins];
            happened = new double[bins];
        }

        public void add(double probability, boolean outcome) {
            if (!(probability >= 0 && probability <= 1)) {
                throw new IllegalArgumentException("probability " + probability + ": 0 to 1 needed");
            }
            int bin = Math.min((int) (probability * count.length), count.length - 1);
            double happens = outcome ? 1 : 0;
            count[bin]++;
            forecast[bin] += probability;
            happened[bin] += happens;
            squares += (probability - happens) * (probability - happens);
        }

        /** The score of what was added so far; at least one forecast is needed. */
        public BrierScore score() {
            long n = 0;
            double events = 0;
            for (int bin = 0; bin < count.length; bin++) {
                n += count[bin];
                events += happened[bin];
            }
            double frequency = events / n;
            double reliability = 0;
            double resolution = 0;
            for (int bin = 0; bin < count.length; bin++) {
                if (count[bin] > 0) {
                    double off = (forecast[bin] - happened[bin]) / count[bin];
                    double from = happened[bin] / count[bin] - frequency;
                    reliability += count[bin] * off * off;
                    resolution += count[bin] * from * from;
                }
            }
            return new BrierScore(squares / n, reliability / n, resolution / n, frequency * (1 - frequency), n);
        }
    }
}
