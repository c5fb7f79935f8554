package org.sweeptally.demo;

import java.util.ArrayList;
import java.util.List;

/** Somebody who sails the estuary again and again, alone or in company, each time by a plan that chance makes. */
abstract class Itinerary {

    private final Chance chance;

    Itinerary(Chance chance) {
        this.chance = chance;
    }

    /**
     * The next voyages, of all vessels that sail together.
     *
     * @param freeSeconds when those before have ended; 0 for the first
     */
    final List<Voyage> next(double freeSeconds) {
        return freeSeconds == 0 ? first(chance) : from(freeSeconds + chance.between(10, 60), chance);
    }

    /** What is under way when the world begins. */
    abstract List<Voyage> first(Chance chance);

    abstract List<Voyage> from(double beginSeconds, Chance chance);

    /** A ferry between two piers, back and forth; moored, it cannot be told from its pier. */
    static final class Ferry extends Itinerary {

        private final double[][] piers;
        private final double speed;
        private int at;

        Ferry(Chance chance, double[] pier, double[] otherPier, double speedMetresPerSecond) {
            super(chance);
            this.piers = new double[][] {pier, otherPier};
            this.speed = speedMetresPerSecond;
        }

        @Override
        List<Voyage> first(Chance chance) {
            return from(0, chance);
        }

        @Override
        List<Voyage> from(double beginSeconds, Chance chance) {
            double[] here = piers[at];
            at = 1 - at;
            double east = piers[at][0] - here[0];
            double north = piers[at][1] - here[1];
            double seconds = Math.sqrt(east * east + north * north) / speed;
            Leg.Pose start = new Leg.Pose(here[0], here[1], StrictMath.atan2(east, north));
            return List.of(new Voyage(beginSeconds, start, List.of(new Leg(speed, 0, seconds))));
        }
    }

    /** Ships that come from beyond one end of the estuary and leave beyond the other. */
    static final class Passage extends Itinerary {

        private static final double END_EAST = 4600;

        private final boolean isEastbound;

        Passage(Chance chance, boolean isEastbound) {
            super(chance);
            this.isEastbound = isEastbound;
        }

        @Override
        List<Voyage> first(Chance chance) {
            return List.of(along(0, chance.between(-0.9 * END_EAST, 0.5 * END_EAST), chance));
        }

        @Override
        List<Voyage> from(double beginSeconds, Chance chance) {
            return List.of(along(beginSeconds, -END_EAST, chance));
        }

        /** @param along metres past the middle of the way */
        private Voyage along(double beginSeconds, double along, Chance chance) {
            double speed = chance.between(7, 10);
            double side = isEastbound ? 1 : -1;
            Leg.Pose start = new Leg.Pose(side * along, chance.between(-300, 300) - side * 500,
                    side * StrictMath.PI / 2);
            return new Voyage(beginSeconds, start, List.of(new Leg(speed, 0, (END_EAST - along) / speed)));
        }
    }

    /** Small craft that cast off somewhere, turn as they like, and are taken out of the water again. */
    static final class SmallCraft extends Itinerary {

        SmallCraft(Chance chance) {
            super(chance);
        }

        @Override
        List<Voyage> first(Chance chance) {
            return from(chance.happens(0.6) ? 0 : chance.between(5, 150), chance);
        }

        @Override
        List<Voyage> from(double beginSeconds, Chance chance) {
            double speed = chance.between(2, 6);
            List<Leg> legs = new ArrayList<>();
            for (int left = 5 + chance.below(6); left > 0; left--) {
                double turn = chance.happens(0.5) ? chance.between(-0.02, 0.02) : 0;
                legs.add(new Leg(speed, turn, chance.between(20, 50)));
            }
            Leg.Pose start = new Leg.Pose(chance.between(-3700, 3700), chance.between(-1800, 1800),
                    chance.between(0, 2 * StrictMath.PI));
            return List.of(new Voyage(beginSeconds, start, legs));
        }
    }

    /** Boats that sail close together, nearer than three standard deviations of a radar, through the narrows. */
    static final class Fleet extends Itinerary {

        private static final int BOATS = 5;
        private static final double ABREAST_METRES = 42;
        private static final double ASTERN_METRES = 18;

        Fleet(Chance chance) {
            super(chance);
        }

        @Override
        List<Voyage> first(Chance chance) {
            return from(0, chance);
        }

        @Override
        List<Voyage> from(double beginSeconds, Chance chance) {
            double speed = chance.between(3, 4.5);
            double turn = chance.between(0.004, 0.008);
            List<Leg> legs = List.of(
                    new Leg(speed, 0, 120),
                    new Leg(speed, turn, 60),
                    new Leg(speed, -turn, 60),
                    new Leg(speed, 0, 400));
            Leg.Pose start = new Leg.Pose(-800, chance.between(-300, 100), StrictMath.PI / 2);
            Voyage leader = new Voyage(beginSeconds, start, legs);
            List<Voyage> boats = new ArrayList<>();
            for (int i = 0; i < BOATS; i++) {
                boats.add(leader.beside(-ASTERN_METRES * (i % 2), ABREAST_METRES * i));
            }
            return boats;
        }
    }
}
