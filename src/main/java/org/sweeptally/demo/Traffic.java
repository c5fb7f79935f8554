package org.sweeptally.demo;

import java.util.ArrayList;
import java.util.List;
import java.util.SplittableRandom;
import org.sweeptally.geo.PlanePoint;

/**
 * Everything that sails in the invented estuary: three ferries, three ships passing through, sixteen small craft, and a
 * fleet of five. Planned as far ahead as anyone asks; the same seed gives the same traffic, however it is asked.
 */
final class Traffic {

    private static final int SMALL_CRAFT = 16;

    private final List<Slot> slots = new ArrayList<>();

    Traffic(SplittableRandom random) {
        add(new Itinerary.Ferry(chance(random), new double[] {-1200, -1500}, new double[] {1300, 1450}, 9));
        add(new Itinerary.Ferry(chance(random), new double[] {1400, 1450}, new double[] {-1100, -1500}, 8.5));
        add(new Itinerary.Ferry(chance(random), new double[] {2600, -1600}, new double[] {2900, 1600}, 8));
        add(new Itinerary.Passage(chance(random), true));
        add(new Itinerary.Passage(chance(random), false));
        add(new Itinerary.Passage(chance(random), true));
        add(new Itinerary.Fleet(chance(random)));
        for (int n = 0; n < SMALL_CRAFT; n++) {
            add(new Itinerary.SmallCraft(chance(random)));
        }
    }

    private static Chance chance(SplittableRandom random) {
        return new Chance(random.split());
    }

    private void add(Itinerary itinerary) {
        slots.add(new Slot(itinerary));
    }

    /** Where vessels are at a time, seconds since the world began, those of one itinerary side by side. */
    List<PlanePoint> at(double seconds) {
        List<PlanePoint> there = new ArrayList<>();
        for (Slot slot : slots) {
            slot.planUntil(seconds);
            slot.voyages.forEach(voyage -> voyage.at(seconds).ifPresent(there::add));
        }
        return there;
    }

    /** Nobody will ask for an earlier time any more. */
    void forgetBefore(double seconds) {
        slots.forEach(slot -> slot.voyages.removeIf(voyage -> voyage.endSeconds() < seconds));
    }

    /** An itinerary, and its voyages so far. */
    private static final class Slot {

        private final Itinerary itinerary;
        private final List<Voyage> voyages = new ArrayList<>();
        private double freeSeconds;

        Slot(Itinerary itinerary) {
            this.itinerary = itinerary;
        }

        void planUntil(double seconds) {
            while (freeSeconds <= seconds) {
                List<Voyage> planned = itinerary.next(freeSeconds);
                voyages.addAll(planned);
                freeSeconds = planned.stream().mapToDouble(Voyage::endSeconds).max().orElseThrow();
            }
        }
    }
}
