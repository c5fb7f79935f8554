package org.sweeptally.bench;

import java.util.List;
import org.sweeptally.model.CoordinatedTurn;
import org.sweeptally.model.MotionMode;
import org.sweeptally.model.MotionProfile;
import org.sweeptally.model.NearlyConstantVelocity;
import org.sweeptally.model.StandingStill;

/** How the filter of the benchmark thinks that objects move; they really keep straight in each case. */
public enum SceneMotion {

    /** One mode. */
    STRAIGHT,

    /** Straight or restless: two modes. */
    RESTLESS,

    /** Straight, turning left or turning right: three modes. */
    TURNING,

    /** The same and piles that never move: four modes of two kinds. */
    TWO_KINDS;

    List<MotionProfile> of(MotionProfile plain) {
        MotionMode straight = new MotionMode("straight", plain.modes().get(0).motion(), 0.9, 240);
        MotionMode restless = new MotionMode("turning", new NearlyConstantVelocity(3), 0.1, 10);
        MotionMode left = new MotionMode("turning-left", new CoordinatedTurn(9, 0.2), 0.05, 10);
        MotionMode right = new MotionMode("turning-right", new CoordinatedTurn(-9, 0.2), 0.05, 10);
        return switch (this) {
            case STRAIGHT -> List.of(plain);
            case RESTLESS -> List.of(craft(plain, 1, straight, restless));
            case TURNING -> List.of(craft(plain, 1, straight, left, right));
            case TWO_KINDS -> List.of(
                    craft(plain, 0.9, straight, left, right),
                    new MotionProfile("piles", 0.1, 864_000, 0, 0, List.of(
                            new MotionMode("still", new StandingStill(0.01, 0.1), 1, Double.POSITIVE_INFINITY))));
        };
    }

    private static MotionProfile craft(MotionProfile plain, double share, MotionMode... modes) {
        return new MotionProfile(
                "craft", share, plain.lifetimeSeconds(), plain.speedSigma(), plain.largestSpeed(), List.of(modes));
    }
}
