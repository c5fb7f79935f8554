package org.sweeptally.model;

import java.util.List;

/**
 * A kind of object, by how it moves and how long it stays. An object never changes its kind, but what is known of it
 * may: until then a density keeps modes of several profiles.
 *
 * @param name                        the site's word for it
 * @param share                       probability that an object new to the picture is of this kind; all profiles' sum
 *                                    to 1
 * @param lifetimeSeconds             mean lifetime
 * @param speedSigma                  standard deviation of the velocity of unseen objects along each axis, metres a
 *                                    second; 0 for objects that never move
 * @param largestSpeed                no object of this kind is faster, metres a second; infinite for no limit
 * @param modes                       at least one
 */
public record MotionProfile(
        String name,
        double share,
        double lifetimeSeconds,
        double speedSigma,
        double largestSpeed,
        List<MotionMode> modes) {

    public MotionProfile {
        modes = List.copyOf(modes);
        if (modes.isEmpty()) {
            throw new IllegalArgumentException("motion profile " + name + " needs a mode");
        }
    }

    /** The only kind, which moves in one way. */
    public static MotionProfile single(MotionModel motion, double lifetimeSeconds, double speedSigma) {
        return new MotionProfile(
                "object",
                1,
                lifetimeSeconds,
                speedSigma,
                Double.POSITIVE_INFINITY,
                List.of(new MotionMode("straight", motion, 1, Double.POSITIVE_INFINITY)));
    }
}
