package org.sweeptally.model;

/**
 * A measured range and azimuth, and a range rate where the sensor measures it, in the region's plane. With the offset
 * (e, n) of the object from the station at the time when it was seen, its velocity (e', n') against the station's, and
 * the height difference h, assumed not to change, it observes
 *
 * <pre>
 *   s = sqrt(e^2 + n^2 + h^2)     azimuth = atan2(e, n)     range rate = (e e' + n n') / s
 * </pre>
 *
 * <p>Its place is the unbiased conversion of Longbin, Xiaoquan, Yizhou, Kang and Bar-Shalom (1998, IEEE Transactions on
 * Aerospace and Electronic Systems 34(3), "Unbiased converted measurements for tracking"): the range along the ground
 * times exp(sigma^2 / 2) with sigma that of the azimuth, since the mean of places at uncertain angles lies inside the
 * circle; the covariance is that given the measurement. Used where a place is needed: to find pairs, and at the first
 * detection. The update itself is {@link PolarUpdate}.
 */
public final class PolarMeasurement implements Measurement {

    /**
     * How exact it is.
     *
     * @param varRange        square metres
     * @param covRangeAzimuth metres times radians
     * @param varAzimuth      square radians
     * @param varRangeRate    square metres a second squared; of no account without a range rate
     */
    public record Noise(double varRange, double covRangeAzimuth, double varAzimuth, double varRangeRate) {}

    /**
     * Where and how it was measured.
     *
     * @param east             the sensor's place in the region's plane, metres
     * @param north            metres
     * @param eastVelocity     the sensor's own velocity, metres a second
     * @param northVelocity    metres a second
     * @param heightDifference how far the object is above the sensor, metres, below 0 for under it
     * @param largestRangeRate range rates of false detections are uniform from minus this to this, metres a second
     */
    public record Station(
            double east,
            double north,
            double eastVelocity,
            double northVelocity,
            double heightDifference,
            double largestRangeRate) {

        /** A sensor that stands still, as high as the objects. */
        public static Station at(double east, double north, double largestRangeRate) {
            return new Station(east, north, 0, 0, 0, largestRangeRate);
        }
    }

    private final double range;
    private final double azimuth;
    private final double rangeRate;
    private final Noise noise;
    private final Station station;
    private final PositionMeasurement converted;

    /**
     * @param range      slant range, metres, 0 or more
     * @param azimuth    radians clockwise from the plane's north; the plane's convergence is applied already
     * @param rangeRate  metres a second, positive when the object recedes; NaN where it is not measured
     * @param lagSeconds how long before the time of the state the object was seen there
     */
    public PolarMeasurement(
            double range, double azimuth, double rangeRate, Noise noise, Station station, double lagSeconds) {
        this.range = range;
        this.azimuth = azimuth;
        this.rangeRate = rangeRate;
        this.noise = noise;
        this.station = station;
        this.converted = convert(lagSeconds);
    }

    /**
     * The equations of Longbin et al. (1998), in axes along and across the line of sight, where nothing cancels:
     * with a = exp(sigma^2) - 1 and b = 1 - exp(-2 sigma^2), along: g^2 (a - b/2) + var(g) (1 - b/2), across: (g^2 +
     * var(g)) b/2. A covariance of range and azimuth is turned linearly, which they leave open.
     */
    private PositionMeasurement convert(double lagSeconds) {
        double ground = groundRange();
        // The variance of the range along the ground; below the sensor, where s ds = g dg says nothing, that of a
        // range whose square is as uncertain as the square of the slant range.
        double squeeze = range * range / (ground * ground + (slantTerm() == 0 ? 0 : range * Math.sqrt(noise.varRange)));
        double stretch = range > 0 ? squeeze : 1;
        double varGround = noise.varRange * stretch;
        double cross = noise.covRangeAzimuth * Math.sqrt(stretch) * ground;
        double a = StrictMath.expm1(noise.varAzimuth);
        double b = -StrictMath.expm1(-2 * noise.varAzimuth);
        double along = ground * ground * (a - 0.5 * b) + varGround * (1 - 0.5 * b);
        double across = (ground * ground + varGround) * 0.5 * b;
        double reach = ground * StrictMath.exp(0.5 * noise.varAzimuth);
        double sin = StrictMath.sin(azimuth);
        double cos = StrictMath.cos(azimuth);
        return new PositionMeasurement(
                station.east + reach * sin,
                station.north + reach * cos,
                sin * sin * along + cos * cos * across + 2 * sin * cos * cross,
                sin * cos * (along - across) + (cos * cos - sin * sin) * cross,
                cos * cos * along + sin * sin * across - 2 * sin * cos * cross,
                lagSeconds);
    }

    private double slantTerm() {
        return station.heightDifference * station.heightDifference;
    }

    /** The slant range without what the height difference adds to it, metres; 0 below that. */
    double groundRange() {
        return groundRange(range, station.heightDifference);
    }

    /** The range along the ground of a slant range; 0 where the height difference alone is more. */
    public static double groundRange(double slantRange, double heightDifference) {
        return heightDifference == 0
                ? slantRange
                : Math.sqrt(Math.max(0, slantRange * slantRange - heightDifference * heightDifference));
    }

    /** Slant range, metres. */
    public double range() {
        return range;
    }

    /** Radians clockwise from the plane's north. */
    public double azimuth() {
        return azimuth;
    }

    /** Metres a second, positive when the object recedes; NaN where it is not measured. */
    public double rangeRate() {
        return rangeRate;
    }

    public boolean hasRangeRate() {
        return !Double.isNaN(rangeRate);
    }

    public Noise noise() {
        return noise;
    }

    public Station station() {
        return station;
    }

    /** The measurement as a place alone: unbiased, and without the range rate. */
    public PositionMeasurement converted() {
        return converted;
    }

    @Override
    public double east() {
        return converted.east();
    }

    @Override
    public double north() {
        return converted.north();
    }

    @Override
    public double varEast() {
        return converted.varEast();
    }

    @Override
    public double covEastNorth() {
        return converted.covEastNorth();
    }

    @Override
    public double varNorth() {
        return converted.varNorth();
    }

    @Override
    public double lagSeconds() {
        return converted.lagSeconds();
    }
}
