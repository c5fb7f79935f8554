package org.sweeptally.world;

import java.util.List;

/**
 * The course of one simulated craft: legs one after the other, on each of which speed and heading change evenly.
 * Between and after legs it goes on as it was.
 */
final class Course {

    /** @param metresPerSecondSquared along its heading; @param degreesPerSecond to the left */
    record Leg(double seconds, double metresPerSecondSquared, double degreesPerSecond) {

        static Leg steady(double seconds) {
            return new Leg(seconds, 0, 0);
        }

        static Leg turn(double seconds, double degreesPerSecond) {
            return new Leg(seconds, 0, degreesPerSecond);
        }

        static Leg accelerate(double seconds, double metresPerSecondSquared) {
            return new Leg(seconds, metresPerSecondSquared, 0);
        }
    }

    private static final double STEP_SECONDS = 0.01;

    private final double east;
    private final double north;
    private final double headingRadians;
    private final double speed;
    private final List<Leg> legs;

    /** @param headingDegrees from east over north */
    Course(double east, double north, double headingDegrees, double speed, Leg... legs) {
        this.east = east;
        this.north = north;
        this.headingRadians = StrictMath.toRadians(headingDegrees);
        this.speed = speed;
        this.legs = List.of(legs);
    }

    /**
     * States [east, north, east velocity, north velocity] at 0, one period, two and so on, by steps of the midpoint
     * rule.
     */
    double[][] states(double periodSeconds, int count) {
        double[][] states = new double[count][];
        double[] now = {east, north, headingRadians, speed};
        double seconds = 0;
        for (int k = 0; k < count; k++) {
            while (seconds < k * periodSeconds - STEP_SECONDS / 2) {
                step(now, legAt(seconds));
                seconds += STEP_SECONDS;
            }
            states[k] = new double[] {
                now[0], now[1], now[3] * StrictMath.cos(now[2]), now[3] * StrictMath.sin(now[2])
            };
        }
        return states;
    }

    private static void step(double[] now, Leg leg) {
        double turn = StrictMath.toRadians(leg.degreesPerSecond()) * STEP_SECONDS;
        double gain = leg.metresPerSecondSquared() * STEP_SECONDS;
        double middleSpeed = now[3] + gain / 2;
        now[0] += STEP_SECONDS * middleSpeed * StrictMath.cos(now[2] + turn / 2);
        now[1] += STEP_SECONDS * middleSpeed * StrictMath.sin(now[2] + turn / 2);
        now[2] += turn;
        now[3] += gain;
    }

    private Leg legAt(double seconds) {
        double end = STEP_SECONDS / 2;
        for (Leg leg : legs) {
            end += leg.seconds();
            if (seconds < end - STEP_SECONDS) {
                return leg;
            }
        }
        return Leg.steady(0);
    }
}
