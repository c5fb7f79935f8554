package org.sweeptally.site;

import java.util.ArrayList;
import java.util.List;
import org.sweeptally.model.CoordinatedTurn;
import org.sweeptally.model.MotionMode;
import org.sweeptally.model.MotionModel;
import org.sweeptally.model.NearlyConstantVelocity;
import org.sweeptally.model.StandingStill;

/** Reads the ways of moving of one kind of objects. */
final class ModeReader {

    static final String STILL = "still";
    static final String STRAIGHT = "straight";
    static final String TURNING = "turning";
    static final String LEFT = "turning-left";
    static final String RIGHT = "turning-right";

    /** How long an object keeps to a way of moving, on average, where the site does not say. */
    static final double DEFAULT_STILL_SECONDS = 600;

    static final double DEFAULT_STRAIGHT_SECONDS = 60;
    static final double DEFAULT_TURNING_SECONDS = 10;

    /** What moves less than 0.1 m in a second, and 6 m in an hour, swings at its mooring. */
    static final double DEFAULT_POSITION_NOISE = 0.01;

    /** How fast, along each axis, what stands still may be when it begins to move, metres a second. */
    static final double STILL_SPEED_SIGMA = 0.1;

    private static final Allowed DWELL = Allowed.moreThanZero(1e9);
    private static final Allowed NOISE = Allowed.from(1e-9, 1_000_000);
    private static final Allowed RATE = Allowed.moreThanZero(90);

    private final Faults faults;
    private final List<Fields> given = new ArrayList<>();
    private final List<String> names = new ArrayList<>();

    private ModeReader(Faults faults) {
        this.faults = faults;
    }

    /** Still, straight, turning left, turning right: those that there are, in this order; none at all is a fault. */
    static List<MotionMode> read(Fields fields, Faults faults) {
        return new ModeReader(faults).modes(fields);
    }

    private List<MotionMode> modes(Fields fields) {
        take(fields, STILL, "share, dwellSeconds and positionNoise");
        take(fields, STRAIGHT, "share, dwellSeconds and accelerationNoise");
        take(fields, TURNING, "share, dwellSeconds, accelerationNoise and degreesPerSecond");
        fields.end();
        if (given.isEmpty()) {
            faults.add(fields.at(), "", "must have at least one of still, straight and turning");
            return List.of();
        }
        List<Double> shares = Shares.read(fields.at(), given, faults);
        boolean changes = given.size() > 1 || given.get(0).has("degreesPerSecond");
        List<MotionMode> modes = new ArrayList<>();
        for (int i = 0; i < given.size(); i++) {
            add(modes, names.get(i), given.get(i), shares.get(i), changes);
        }
        return modes;
    }

    private void take(Fields fields, String name, String what) {
        fields.optional(name).ifPresent(node -> {
            names.add(name);
            given.add(Fields.of(node, what, faults));
        });
    }

    private void add(List<MotionMode> modes, String name, Fields fields, double share, boolean changes) {
        double dwell = dwell(name, fields, changes);
        if (name.equals(STILL)) {
            double noise = fields.number("positionNoise", NOISE, DEFAULT_POSITION_NOISE);
            modes.add(new MotionMode(name, new StandingStill(noise, STILL_SPEED_SIGMA), share, dwell));
        } else if (name.equals(TURNING) && fields.has("degreesPerSecond")) {
            double noise = fields.number("accelerationNoise", NOISE);
            double rate = fields.number("degreesPerSecond", RATE);
            modes.add(new MotionMode(LEFT, new CoordinatedTurn(rate, noise), share / 2, dwell));
            modes.add(new MotionMode(RIGHT, new CoordinatedTurn(-rate, noise), share / 2, dwell));
        } else {
            fields.optional(name.equals(TURNING) ? "degreesPerSecond" : "accelerationNoise");
            MotionModel motion = new NearlyConstantVelocity(fields.number("accelerationNoise", NOISE));
            modes.add(new MotionMode(name, motion, share, dwell));
        }
        fields.end();
    }

    private double dwell(String name, Fields fields, boolean changes) {
        if (!changes) {
            if (fields.has("dwellSeconds")) {
                faults.add(fields.at("dwellSeconds"), "", "must be absent for the only way of moving, which never changes");
            }
            fields.optional("dwellSeconds");
            return Double.POSITIVE_INFINITY;
        }
        double usual = name.equals(STILL) ? DEFAULT_STILL_SECONDS
                : name.equals(STRAIGHT) ? DEFAULT_STRAIGHT_SECONDS : DEFAULT_TURNING_SECONDS;
        return fields.number("dwellSeconds", DWELL, usual);
    }
}
