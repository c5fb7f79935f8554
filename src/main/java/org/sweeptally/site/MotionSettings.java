package org.sweeptally.site;

import java.util.List;
import org.sweeptally.model.MotionMode;
import org.sweeptally.model.MotionProfile;
import org.sweeptally.model.NearlyConstantVelocity;

/**
 * How objects move and how long they stay.
 *
 * @param profiles by name, one at least; their shares sum to 1
 */
public record MotionSettings(List<MotionProfile> profiles) {

    /** The kind of a site that knows only one. */
    static final String ONLY_KIND = "object";

    public MotionSettings {
        profiles = List.copyOf(profiles);
    }

    /**
     * All objects are of one kind and keep to nearly constant velocity.
     *
     * @param accelerationNoise spectral density, square metres a second cubed
     */
    public static MotionSettings oneWay(
            double accelerationNoise,
            double speedSigmaMetresPerSecond,
            double largestSpeedMetresPerSecond,
            double lifetimeSeconds) {
        MotionMode straight = new MotionMode(
                ModeReader.STRAIGHT, new NearlyConstantVelocity(accelerationNoise), 1, Double.POSITIVE_INFINITY);
        return new MotionSettings(List.of(new MotionProfile(
                ONLY_KIND, 1, lifetimeSeconds, speedSigmaMetresPerSecond, largestSpeedMetresPerSecond, List.of(straight))));
    }

    /** What a site would be that has nothing but the first way of moving of a profile, where that is straight. */
    static MotionSettings oneWay(MotionProfile profile, double lifetimeSeconds) {
        double noise = profile.modes().get(0).motion() instanceof NearlyConstantVelocity straight
                ? straight.accelerationNoise()
                : Double.NaN;
        return oneWay(noise, profile.speedSigma(), profile.largestSpeed(), lifetimeSeconds);
    }

    /** No object is faster; sizes aprons. */
    public double largestSpeedMetresPerSecond() {
        return profiles.stream().mapToDouble(MotionProfile::largestSpeed).reduce(0, Math::max);
    }

    /** Standard deviation of the velocity along each axis, of objects of the fastest kind. */
    public double typicalSpeedMetresPerSecond() {
        return profiles.stream().mapToDouble(MotionProfile::speedSigma).reduce(0, Math::max);
    }

    /** Of an object new to the picture. */
    public double meanLifetimeSeconds() {
        double mean = 0;
        for (MotionProfile profile : profiles) {
            mean += profile.share() * profile.lifetimeSeconds();
        }
        return mean;
    }
}
