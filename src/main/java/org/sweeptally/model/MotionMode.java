package org.sweeptally.model;

/**
 * One way of moving of a {@link MotionProfile}.
 *
 * @param name         within its profile
 * @param motion       how it moves
 * @param share        probability that an object new to the picture moves so, 0 to 1; those of a profile sum to 1
 * @param dwellSeconds how long it keeps to it, on average, before it changes to another of its profile, which it picks
 *                     in
 *                     proportion to their shares; of no account for the only mode of a profile
 */
public record MotionMode(String name, MotionModel motion, double share, double dwellSeconds) {}
