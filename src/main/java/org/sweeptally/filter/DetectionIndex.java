package org.sweeptally.filter;

import java.util.Arrays;
import java.util.List;
import org.ejml.data.DMatrix4x4;
import org.sweeptally.model.Gaussian;
import org.sweeptally.model.Measurement;

/**
 * Finds the measurements that may lie in a bank's gates without looking at all of them: a raster of buckets over the
 * scan, about one measurement in each. Building costs O(m), a query what it finds.
 */
final class DetectionIndex {

    /** A measurement whose variance is more than this many times the median is kept out of the raster. */
    private static final double WIDE_VARIANCES = 64;

    private final double minEast;
    private final double minNorth;
    private final double bucketMetres;
    private final int columns;
    private final int rows;

    /** Measurements sorted by bucket, and within a bucket by their place in the scan. */
    private final int[] bucketStart;
    private final int[] sorted;

    /** Measurements that every query finds. */
    private final int[] wide;

    private final double largestSigma;
    private final double leastLag;
    private final double greatestLag;

    private int[] found = new int[64];

    /** Of the query at hand. */
    private double boxWest;

    private double boxEast;
    private double boxSouth;
    private double boxNorth;

    DetectionIndex(List<Observation> observations) {
        boolean[] isWide = wide(observations);
        double west = Double.POSITIVE_INFINITY;
        double east = Double.NEGATIVE_INFINITY;
        double south = Double.POSITIVE_INFINITY;
        double north = Double.NEGATIVE_INFINITY;
        double variance = 0;
        double shortest = Double.POSITIVE_INFINITY;
        double longest = Double.NEGATIVE_INFINITY;
        int wideOnes = 0;
        for (int j = 0; j < isWide.length; j++) {
            if (isWide[j]) {
                wideOnes++;
                continue;
            }
            Measurement z = observations.get(j).measurement();
            west = Math.min(west, z.east());
            east = Math.max(east, z.east());
            south = Math.min(south, z.north());
            north = Math.max(north, z.north());
            variance = Math.max(variance, largestVariance(z));
            shortest = Math.min(shortest, z.lagSeconds());
            longest = Math.max(longest, z.lagSeconds());
        }
        int m = isWide.length - wideOnes;
        largestSigma = Math.sqrt(variance);
        leastLag = m == 0 ? 0 : shortest;
        greatestLag = m == 0 ? 0 : longest;
        minEast = m == 0 ? 0 : west;
        minNorth = m == 0 ? 0 : south;
        double width = m == 0 ? 0 : east - west;
        double height = m == 0 ? 0 : north - south;
        bucketMetres = Math.max(1e-3, Math.max(
                Math.sqrt(width * height / Math.max(1, m)), Math.max(width, height) / Math.max(1, m)));
        columns = 1 + (int) (width / bucketMetres);
        rows = 1 + (int) (height / bucketMetres);
        bucketStart = new int[columns * rows + 1];
        sorted = new int[m];
        wide = new int[wideOnes];
        fill(observations, isWide);
    }

    private void fill(List<Observation> observations, boolean[] isWide) {
        int[] bucket = new int[isWide.length];
        int wideOnes = 0;
        for (int j = 0; j < isWide.length; j++) {
            if (isWide[j]) {
                wide[wideOnes++] = j;
            } else {
                Measurement z = observations.get(j).measurement();
                bucket[j] = row(z.north()) * columns + column(z.east());
                bucketStart[bucket[j] + 1]++;
            }
        }
        for (int b = 0; b < columns * rows; b++) {
            bucketStart[b + 1] += bucketStart[b];
        }
        int[] next = Arrays.copyOf(bucketStart, columns * rows);
        for (int j = 0; j < isWide.length; j++) {
            if (!isWide[j]) {
                sorted[next[bucket[j]]++] = j;
            }
        }
    }

    /** Which measurements are so much less exact than most that they would widen everybody's search. */
    private static boolean[] wide(List<Observation> observations) {
        double[] variances = new double[observations.size()];
        for (int j = 0; j < variances.length; j++) {
            variances[j] = largestVariance(observations.get(j).measurement());
        }
        double[] ordered = variances.clone();
        Arrays.sort(ordered);
        boolean[] wide = new boolean[variances.length];
        for (int j = 0; j < wide.length; j++) {
            wide[j] = variances[j] > WIDE_VARIANCES * ordered[ordered.length / 2];
        }
        return wide;
    }

    private static double largestVariance(Measurement z) {
        return Math.max(z.varEast(), z.varNorth());
    }

    /**
     * Finds all measurements within a box around the gates of a bank's modes; some may lie outside the gates
     * themselves.
     *
     * @return how many; {@link #found} names them, in order of the scan
     */
    int query(Bank bank, double gateSigmas) {
        if (wide.length > found.length) {
            found = Arrays.copyOf(found, 2 * wide.length);
        }
        System.arraycopy(wide, 0, found, 0, wide.length);
        int count = wide.length;
        if (sorted.length == 0) {
            return count;
        }
        box(bank, gateSigmas);
        int firstColumn = column(boxWest);
        int lastColumn = column(boxEast);
        int firstRow = row(boxSouth);
        int lastRow = row(boxNorth);
        for (int row = firstRow; row <= lastRow; row++) {
            int from = bucketStart[row * columns + firstColumn];
            int to = bucketStart[row * columns + lastColumn + 1];
            if (count + to - from > found.length) {
                found = Arrays.copyOf(found, 2 * (count + to - from));
            }
            System.arraycopy(sorted, from, found, count, to - from);
            count += to - from;
        }
        Arrays.sort(found, 0, count);
        return count;
    }

    private void box(Bank bank, double gateSigmas) {
        boxWest = Double.POSITIVE_INFINITY;
        boxEast = Double.NEGATIVE_INFINITY;
        boxSouth = Double.POSITIVE_INFINITY;
        boxNorth = Double.NEGATIVE_INFINITY;
        double lag = Math.max(Math.abs(leastLag), Math.abs(greatestLag));
        for (int m = 0; m < bank.modes(); m++) {
            if (bank.weights[m] > 0) {
                Gaussian density = bank.densities[m];
                DMatrix4x4 p = density.covariance;
                double reachEast = gateSigmas * (Math.sqrt(p.a11) + lag * Math.sqrt(p.a33) + largestSigma);
                double reachNorth = gateSigmas * (Math.sqrt(p.a22) + lag * Math.sqrt(p.a44) + largestSigma);
                double east1 = density.mean.a1 - leastLag * density.mean.a3;
                double east2 = density.mean.a1 - greatestLag * density.mean.a3;
                double north1 = density.mean.a2 - leastLag * density.mean.a4;
                double north2 = density.mean.a2 - greatestLag * density.mean.a4;
                boxWest = Math.min(boxWest, Math.min(east1, east2) - reachEast);
                boxEast = Math.max(boxEast, Math.max(east1, east2) + reachEast);
                boxSouth = Math.min(boxSouth, Math.min(north1, north2) - reachNorth);
                boxNorth = Math.max(boxNorth, Math.max(north1, north2) + reachNorth);
            }
        }
    }

    /** A measurement's place in the scan, of those that the last query found. */
    int found(int i) {
        return found[i];
    }

    private int column(double east) {
        return (int) Math.max(0, Math.min(columns - 1.0, Math.floor((east - minEast) / bucketMetres)));
    }

    private int row(double north) {
        return (int) Math.max(0, Math.min(rows - 1.0, Math.floor((north - minNorth) / bucketMetres)));
    }
}
