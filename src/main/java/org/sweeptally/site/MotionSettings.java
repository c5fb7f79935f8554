package org.sweeptally.site;

/**
 * How objects move: nearly constant velocity with continuous white noise acceleration.
 *
 * @param accelerationNoise              spectral density, square metres a second cubed
 * @param speedSigmaMetresPerSecond      standard deviation of the velocity along each axis, of objects not seen before
 * @param largestSpeedMetresPerSecond    no object is faster; sizes aprons
 */
public record MotionSettings(
        double accelerationNoise, double speedSigmaMetresPerSecond, double largestSpeedMetresPerSecond) {}
