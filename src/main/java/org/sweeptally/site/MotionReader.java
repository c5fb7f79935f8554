package org.sweeptally.site;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;
import org.sweeptally.model.MotionMode;
import org.sweeptally.model.MotionProfile;
import org.sweeptally.model.StandingStill;

/** Reads how objects move: in one way, or in profiles, each with its ways of moving. */
final class MotionReader {

    static final Allowed LIFETIME = Allowed.moreThanZero(1e9);

    /** Of motionless things a speed of 0 is no fault, but a spread of 0 could never be corrected. */
    private static final Allowed SPEED = Allowed.from(0.001, 10_000);

    private static final Allowed NO_SPEED = new Allowed("0 for what never moves", x -> x == 0);
    private static final Allowed NOISE = Allowed.from(1e-9, 1_000_000);

    /** How many speedSigmas the largest speed is, where it is not given. */
    private static final double LARGEST_SPEED_SIGMAS = 4;

    private static final String SPEED_SIGMA_KEY = "speedSigmaMetresPerSecond";
    private static final String LARGEST_SPEED_KEY = "largestSpeedMetresPerSecond";
    private static final String NOISE_KEY = "accelerationNoise";

    private final double lifetimeSeconds;
    private final Faults faults;

    private MotionReader(double lifetimeSeconds, Faults faults) {
        this.lifetimeSeconds = lifetimeSeconds;
        this.faults = faults;
    }

    /** @param lifetimeSeconds of profiles that give none of their own */
    static MotionSettings read(Fields fields, double lifetimeSeconds, Faults faults) {
        MotionReader reader = new MotionReader(lifetimeSeconds, faults);
        return fields.has("profiles") ? reader.profiles(fields) : reader.oneWay(fields);
    }

    private MotionSettings oneWay(Fields fields) {
        double noise = fields.number(NOISE_KEY, NOISE);
        double sigma = fields.number(SPEED_SIGMA_KEY, SPEED);
        double largest = fields.number(LARGEST_SPEED_KEY, SPEED, LARGEST_SPEED_SIGMAS * sigma);
        fields.optional("profiles");
        fields.end();
        return MotionSettings.oneWay(noise, sigma, largest, lifetimeSeconds);
    }

    private MotionSettings profiles(Fields fields) {
        for (String key : List.of(NOISE_KEY, SPEED_SIGMA_KEY, LARGEST_SPEED_KEY)) {
            if (fields.optional(key).isPresent()) {
                faults.add(fields.at(key), "", "must be absent where profiles are given, which say it of each kind");
            }
        }
        Node node = fields.optional("profiles").orElseThrow();
        fields.end();
        if (!(node instanceof Node.Mapping mapping) || mapping.entries().isEmpty()) {
            faults.add(node.at(), node.shown(), "must be a mapping of kinds of objects to how they move");
            return oneOfNoMeaning();
        }
        Map<String, Fields> byName = new TreeMap<>();
        mapping.entries().forEach((name, settings) -> {
            Names.check(name, settings.at(), faults);
            byName.put(name, Fields.of(settings, "a kind of objects: modes, speedSigmaMetresPerSecond and others", faults));
        });
        List<Double> shares = Shares.read(node.at(), List.copyOf(byName.values()), faults);
        List<MotionProfile> profiles = new ArrayList<>();
        byName.forEach((name, profile) -> profiles.add(profile(name, profile, shares.get(profiles.size()))));
        return new MotionSettings(profiles);
    }

    private MotionProfile profile(String name, Fields fields, double share) {
        double lifetime = fields.number("lifetimeSeconds", LIFETIME, lifetimeSeconds);
        List<MotionMode> modes = fields.required("modes", "a mapping of still, straight or turning")
                .map(node -> ModeReader.read(Fields.of(node, "still, straight or turning", faults), faults))
                .orElse(List.of());
        boolean faulty = modes.isEmpty();
        boolean moves = faulty || modes.stream().anyMatch(mode -> !(mode.motion() instanceof StandingStill));
        Allowed speed = moves ? SPEED : NO_SPEED;
        double sigma = moves ? fields.number(SPEED_SIGMA_KEY, speed) : fields.number(SPEED_SIGMA_KEY, speed, 0);
        double largest = fields.number(LARGEST_SPEED_KEY, speed, LARGEST_SPEED_SIGMAS * sigma);
        fields.end();
        return faulty
                ? oneOfNoMeaning().profiles().get(0)
                : new MotionProfile(name, share, lifetime, sigma, largest, modes);
    }

    /** Stands in for what is faulty, so that the rest may be read. */
    private static MotionSettings oneOfNoMeaning() {
        return MotionSettings.oneWay(Double.NaN, Double.NaN, Double.NaN, Double.NaN);
    }
}
