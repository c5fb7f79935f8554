package org.sweeptally.model;

import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;

/**
 * The Kalman update of one density by measurements (Kalman 1960). For positions, what does not depend on the measured
 * place (gain, innovation covariance, updated covariance) is computed once and shared by all measurements that are
 * equally exact and equally old, which in most scans is all of them. Polar ones have the extended update of
 * {@link PolarUpdate}, each its own.
 *
 * <p>With H = [I, -lag I]: innovation covariance S = H P H' + R, gain K = P H' S^-1, updated covariance P - K S K'.
 * Use: {@link #prior}, then for each measurement {@link #measure} and the accessors.
 *
 * <p>Whatever was measured, densities are per square metre of the measured place, as clutter is. A range rate comes in
 * as a factor: its density over that of a false detection's range rate, which is uniform between minus and plus the
 * largest one. So false detections per square metre stay what they are, with range rates and without.
 */
public final class MeasurementUpdate {

    private Gaussian prior;
    private PositionMeasurement gainOf;

    private final GateRule gates = new GateRule();
    private final PolarUpdate polar = new PolarUpdate();

    /** Whether the last measurement was taken as range and azimuth, and whether with a range rate. */
    private boolean isPolar;

    private boolean hasRangeRate;

    /** S^-1, and the factor 1 / (2 pi sqrt |S|) of the innovation's density. */
    private double inverse11;
    private double inverse12;
    private double inverse22;
    private double peak;

    /** P H', 4 x 2, row by row. */
    private double c11;
    private double c12;
    private double c21;
    private double c22;
    private double c31;
    private double c32;
    private double c41;
    private double c42;

    /** K, 4 x 2, row by row. */
    private double k11;
    private double k12;
    private double k21;
    private double k22;
    private double k31;
    private double k32;
    private double k41;
    private double k42;

    private final DMatrix4x4 updated = new DMatrix4x4();
    private boolean updatedIsCurrent;

    private double innovationEast;
    private double innovationNorth;

    /** Starts on another density. */
    public void prior(Gaussian density) {
        prior = density;
        gainOf = null;
    }

    /**
     * Takes one measurement; false where the innovation covariance is not positive definite, and then nothing may be
     * read.
     */
    public boolean measure(Measurement measurement) {
        if (measurement instanceof PolarMeasurement z) {
            isPolar = polar.measure(prior, z);
            hasRangeRate = isPolar && z.hasRangeRate();
            if (isPolar) {
                updatedIsCurrent = false;
                gainOf = null;
                return true;
            }
            return measurePosition(z.converted());
        }
        isPolar = false;
        hasRangeRate = false;
        return measurePosition((PositionMeasurement) measurement);
    }

    private boolean measurePosition(PositionMeasurement z) {
        if (gainOf == null || !z.sharesGainWith(gainOf)) {
            if (!gain(z)) {
                gainOf = null;
                return false;
            }
            gainOf = z;
        }
        DMatrix4 x = prior.mean;
        innovationEast = z.east() - (x.a1 - z.lagSeconds() * x.a3);
        innovationNorth = z.north() - (x.a2 - z.lagSeconds() * x.a4);
        return true;
    }

    /**
     * Squared distance of the measurement in standard deviations: the innovation's Mahalanobis distance, of two
     * numbers, or of three with a range rate.
     */
    public double distanceSquared() {
        if (isPolar) {
            return polar.distanceSquared();
        }
        return inverse11 * innovationEast * innovationEast
                + 2 * inverse12 * innovationEast * innovationNorth
                + inverse22 * innovationNorth * innovationNorth;
    }

    /**
     * Whether the measurement lies in a gate of so many standard deviations. Two numbers do with probability
     * 1 - exp(-gateSigmas^2 / 2); three have the wider gate in which they do with the same probability.
     */
    public boolean isWithin(double gateSigmas) {
        return distanceSquared() <= (hasRangeRate ? gates.ofThree(gateSigmas) : gateSigmas * gateSigmas);
    }

    /** Density of the measurement under the prior, per square metre. */
    public double likelihood() {
        return peak() * StrictMath.exp(-0.5 * distanceSquared());
    }

    /** Natural logarithm of {@link #likelihood}. */
    public double logLikelihood() {
        return StrictMath.log(peak()) - 0.5 * distanceSquared();
    }

    private double peak() {
        return isPolar ? polar.peak() : peak;
    }

    /** Writes the step from the prior's mean to the updated mean: four numbers from an index on. */
    public void step(double[] into, int at) {
        if (isPolar) {
            polar.step(into, at);
            return;
        }
        into[at] = k11 * innovationEast + k12 * innovationNorth;
        into[at + 1] = k21 * innovationEast + k22 * innovationNorth;
        into[at + 2] = k31 * innovationEast + k32 * innovationNorth;
        into[at + 3] = k41 * innovationEast + k42 * innovationNorth;
    }

    /** The updated covariance; valid until the next call of {@link #measure} or {@link #prior}. */
    public DMatrix4x4 updatedCovariance() {
        if (!updatedIsCurrent) {
            if (isPolar) {
                polar.covariance(updated);
            } else {
                updateCovariance();
            }
            updatedIsCurrent = true;
        }
        return updated;
    }

    /** The updated density, for use outside a mixture. */
    public Gaussian updated() {
        double[] step = new double[4];
        step(step, 0);
        DMatrix4 x = prior.mean;
        return new Gaussian(
                new DMatrix4(x.a1 + step[0], x.a2 + step[1], x.a3 + step[2], x.a4 + step[3]),
                new DMatrix4x4(updatedCovariance()));
    }

    /**
     * The density of an object that was never seen before this measurement of it: at the measured place, with a
     * velocity of mean 0 but for what a range rate says.
     *
     * @param speedSigma standard deviation of the velocity of unseen objects along each axis, metres a second
     */
    public static Gaussian firstSeen(Measurement measurement, double speedSigma) {
        return new FirstSeen(measurement, speedSigma).density();
    }

    /**
     * What the range rate says for an unseen object at the measured place and against a false detection there: the
     * density of such a range rate under the spread of velocities, over that of a false detection's. 1 where none was
     * measured. The density of unseen objects at the place times this is what the measurement says of them.
     */
    public static double firstSeenRatio(Measurement measurement, double speedSigma) {
        return measurement instanceof PolarMeasurement polar && polar.hasRangeRate()
                ? new FirstSeen(polar, speedSigma).rateRatio()
                : 1;
    }

    private boolean gain(PositionMeasurement z) {
        DMatrix4x4 p = prior.covariance;
        double lag = z.lagSeconds();
        c11 = p.a11 - lag * p.a13;
        c12 = p.a12 - lag * p.a14;
        c21 = p.a21 - lag * p.a23;
        c22 = p.a22 - lag * p.a24;
        c31 = p.a31 - lag * p.a33;
        c32 = p.a32 - lag * p.a34;
        c41 = p.a41 - lag * p.a43;
        c42 = p.a42 - lag * p.a44;
        double s11 = c11 - lag * c31 + z.varEast();
        double s12 = c12 - lag * c32 + z.covEastNorth();
        double s22 = c22 - lag * c42 + z.varNorth();
        double determinant = s11 * s22 - s12 * s12;
        if (!(determinant > 0 && s11 > 0)) {
            return false;
        }
        inverse11 = s22 / determinant;
        inverse12 = -s12 / determinant;
        inverse22 = s11 / determinant;
        peak = 1 / (2 * StrictMath.PI * Math.sqrt(determinant));
        k11 = c11 * inverse11 + c12 * inverse12;
        k12 = c11 * inverse12 + c12 * inverse22;
        k21 = c21 * inverse11 + c22 * inverse12;
        k22 = c21 * inverse12 + c22 * inverse22;
        k31 = c31 * inverse11 + c32 * inverse12;
        k32 = c31 * inverse12 + c32 * inverse22;
        k41 = c41 * inverse11 + c42 * inverse12;
        k42 = c41 * inverse12 + c42 * inverse22;
        updatedIsCurrent = false;
        return true;
    }

    /** P - K (P H')', upper triangle first, so that it stays symmetric to the bit. */
    private void updateCovariance() {
        DMatrix4x4 p = prior.covariance;
        DMatrix4x4 u = updated;
        u.a11 = p.a11 - (k11 * c11 + k12 * c12);
        u.a12 = p.a12 - (k11 * c21 + k12 * c22);
        u.a13 = p.a13 - (k11 * c31 + k12 * c32);
        u.a14 = p.a14 - (k11 * c41 + k12 * c42);
        u.a22 = p.a22 - (k21 * c21 + k22 * c22);
        u.a23 = p.a23 - (k21 * c31 + k22 * c32);
        u.a24 = p.a24 - (k21 * c41 + k22 * c42);
        u.a33 = p.a33 - (k31 * c31 + k32 * c32);
        u.a34 = p.a34 - (k31 * c41 + k32 * c42);
        u.a44 = p.a44 - (k41 * c41 + k42 * c42);
        Gaussian.mirror(u);
    }
}
