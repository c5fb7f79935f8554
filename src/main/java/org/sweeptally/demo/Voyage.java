package org.sweeptally.demo;

import java.util.List;
import java.util.Optional;
import org.sweeptally.geo.PlanePoint;

/**
 * One passage of one vessel: it appears, sails its legs, and is gone.
 *
 * @param beginSeconds since the world began
 * @param start        where it appears, and how it heads
 */
record Voyage(double beginSeconds, Leg.Pose start, List<Leg> legs) {

    Voyage {
        legs = List.copyOf(legs);
    }

    double endSeconds() {
        return beginSeconds + legs.stream().mapToDouble(Leg::seconds).sum();
    }

    /** Where the vessel is, empty while it is not there. */
    Optional<PlanePoint> at(double seconds) {
        double into = seconds - beginSeconds;
        if (into < 0) {
            return Optional.empty();
        }
        Leg.Pose pose = start;
        for (Leg leg : legs) {
            if (into <= leg.seconds()) {
                Leg.Pose there = leg.after(into, pose);
                return Optional.of(new PlanePoint(there.east(), there.north()));
            }
            pose = leg.after(leg.seconds(), pose);
            into -= leg.seconds();
        }
        return Optional.empty();
    }

    /** The same voyage at a place beside it: vessels in company turn as one. */
    Voyage beside(double east, double north) {
        return new Voyage(
                beginSeconds,
                new Leg.Pose(start.east() + east, start.north() + north, start.headingRadians()),
                legs);
    }
}
