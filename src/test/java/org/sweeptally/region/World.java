package org.sweeptally.region;

import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import org.sweeptally.event.LogEntry;
import org.sweeptally.site.SensorSettings;

/**
 * An invented world: a few objects in straight lines, seen by the sensors of a site, as each sensor's parts in order.
 */
final class World {

    private static final int OBJECTS = 5;
    private static final double SECONDS = 30;

    private final Random random;
    private final double[][] objects = new double[OBJECTS][4];

    World(long seed) {
        random = new Random(seed);
        for (double[] object : objects) {
            object[0] = -1800 + 3600 * random.nextDouble();
            object[1] = -1800 + 3600 * random.nextDouble();
            object[2] = 8 * random.nextGaussian();
            object[3] = 8 * random.nextGaussian();
        }
    }

    /** One scan's parts, the closing one last. */
    record SentScan(double seconds, List<LogEntry> parts) {}

    /** All scans of a sensor that stands still or moves, in some number of parts each. */
    List<SentScan> scansOf(SensorSettings sensor, int mostParts) {
        List<SentScan> scans = new ArrayList<>();
        double start = 0.1 + random.nextDouble();
        int number = 1;
        for (double t = start; t < SECONDS; t += sensor.intervalSeconds() * (1 + 0.1 * random.nextDouble()), number++) {
            scans.add(new SentScan(t, scan(sensor, t, number, 1 + random.nextInt(mostParts))));
        }
        return scans;
    }

    private List<LogEntry> scan(SensorSettings sensor, double seconds, int number, int parts) {
        List<Entries.PartMaker> makers = new ArrayList<>();
        for (int i = 0; i < parts; i++) {
            Entries.PartMaker maker = Entries.part(sensor.name(), seconds).part(i).scan(number);
            makers.add(i < parts - 1 ? maker.open() : maker);
            if (sensor.position().isEmpty()) {
                maker.from(TestSites.at(10 * seconds - 300, 200));
            }
        }
        for (double[] object : objects) {
            if (random.nextDouble() < 0.9) {
                double east = object[0] + seconds * object[2] + 12 * random.nextGaussian();
                double north = object[1] + seconds * object[3] + 12 * random.nextGaussian();
                see(sensor, makers.get(random.nextInt(parts)), seconds, east, north);
            }
        }
        for (int i = random.nextInt(3); i > 0; i--) {
            see(sensor, makers.get(random.nextInt(parts)), seconds, 4000 * random.nextDouble() - 2000,
                    4000 * random.nextDouble() - 2000);
        }
        return makers.stream().map(Entries.PartMaker::entry).toList();
    }

    private void see(SensorSettings sensor, Entries.PartMaker part, double seconds, double east, double north) {
        if (sensor.position().isEmpty()) {
            part.seesOffset(east - (10 * seconds - 300), north - 200);
        } else {
            part.sees(east, north);
        }
    }
}
