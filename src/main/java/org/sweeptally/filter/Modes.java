package org.sweeptally.filter;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import org.sweeptally.model.Gaussian;
import org.sweeptally.model.ModeChain;
import org.sweeptally.model.MotionMode;
import org.sweeptally.model.MotionProfile;

/**
 * All ways of moving of a site, profile after profile, as the {@linkplain Bank banks} of its objects number them, and
 * how time passes for a bank.
 */
final class Modes {

    /** A mode less probable than this is let go; its profile's chain may bring it back. */
    private static final double LEAST_WEIGHT = 1e-9;

    /** Below this share of the largest speed, a speed is not asked whether it is allowed. */
    private static final double CLEARLY_ALLOWED = 0.5;

    /** Makes the logistic function the normal distribution function, within 0.01 (Haley 1952, from memory). */
    private static final double LOGISTIC_SCALE = 1.702;

    /** Farther above the largest speed than so many standard deviations nothing more is known. */
    private static final double CLEARLY_TOO_FAST_SIGMAS = 20;

    /** Never 0, so that no scan ends all modes. */
    private static final double LEAST_WITHIN_SPEED = 1e-15;

    /** A density knows its speed no better than this, metres a second. */
    private static final double LEAST_SPEED_SIGMA = 1e-3;

    private final List<MotionProfile> profiles;
    private final List<MotionMode> modes = new ArrayList<>();
    private final List<ModeChain> chains = new ArrayList<>();
    private final ModeMixing mixing = new ModeMixing();
    private final int[] profileOf;

    /** Where a profile's modes start; one more for the end. */
    private final int[] firstOf;

    Modes(List<MotionProfile> profiles) {
        this.profiles = List.copyOf(profiles);
        firstOf = new int[profiles.size() + 1];
        for (int p = 0; p < profiles.size(); p++) {
            modes.addAll(profiles.get(p).modes());
            chains.add(new ModeChain(profiles.get(p).modes()));
            firstOf[p + 1] = modes.size();
        }
        profileOf = new int[modes.size()];
        for (int p = 0; p < profiles.size(); p++) {
            Arrays.fill(profileOf, firstOf[p], firstOf[p + 1], p);
        }
    }

    int count() {
        return profileOf.length;
    }

    List<MotionProfile> profiles() {
        return profiles;
    }

    /** Whether both number the same modes, so that banks of one are banks of the other. */
    boolean isLaidOutAs(Modes other) {
        return profiles.size() == other.profiles.size() && names().equals(other.names());
    }

    private List<String> names() {
        List<String> names = new ArrayList<>();
        for (int m = 0; m < modes.size(); m++) {
            names.add(profiles.get(profileOf[m]).name() + "/" + modes.get(m).name());
        }
        return names;
    }

    /** Whether still and moving objects are told apart. */
    boolean tellStill() {
        return modes.stream().anyMatch(mode -> !mode.motion().moves());
    }

    /** Probability that a bank's object moves. */
    double moving(Bank bank) {
        double sum = 0;
        for (int m = 0; m < modes.size(); m++) {
            sum += modes.get(m).motion().moves() ? bank.weights[m] : 0;
        }
        return Math.min(1, sum);
    }

    /** A bank that knows where an object is but not how it moves. */
    Bank begin(Gaussian density) {
        double[] weights = new double[modes.size()];
        Gaussian[] densities = new Gaussian[modes.size()];
        double sum = 0;
        for (int m = 0; m < weights.length; m++) {
            weights[m] = profiles.get(profileOf[m]).share() * modes.get(m).share();
            sum += weights[m];
        }
        for (int m = 0; m < weights.length; m++) {
            weights[m] /= sum;
            densities[m] = weights[m] > 0 ? density.copy() : null;
        }
        return new Bank(weights, densities);
    }

    /** Share of a profile's new objects that move in a mode. */
    double shareInProfile(int mode) {
        return modes.get(mode).share();
    }

    boolean moves(int mode) {
        return modes.get(mode).motion().moves();
    }

    int firstOf(int profile) {
        return firstOf[profile];
    }

    int endOf(int profile) {
        return firstOf[profile + 1];
    }

    /** Probability of surviving some seconds, by profile. */
    double[] survival(double seconds) {
        double[] survival = new double[profiles.size()];
        for (int p = 0; p < survival.length; p++) {
            survival[p] = StrictMath.exp(-seconds / profiles.get(p).lifetimeSeconds());
        }
        return survival;
    }

    /**
     * Lets an object grow older: who lives longer is more probable among the living.
     *
     * @return the probability of surviving, over all profiles
     */
    double survive(Bank bank, double[] survival) {
        if (survival.length == 1) {
            return survival[0];
        }
        double alive = 0;
        for (int m = 0; m < profileOf.length; m++) {
            alive += bank.weights[m] * survival[profileOf[m]];
        }
        for (int m = 0; m < profileOf.length; m++) {
            bank.weights[m] *= survival[profileOf[m]] / alive;
        }
        bank.changed();
        return alive;
    }

    /** Lets an object move on: changes of mode within its profile, then each mode's motion. */
    void move(Bank bank, double seconds) {
        for (int p = 0; p < profiles.size(); p++) {
            if (firstOf[p + 1] - firstOf[p] > 1) {
                mix(bank, p, seconds);
            }
        }
        for (int m = 0; m < profileOf.length; m++) {
            if (bank.densities[m] != null) {
                modes.get(m).motion().predict(bank.densities[m], seconds);
            }
        }
        bank.changed();
    }

    private void mix(Bank bank, int profile, double seconds) {
        int from = firstOf[profile];
        int to = firstOf[profile + 1];
        double[] weights = Arrays.copyOfRange(bank.weights, from, to);
        Gaussian[] densities = Arrays.copyOfRange(bank.densities, from, to);
        double sum = 0;
        for (double weight : weights) {
            sum += weight;
        }
        if (sum > 0) {
            for (int m = 0; m < densities.length; m++) {
                densities[m] = densities[m] == null ? bank.overall().copy() : densities[m];
            }
            mixing.mix(weights, densities, chains.get(profile).transition(seconds));
            System.arraycopy(weights, 0, bank.weights, from, to - from);
            System.arraycopy(densities, 0, bank.densities, from, to - from);
        }
    }

    /**
     * Takes the weights of a bank's modes as they come out of a sum, so that they sum to 1; lets go of modes that have
     * become impossible, and of speeds that their profile does not have.
     */
    void settle(double[] weights, Gaussian[] densities) {
        if (weights.length == 1) {
            weights[0] = 1;
            return;
        }
        double sum = 0;
        for (int m = 0; m < weights.length; m++) {
            if (weights[m] > 0) {
                weights[m] *= withinSpeed(m, densities[m]);
            }
            sum += weights[m];
        }
        double kept = 0;
        for (int m = 0; m < weights.length; m++) {
            weights[m] = weights[m] < LEAST_WEIGHT * sum ? 0 : weights[m];
            kept += weights[m];
        }
        for (int m = 0; m < weights.length; m++) {
            weights[m] /= kept;
            densities[m] = weights[m] > 0 ? densities[m] : null;
        }
    }

    /**
     * Probability that a density's speed is one that its profile has, by the Gaussian along its mean velocity. It
     * weighs the mode after every scan: a craft that keeps close to its limit counts against its profile again and
     * again.
     */
    private double withinSpeed(int mode, Gaussian density) {
        double largest = profiles.get(profileOf[mode]).largestSpeed();
        double east = density.mean.a3;
        double north = density.mean.a4;
        double squared = east * east + north * north;
        if (squared <= CLEARLY_ALLOWED * CLEARLY_ALLOWED * largest * largest) {
            return 1;
        }
        double speed = Math.sqrt(squared);
        double variance = (east * east * density.covariance.a33
                        + 2 * east * north * density.covariance.a34
                        + north * north * density.covariance.a44)
                / squared;
        double sigmas = (speed - largest) / Math.max(Math.sqrt(Math.max(0, variance)), LEAST_SPEED_SIGMA);
        return sigmas > CLEARLY_TOO_FAST_SIGMAS
                ? LEAST_WITHIN_SPEED
                : 1 / (1 + StrictMath.exp(LOGISTIC_SCALE * sigmas));
    }
}
