package org.sweeptally.demo;

import java.util.ArrayList;
import java.util.List;
import org.sweeptally.event.Detection;
import org.sweeptally.event.GeodeticFix;
import org.sweeptally.event.Part;

/** What goes wrong on any real bus, now and then: a broken number, and a part that comes after its scan was closed. */
final class Mishaps {

    private static final String BREAKS = "north-shore";
    private static final int BREAKS_EVERY = 50;
    private static final String DELAYS = "south-shore";
    private static final int DELAYS_EVERY = 40;

    /**
     * Lets a part meet its mishap, if it is its turn.
     *
     * @param scan           its number, from 1
     * @param intervalMicros time to the sensor's next scan
     * @return by how much it is delayed, microseconds
     */
    long happenTo(Part part, long scan, long intervalMicros) {
        boolean isFirst = part.getPart() == 0;
        if (isFirst && part.getSensor().equals(BREAKS) && scan % BREAKS_EVERY == 0) {
            breakNumber(part);
        }
        boolean isDelayed = isFirst && part.getSensor().equals(DELAYS) && scan % DELAYS_EVERY == 0
                && !part.getClosesScan();
        return isDelayed ? intervalMicros + intervalMicros / 4 : 0;
    }

    private static void breakNumber(Part part) {
        List<Detection> detections = new ArrayList<>(part.getDetections());
        detections.add(Detection.newBuilder()
                .setIndex(detections.size())
                .setId("broken")
                .setMeasurement(new GeodeticFix(Double.NaN, -33.4751))
                .build());
        part.setDetections(detections);
    }
}
