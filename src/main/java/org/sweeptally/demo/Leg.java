package org.sweeptally.demo;

/**
 * A piece of a voyage at one speed and one rate of turn, metres a second, radians a second to the right, seconds.
 */
record Leg(double speedMetresPerSecond, double turnRadiansPerSecond, double seconds) {

    /** Where a vessel is that began the leg at a place with a heading (clockwise from north), some seconds into it. */
    Pose after(double seconds, Pose start) {
        double heading = start.headingRadians() + turnRadiansPerSecond * seconds;
        if (turnRadiansPerSecond == 0) {
            double way = speedMetresPerSecond * seconds;
            return new Pose(
                    start.east() + way * StrictMath.sin(heading),
                    start.north() + way * StrictMath.cos(heading),
                    heading);
        }
        double radius = speedMetresPerSecond / turnRadiansPerSecond;
        return new Pose(
                start.east() + radius * (StrictMath.cos(start.headingRadians()) - StrictMath.cos(heading)),
                start.north() + radius * (StrictMath.sin(heading) - StrictMath.sin(start.headingRadians())),
                heading);
    }

    /** A place in the estuary's plane, metres, and a heading, radians clockwise from north. */
    record Pose(double east, double north, double headingRadians) {}
}
