package org.sweeptally.model;

import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;

/**
 * The extended Kalman update of one density by one polar measurement, in the region's plane. Where the linearisation
 * is poor it is iterated: Gauss-Newton steps to the most probable state (Bell and Cathey 1993, IEEE Transactions on
 * Automatic Control 38(2), "The iterated Kalman filter update as a Gauss-Newton method"); the measurement's density is
 * then that of the linearisation there, which is Laplace's approximation.
 *
 * <p>Poor is range x var(azimuth) / sigma(range) above 0.4 (Lerro and Bar-Shalom 1993), with the variance of the
 * innovation, the object's own included: it is over this angle that the circle is taken for its tangent. For a range
 * rate it is as much in terms of its second-order variance.
 *
 * <p>What the circle leaves its tangent by, over what is uncertain of the object across, is noise to a linear filter:
 * the variance of the second order is added to that of the range and of the range rate (second-order filter: Athans,
 * Wishner and Bertolini 1968, IEEE Transactions on Automatic Control 13(5), from memory). Without it two circles that
 * are nearly the same would seem to cross at a place.
 *
 * <p>With an azimuth of the innovation that is uncertain by over {@link #MOST_AZIMUTH_VARIANCE}, near the sensor and
 * before anything is known of an object, polar coordinates are no good to linearise in, nor where the steps do not
 * settle: then {@link #measure} says so, and the converted place is used instead, whose range rate counts no more than
 * a false detection's.
 */
final class PolarUpdate {

    /** Square radians: 0.2 radians squared, over which a circle leaves its tangent by 2 % of its radius. */
    static final double MOST_AZIMUTH_VARIANCE = 0.04;

    private static final double POOR_LINEARISATION = 0.4;

    /** The same of a range rate, in terms of its second-order variance: 0.4^2 / 2 of its own. */
    private static final double POOR_RANGE_RATE = 0.08;

    private static final int MOST_STEPS = 10;

    /** Steps have settled when they change what is measured by less than this many of their standard deviations. */
    private static final double SETTLED_SIGMAS = 1e-3;

    private static final double ROOT_2_PI = Math.sqrt(2 * StrictMath.PI);

    private Gaussian prior;
    private PolarMeasurement z;

    /** P [I; -lag I], 4 x 2: covariance of the state with the offset when it was seen; and that offset's covariance. */
    private final double[][] m = new double[4][2];
    private double w11;
    private double w12;
    private double w22;

    /** The offset from the station, at the prior's mean, and where it is linearised. */
    private double priorEast;
    private double priorNorth;
    private double east;
    private double north;
    private double eastSpeed;
    private double northSpeed;
    private double predictedRange;
    private double predictedAzimuth;

    /** 0 where no range rate was measured. */
    private double predictedRate;

    /** Slopes of range and azimuth by the offset, P H' of both, and the gain. */
    private double rangeByEast;
    private double rangeByNorth;
    private double azimuthByEast;
    private double azimuthByNorth;
    private final double[][] c = new double[4][2];
    private final double[][] k = new double[4][2];
    private double s22;
    private double inverse11;
    private double inverse12;
    private double inverse22;
    private double rangeInnovation;
    private double azimuthInnovation;

    private final double[] rateGain = new double[4];
    private double rateVariance;

    private final double[] step = new double[4];
    private double distanceSquared;
    private double peak;

    /** Takes one measurement; false where it is better taken as a place, and then nothing may be read. */
    boolean measure(Gaussian density, PolarMeasurement measurement) {
        prior = density;
        z = measurement;
        predictedRate = 0;
        DMatrix4 x = prior.mean;
        double lag = z.lagSeconds();
        priorEast = x.a1 - lag * x.a3 - z.station().east();
        priorNorth = x.a2 - lag * x.a4 - z.station().north();
        project();
        move(0, 0, 0, 0);
        return linearise() && s22 <= MOST_AZIMUTH_VARIANCE && rate() && settle();
    }

    /** Squared distance and density of range and azimuth. */
    private void density() {
        distanceSquared = inverse11 * rangeInnovation * rangeInnovation
                + 2 * inverse12 * rangeInnovation * azimuthInnovation
                + inverse22 * azimuthInnovation * azimuthInnovation;
        // Per square metre of the plane rather than per metre and radian: dA = g dg dazimuth = s ds dazimuth.
        double metresPerRadian = Math.max(z.range(), Math.sqrt(z.noise().varRange()));
        double determinant = inverse11 * inverse22 - inverse12 * inverse12;
        peak = Math.sqrt(determinant) / (2 * StrictMath.PI * metresPerRadian);
    }

    /** Covariances of the offset at which the object was seen. */
    private void project() {
        DMatrix4x4 p = prior.covariance;
        double lag = z.lagSeconds();
        m[0][0] = p.a11 - lag * p.a13;
        m[0][1] = p.a12 - lag * p.a14;
        m[1][0] = p.a21 - lag * p.a23;
        m[1][1] = p.a22 - lag * p.a24;
        m[2][0] = p.a31 - lag * p.a33;
        m[2][1] = p.a32 - lag * p.a34;
        m[3][0] = p.a41 - lag * p.a43;
        m[3][1] = p.a42 - lag * p.a44;
        w11 = m[0][0] - lag * m[2][0];
        w12 = m[0][1] - lag * m[2][1];
        w22 = m[1][1] - lag * m[3][1];
    }

    /** Goes to the prior's mean plus a step, to linearise there. */
    private void move(double stepEast, double stepNorth, double stepEastSpeed, double stepNorthSpeed) {
        double lag = z.lagSeconds();
        east = priorEast + stepEast - lag * stepEastSpeed;
        north = priorNorth + stepNorth - lag * stepNorthSpeed;
        eastSpeed = prior.mean.a3 + stepEastSpeed - z.station().eastVelocity();
        northSpeed = prior.mean.a4 + stepNorthSpeed - z.station().northVelocity();
        double height = z.station().heightDifference();
        predictedRange = Math.sqrt(east * east + north * north + height * height);
        predictedAzimuth = StrictMath.atan2(east, north);
    }

    /** Gain and innovation of range and azimuth; false where the innovation covariance is not positive definite. */
    private boolean linearise() {
        double squared = east * east + north * north;
        if (!(squared > 0)) {
            return false;
        }
        rangeByEast = east / predictedRange;
        rangeByNorth = north / predictedRange;
        azimuthByEast = north / squared;
        azimuthByNorth = -east / squared;
        for (int i = 0; i < 4; i++) {
            c[i][0] = m[i][0] * rangeByEast + m[i][1] * rangeByNorth;
            c[i][1] = m[i][0] * azimuthByEast + m[i][1] * azimuthByNorth;
        }
        double byEast = w11 * azimuthByEast + w12 * azimuthByNorth;
        double byNorth = w12 * azimuthByEast + w22 * azimuthByNorth;
        PolarMeasurement.Noise noise = z.noise();
        double s11 = rangeByEast * (w11 * rangeByEast + w12 * rangeByNorth)
                + rangeByNorth * (w12 * rangeByEast + w22 * rangeByNorth)
                + noise.varRange()
                + bending();
        double s12 = rangeByEast * byEast + rangeByNorth * byNorth + noise.covRangeAzimuth();
        s22 = azimuthByEast * byEast + azimuthByNorth * byNorth + noise.varAzimuth();
        double determinant = s11 * s22 - s12 * s12;
        if (!(determinant > 0 && s11 > 0)) {
            return false;
        }
        inverse11 = s22 / determinant;
        inverse12 = -s12 / determinant;
        inverse22 = s11 / determinant;
        double backEast = priorEast - east;
        double backNorth = priorNorth - north;
        rangeInnovation = z.range() - predictedRange - (rangeByEast * backEast + rangeByNorth * backNorth);
        azimuthInnovation = wrapped(z.azimuth() - predictedAzimuth)
                - (azimuthByEast * backEast + azimuthByNorth * backNorth);
        for (int i = 0; i < 4; i++) {
            k[i][0] = c[i][0] * inverse11 + c[i][1] * inverse12;
            k[i][1] = c[i][0] * inverse12 + c[i][1] * inverse22;
            step[i] = k[i][0] * rangeInnovation + k[i][1] * azimuthInnovation;
        }
        density();
        return true;
    }

    /** Iterates where the linearisation is poor; false where that does not settle. */
    private boolean settle() {
        double sigmaRange = Math.sqrt(z.noise().varRange());
        double sigmaAzimuth = Math.sqrt(z.noise().varAzimuth());
        double sigmaRate = Math.sqrt(z.noise().varRangeRate());
        if (predictedRange * s22 <= POOR_LINEARISATION * sigmaRange
                && !(z.hasRangeRate() && turning() > POOR_RANGE_RATE * sigmaRate * sigmaRate)) {
            return true;
        }
        for (int i = 0; i < MOST_STEPS; i++) {
            double rangeBefore = predictedRange;
            double azimuthBefore = predictedAzimuth;
            double rateBefore = predictedRate;
            move(step[0], step[1], step[2], step[3]);
            if (!linearise() || !rate()) {
                return false;
            }
            if (Math.abs(predictedRange - rangeBefore) <= SETTLED_SIGMAS * sigmaRange
                    && Math.abs(wrapped(predictedAzimuth - azimuthBefore)) <= SETTLED_SIGMAS * sigmaAzimuth
                    && !(Math.abs(predictedRate - rateBefore) > SETTLED_SIGMAS * sigmaRate)) {
                return true;
            }
        }
        return false;
    }

    /**
     * The range rate, as one more number measured at the same linearisation; false where its variance is not positive.
     */
    private boolean rate() {
        if (!z.hasRangeRate()) {
            return true;
        }
        double slant = predictedRange;
        double along = east * eastSpeed + north * northSpeed;
        predictedRate = along / slant;
        double byEast = eastSpeed / slant - along * east / (slant * slant * slant);
        double byNorth = northSpeed / slant - along * north / (slant * slant * slant);
        double lag = z.lagSeconds();
        double h3 = rangeByEast - lag * byEast;
        double h4 = rangeByNorth - lag * byNorth;
        DMatrix4x4 p = prior.covariance;
        double c1 = p.a11 * byEast + p.a12 * byNorth + p.a13 * h3 + p.a14 * h4;
        double c2 = p.a21 * byEast + p.a22 * byNorth + p.a23 * h3 + p.a24 * h4;
        double c3 = p.a31 * byEast + p.a32 * byNorth + p.a33 * h3 + p.a34 * h4;
        double c4 = p.a41 * byEast + p.a42 * byNorth + p.a43 * h3 + p.a44 * h4;
        double t1 = c[0][0] * byEast + c[1][0] * byNorth + c[2][0] * h3 + c[3][0] * h4;
        double t2 = c[0][1] * byEast + c[1][1] * byNorth + c[2][1] * h3 + c[3][1] * h4;
        double u1 = inverse11 * t1 + inverse12 * t2;
        double u2 = inverse12 * t1 + inverse22 * t2;
        rateVariance = byEast * c1 + byNorth * c2 + h3 * c3 + h4 * c4 - (t1 * u1 + t2 * u2)
                + z.noise().varRangeRate() + turning();
        if (!(rateVariance > 0)) {
            return false;
        }
        rateGain[0] = (c1 - (c[0][0] * u1 + c[0][1] * u2)) / rateVariance;
        rateGain[1] = (c2 - (c[1][0] * u1 + c[1][1] * u2)) / rateVariance;
        rateGain[2] = (c3 - (c[2][0] * u1 + c[2][1] * u2)) / rateVariance;
        rateGain[3] = (c4 - (c[3][0] * u1 + c[3][1] * u2)) / rateVariance;
        // What the state after range and azimuth leaves of it, from where it was linearised.
        DMatrix4 x = prior.mean;
        double backEast = priorEast + step[0] - lag * step[2] - east;
        double backNorth = priorNorth + step[1] - lag * step[3] - north;
        double backEastSpeed = x.a3 + step[2] - z.station().eastVelocity() - eastSpeed;
        double backNorthSpeed = x.a4 + step[3] - z.station().northVelocity() - northSpeed;
        double innovation = z.rangeRate() - predictedRate - byEast * backEast - byNorth * backNorth
                - rangeByEast * backEastSpeed - rangeByNorth * backNorthSpeed;
        for (int i = 0; i < 4; i++) {
            step[i] += rateGain[i] * innovation;
        }
        distanceSquared += innovation * innovation / rateVariance;
        peak *= 2 * z.station().largestRangeRate() / (ROOT_2_PI * Math.sqrt(rateVariance));
        return true;
    }

    /** Second-order variance of a range, 1/2 (var(across) / range)^2, square metres. */
    private double bending() {
        double squared = east * east + north * north;
        double across = (w11 * north * north - 2 * w12 * east * north + w22 * east * east) / squared;
        double bent = across / predictedRange;
        return 0.5 * bent * bent;
    }

    /** Second-order variance of a range rate: of direction times velocity across, square metres a second squared. */
    private double turning() {
        DMatrix4x4 p = prior.covariance;
        double e = -east;
        double n = north;
        double squared = e * e + n * n;
        double place = w11 * n * n + 2 * w12 * e * n + w22 * e * e;
        double both = m[2][0] * n * n + (m[2][1] + m[3][0]) * e * n + m[3][1] * e * e;
        double speed = p.a33 * n * n + 2 * p.a34 * e * n + p.a44 * e * e;
        return (place * speed + both * both) / (squared * squared * predictedRange * predictedRange);
    }

    double distanceSquared() {
        return distanceSquared;
    }

    /** Factor of the density, per square metre. */
    double peak() {
        return peak;
    }

    void step(double[] into, int at) {
        System.arraycopy(step, 0, into, at, 4);
    }

    /** The updated covariance, upper triangle first, so that it stays symmetric to the bit. */
    void covariance(DMatrix4x4 u) {
        DMatrix4x4 p = prior.covariance;
        double rate = z.hasRangeRate() ? rateVariance : 0;
        u.a11 = p.a11 - less(0, 0, rate);
        u.a12 = p.a12 - less(0, 1, rate);
        u.a13 = p.a13 - less(0, 2, rate);
        u.a14 = p.a14 - less(0, 3, rate);
        u.a22 = p.a22 - less(1, 1, rate);
        u.a23 = p.a23 - less(1, 2, rate);
        u.a24 = p.a24 - less(1, 3, rate);
        u.a33 = p.a33 - less(2, 2, rate);
        u.a34 = p.a34 - less(2, 3, rate);
        u.a44 = p.a44 - less(3, 3, rate);
        Gaussian.mirror(u);
    }

    private double less(int i, int j, double rate) {
        double byPlace = k[i][0] * c[j][0] + k[i][1] * c[j][1];
        return rate == 0 ? byPlace : byPlace + rateGain[i] * rate * rateGain[j];
    }

    /** An angle from -pi to pi. */
    static double wrapped(double radians) {
        double turns = Math.rint(radians / (2 * StrictMath.PI));
        return radians - turns * (2 * StrictMath.PI);
    }
}
