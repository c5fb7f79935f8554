package org.sweeptally.bench;

import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import org.sweeptally.event.Detection;
import org.sweeptally.event.GeodeticFix;
import org.sweeptally.event.Part;

/**
 * Scans of one or several sensors by turns over the invented estuary: anchored and slowly sailing objects that are
 * always reported, with noise, and for every ten detections one false one.
 */
final class BenchScans {

    private static final double METRES_PER_DEGREE = 111_195;
    private static final double NOISE_DEGREES = 15 / METRES_PER_DEGREE;
    private static final double DRIFT_DEGREES_PER_SECOND = 0.5 / METRES_PER_DEGREE;

    private final Random random;
    private final double[] latitudes;
    private final double[] longitudes;
    private final int clutter;
    private final List<String> sensors;
    private int turn;

    /**
     * @param detections in each scan
     * @param sensors    names, in the order of their turns
     */
    BenchScans(int detections, List<String> sensors, long seed) {
        this.sensors = sensors;
        random = new Random(seed);
        clutter = detections / 10;
        latitudes = random.doubles(detections - clutter, 43.988, 44.012).toArray();
        longitudes = random.doubles(detections - clutter, -33.520, -33.480).toArray();
    }

    /** The next scan in parts of so many detections, the last of which closes it. */
    List<Part> next(long scanTimeMicros, double seconds, int perPart) {
        Part whole = next(scanTimeMicros, seconds);
        List<Part> parts = new ArrayList<>();
        for (int from = 0; from < whole.getDetections().size(); from += perPart) {
            int to = Math.min(from + perPart, whole.getDetections().size());
            List<Detection> some = new ArrayList<>();
            for (Detection detection : whole.getDetections().subList(from, to)) {
                some.add(Detection.newBuilder()
                        .setIndex(some.size())
                        .setMeasurement(detection.getMeasurement())
                        .build());
            }
            parts.add(Part.newBuilder()
                    .setSensor(whole.getSensor())
                    .setScanTimeMicros(scanTimeMicros)
                    .setPart(parts.size())
                    .setClosesScan(to == whole.getDetections().size())
                    .setDetections(some)
                    .build());
        }
        return parts;
    }

    /** The next scan in one part, so many seconds after the one before. */
    Part next(long scanTimeMicros, double seconds) {
        List<Detection> detections = new ArrayList<>();
        for (int i = 0; i < latitudes.length; i++) {
            latitudes[i] += (i % 3 - 1) * DRIFT_DEGREES_PER_SECOND * seconds;
            if (latitudes[i] < 43.986 || latitudes[i] > 44.014) {
                latitudes[i] = 44.0;
            }
            add(detections, latitudes[i] + NOISE_DEGREES * random.nextGaussian(),
                    longitudes[i] + NOISE_DEGREES * random.nextGaussian() / 0.72);
        }
        for (int i = 0; i < clutter; i++) {
            add(detections, 43.985 + 0.03 * random.nextDouble(), -33.523 + 0.046 * random.nextDouble());
        }
        return Part.newBuilder()
                .setSensor(sensors.get(turn++ % sensors.size()))
                .setScanTimeMicros(scanTimeMicros)
                .setClosesScan(true)
                .setDetections(detections)
                .build();
    }

    private static void add(List<Detection> detections, double latitude, double longitude) {
        detections.add(Detection.newBuilder()
                .setIndex(detections.size())
                .setMeasurement(new GeodeticFix(latitude, longitude))
                .build());
    }
}
