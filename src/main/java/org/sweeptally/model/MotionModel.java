package org.sweeptally.model;

/**
 * How an object moves while it keeps to one way of moving: predicts a density over [east, north, east velocity, north
 * velocity].
 */
public sealed interface MotionModel permits NearlyConstantVelocity, CoordinatedTurn, StandingStill {

    /** Predicts a density over a number of seconds, 0 or more, in place; a semigroup in the seconds. */
    void predict(Gaussian density, double seconds);

    /** Whether an object that moves so gets anywhere. */
    boolean moves();
}
