package org.sweeptally.world;

import java.util.List;

/**
 * One scan of the simulated world.
 *
 * @param seconds    its time
 * @param detections in random order
 * @param objects    all that are alive, in the square and around it
 */
public record SimulatedScan(double seconds, List<Detection> detections, List<TrueObject> objects) {

    /** Number of the object of a false detection. */
    public static final int CLUTTER = -1;

    /**
     * A detection.
     *
     * @param east   metres
     * @param north  metres
     * @param object number of the object that caused it, or {@link #CLUTTER}
     */
    public record Detection(double east, double north, int object) {}

    public SimulatedScan {
        detections = List.copyOf(detections);
        objects = List.copyOf(objects);
    }

    public long micros() {
        return Math.round(seconds * 1e6);
    }

    /** The objects in the square: what the picture shall show. */
    public List<TrueObject> truth() {
        return objects.stream().filter(TrueObject::inside).toList();
    }
}
