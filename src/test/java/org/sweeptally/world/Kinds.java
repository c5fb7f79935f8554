package org.sweeptally.world;

import java.util.List;
import org.sweeptally.model.CoordinatedTurn;
import org.sweeptally.model.MotionMode;
import org.sweeptally.model.MotionProfile;
import org.sweeptally.model.NearlyConstantVelocity;
import org.sweeptally.model.StandingStill;

/** Kinds of objects for simulations. */
final class Kinds {

    private static final double NOISE = 0.05;
    private static final double SPEED_SIGMA = 6;
    private static final double LARGEST_SPEED = 24;
    private static final double LIFETIME_SECONDS = 600;

    private Kinds() {}

    /** One kind that keeps straight. */
    static List<MotionProfile> straightOnly() {
        return straightOnly(NOISE);
    }

    static List<MotionProfile> straightOnly(double accelerationNoise) {
        return List.of(
                MotionProfile.single(new NearlyConstantVelocity(accelerationNoise), LIFETIME_SECONDS, SPEED_SIGMA));
    }

    /** One kind that keeps straight and turns now and then, by about 9 degrees a second to one side or the other. */
    static List<MotionProfile> turning() {
        return List.of(new MotionProfile("craft", 1, LIFETIME_SECONDS, SPEED_SIGMA, LARGEST_SPEED, List.of(
                new MotionMode("straight", new NearlyConstantVelocity(NOISE), 0.9, 240),
                new MotionMode("turning-left", new CoordinatedTurn(9, 0.2), 0.05, 10),
                new MotionMode("turning-right", new CoordinatedTurn(-9, 0.2), 0.05, 10))));
    }

    /** The same without a known rate: a restless mode instead. */
    static List<MotionProfile> restless() {
        return List.of(new MotionProfile("craft", 1, LIFETIME_SECONDS, SPEED_SIGMA, LARGEST_SPEED, List.of(
                new MotionMode("straight", new NearlyConstantVelocity(NOISE), 0.9, 240),
                new MotionMode("turning", new NearlyConstantVelocity(3), 0.1, 10))));
    }

    /** Craft that also moor, and piles that never move. */
    static List<MotionProfile> craftAndPiles() {
        return List.of(
                new MotionProfile("craft", 0.8, LIFETIME_SECONDS, SPEED_SIGMA, LARGEST_SPEED, List.of(
                        new MotionMode("still", new StandingStill(0.01, 0.1), 0.2, 600),
                        new MotionMode("straight", new NearlyConstantVelocity(NOISE), 0.7, 240),
                        new MotionMode("turning-left", new CoordinatedTurn(9, 0.2), 0.05, 10),
                        new MotionMode("turning-right", new CoordinatedTurn(-9, 0.2), 0.05, 10))),
                new MotionProfile("piles", 0.2, 864_000, 0, 0, List.of(
                        new MotionMode("still", new StandingStill(0.01, 0.1), 1, Double.POSITIVE_INFINITY))));
    }
}
