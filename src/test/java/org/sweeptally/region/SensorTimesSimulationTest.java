package org.sweeptally.region;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Locale;
import java.util.Optional;
import java.util.OptionalLong;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.Count;
import org.sweeptally.event.Coverage;
import org.sweeptally.event.Detection;
import org.sweeptally.event.GeodeticFix;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Track;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.model.DetectionProfile;
import org.sweeptally.site.MotionSettings;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/**
 * What it costs not to know when a sensor saw what: eight objects that make 15 m/s, seen by a rotating sensor, by a
 * camera beside it, by a sensor whose clock is off. Errors are root mean squares over the tracks, at the times that
 * they say. Seeded; the figures are printed.
 */
class SensorTimesSimulationTest {

    private static final double SPEED = 15;
    private static final double SWEEP = 2.5;
    private static final double SECONDS = 70;
    private static final double WARM_UP = 20;
    private static final int SECTORS = 25;
    private static final LocalPlane PLANE =
            new LocalPlane(TestSites.rectangle(-2000, -2000, 2000, 2000).middle());

    private static final SensorSettings RADAR = sensor("radar", 0, 0, 15);

    private static SensorSettings sensor(String name, double east, double north, double sigma) {
        return new SensorSettings(
                name,
                Optional.of(TestSites.at(east, north)),
                Optional.empty(),
                6000,
                new SensorSettings.PositionNoise(sigma, sigma),
                DetectionProfile.constant(0.95),
                0.5,
                SWEEP,
                0,
                0,
                0,
                10);
    }

    private static Site site(SensorSettings... sensors) {
        Site s = TestSites.site(1, sensors);
        return new Site(s.name(), s.revision(), OptionalLong.empty(), s.sensors(), s.regions(),
                MotionSettings.oneWay(0.05, 10, 40, s.lifetimeSeconds()), s.lifetimeSeconds(), s.unseen(), s.thresholds(), s.bounds(),
                s.rejectOutside());
    }

    /** Eight objects on straight lines, which stay in the region and far apart. */
    private static double[] truth(int object, double seconds) {
        double angle = 0.3 + object * Math.PI / 4;
        double way = SPEED * (seconds - SECONDS / 2);
        double east = 1150 * Math.sin(angle) + way * Math.cos(angle);
        double north = 1150 * Math.cos(angle) - way * Math.sin(angle);
        return new double[] {east, north};
    }

    /** A plot of the radar: when the beam passed over the object, of which turn and sector. */
    private record Plot(double seconds, double east, double north) {}

    /** When the beam, at north at the beginning of each turn, passes over an object: by a few steps of substitution. */
    private static double passing(int object, double begin) {
        double seconds = begin + SWEEP / 2;
        for (int i = 0; i < 20; i++) {
            double[] x = truth(object, seconds);
            double turn = Math.atan2(x[0], x[1]) / (2 * Math.PI);
            seconds = begin + SWEEP * (turn - Math.floor(turn));
        }
        return seconds;
    }

    private static List<Plot> plots(double begin, SplittableRandom random) {
        List<Plot> plots = new ArrayList<>();
        for (int object = 0; object < 8; object++) {
            double seconds = passing(object, begin);
            double[] x = truth(object, seconds);
            Plot plot = new Plot(seconds, x[0] + 15 * gaussian(random), x[1] + 15 * gaussian(random));
            if (random.nextDouble() < 0.95) {
                plots.add(plot);
            }
        }
        plots.sort(Comparator.comparingDouble(Plot::seconds));
        return plots;
    }

    private static Detection detection(int index, double east, double north, Double secondsOrNull) {
        LatLon place = PLANE.toGeodetic(new PlanePoint(east, north));
        return Detection.newBuilder()
                .setIndex(index)
                .setTimeMicros(secondsOrNull == null ? null : (Long) Entries.micros(secondsOrNull))
                .setMeasurement(new GeodeticFix(place.latitude(), place.longitude()))
                .build();
    }

    /** A turn as one scan; its scan time that of a moment within it, its plots with their own times or without. */
    private static LogEntry turn(double scanSeconds, List<Plot> plots, boolean ownTimes) {
        Entries.PartMaker part = Entries.part("radar", scanSeconds);
        for (int i = 0; i < plots.size(); i++) {
            Plot plot = plots.get(i);
            part.sees(detection(i, plot.east(), plot.north(), ownTimes ? (Double) plot.seconds() : null));
        }
        return part.entry();
    }

    /** Root mean square of the distance of tracks from their objects, metres, at the times of a sensor's scans. */
    private static double error(Rig rig, String sensor) {
        double sum = 0;
        int n = 0;
        for (Track track : rig.out.tracks) {
            double seconds = (track.getTimeMicros() - Entries.DAY) / 1e6;
            if (seconds < WARM_UP || seconds > SECONDS || !track.getSensor().equals(sensor)) {
                continue;
            }
            PlanePoint at = PLANE.toPlane(new LatLon(track.getLatitude(), track.getLongitude()));
            double least = Double.POSITIVE_INFINITY;
            for (int object = 0; object < 8; object++) {
                double[] x = truth(object, seconds);
                least = Math.min(least, Math.hypot(x[0] - at.eastMetres(), x[1] - at.northMetres()));
            }
            sum += least * least;
            n++;
        }
        List<Count> counts = rig.out.counts.stream().filter(c -> c.getSensor().equals(sensor)).toList();
        assertThat(n).as("objects are shown").isGreaterThan(4 * counts.size());
        return Math.sqrt(sum / n);
    }

    private interface Feed {
        void feed(Rig rig, double begin, SplittableRandom random);
    }

    private static double meanError(Site site, String sensor, Feed feed) {
        double sum = 0;
        for (long seed = 1; seed <= 5; seed++) {
            Rig rig = Rig.with(site);
            SplittableRandom random = new SplittableRandom(seed);
            for (double begin = 0; begin < SECONDS; begin += SWEEP) {
                feed.feed(rig, begin, random);
            }
            rig.apply(Entries.endOfInput());
            assertThat(rig.out.rejects).isEmpty();
            sum += error(rig, sensor);
        }
        return sum / 5;
    }

    /**
     * Without plots' own times all of a turn is taken to be seen at its beginning, or at its middle: up to 37 m or 19 m
     * off. What is measured is the place at the time that the track says.
     */
    @Test
    void aDetectionsOwnTimeRemovesMostOfARotatingSensorsError() {
        SensorSettings turning = TestSites.withSweep(RADAR, SWEEP);
        double own = meanError(
                site(turning), "radar", (rig, begin, random) -> rig.apply(turn(begin, plots(begin, random), true)));
        double begins = meanError(
                site(turning), "radar", (rig, begin, random) -> rig.apply(turn(begin, plots(begin, random), false)));
        double middles = meanError(site(RADAR), "radar", (rig, begin, random) ->
                rig.apply(turn(begin + SWEEP / 2, plots(begin, random), false)));
        double instant = meanError(site(RADAR), "radar", (rig, begin, random) ->
                rig.apply(turn(begin, instantPlots(begin, random), false)));
        print("own times %.2f m, at the beginning %.2f m, at the middle %.2f m, all seen at once %.2f m",
                own, begins, middles, instant);
        assertThat(own).isLessThan(0.8 * middles);
        assertThat(own).isLessThan(0.5 * begins);
        assertThat(middles).isLessThan(begins);
    }

    /** Of a sensor that sees everything at one moment: what there is to be had. */
    private static List<Plot> instantPlots(double seconds, SplittableRandom random) {
        List<Plot> plots = new ArrayList<>();
        for (int object = 0; object < 8; object++) {
            double[] x = truth(object, seconds);
            Plot plot = new Plot(seconds, x[0] + 15 * gaussian(random), x[1] + 15 * gaussian(random));
            if (random.nextDouble() < 0.95) {
                plots.add(plot);
            }
        }
        return plots;
    }

    /**
     * A sweep takes effect at its end, when ten images a second of its time have: its plots are older than what is
     * known already. In order they would come as 25 sectors of a tenth of a second each.
     */
    @Test
    void aSweepThatOverlapsImagesIsNearlyAsGoodAsPlotsInOrder() {
        SensorSettings camera = sensor("camera", 300, -300, 10);
        SensorSettings turning = TestSites.withSweep(RADAR, SWEEP);
        SensorSettings sector = TestSites.withSweep(RADAR, SWEEP / SECTORS);
        double whole = meanError(site(turning, camera), "camera", (rig, begin, random) -> {
            List<Plot> plots = plots(begin, random);
            for (int image = 0; image < SECTORS; image++) {
                rig.apply(image(begin, image, random));
            }
            rig.apply(turn(begin, plots, true));
        });
        double inOrder = meanError(site(sector, camera), "camera", (rig, begin, random) -> {
            List<Plot> plots = plots(begin, random);
            for (int i = 0; i < SECTORS; i++) {
                rig.apply(image(begin, i, random));
                rig.apply(sector(begin, i, plots));
            }
        });
        print("beside a camera, whole sweeps %.3f m, sectors in order %.3f m", whole, inOrder);
        assertThat(whole).isBetween(0.98 * inOrder, 1.02 * inOrder);
    }

    private static LogEntry image(double begin, int image, SplittableRandom random) {
        double seconds = begin + (image + 0.5) * SWEEP / SECTORS;
        Entries.PartMaker part = Entries.part("camera", seconds);
        int index = 0;
        for (int object = 0; object < 8; object++) {
            double[] x = truth(object, seconds);
            double east = x[0] + 10 * gaussian(random);
            double north = x[1] + 10 * gaussian(random);
            if (random.nextDouble() < 0.95) {
                part.sees(detection(index++, east, north, null));
            }
        }
        return part.entry();
    }

    private static LogEntry sector(double begin, int i, List<Plot> plots) {
        double from = begin + i * SWEEP / SECTORS;
        double to = begin + (i + 1) * SWEEP / SECTORS;
        Entries.PartMaker part = Entries.part("radar", from);
        int index = 0;
        for (Plot plot : plots) {
            if (plot.seconds() >= from && plot.seconds() < to) {
                part.sees(detection(index++, plot.east(), plot.north(), plot.seconds()));
            }
        }
        LogEntry entry = part.entry();
        ScanParts.partOf(entry)
                .setCoverage(new Coverage(null, null, i * 360.0 / SECTORS, (i + 1) * 360.0 / SECTORS, null));
        return entry;
    }

    /** Two sensors that see at instants, in turn; the clock of one is 0.4 s slow, 6 m at this speed. */
    @Test
    void theTimeOffsetOfASlowClockTakesItsErrorOut() {
        SensorSettings slow = sensor("slow", -400, 200, 15);
        double without = meanError(site(RADAR, slow), "radar", this::twoSensors);
        double with = meanError(site(RADAR, slow.withTimeOffset(0.4)), "radar", this::twoSensors);
        double never = meanError(site(RADAR, slow), "radar", (rig, begin, random) -> {
            rig.apply(turn(begin, instantPlots(begin, random), false));
            rig.apply(slow(begin + 1.2, 0, random));
        });
        print("a clock 0.4 s slow %.2f m, with its offset %.2f m, were it right %.2f m", without, with, never);
        assertThat(with).isLessThan(0.97 * without);
        assertThat(with).isBetween(0.97 * never, 1.03 * never);
    }

    private void twoSensors(Rig rig, double begin, SplittableRandom random) {
        rig.apply(turn(begin, instantPlots(begin, random), false));
        rig.apply(slow(begin + 1.2, 0.4, random));
    }

    private static LogEntry slow(double seconds, double behind, SplittableRandom random) {
        Entries.PartMaker part = Entries.part("slow", seconds - behind);
        List<Plot> plots = instantPlots(seconds, random);
        for (int i = 0; i < plots.size(); i++) {
            part.sees(detection(i, plots.get(i).east(), plots.get(i).north(), null));
        }
        return part.entry();
    }

    private static void print(String format, Object... figures) {
        System.out.println("SensorTimesSimulationTest: " + String.format(Locale.ROOT, format, figures));
    }

    /** Box and Muller 1958. */
    private static double gaussian(SplittableRandom random) {
        double radius = Math.sqrt(-2 * Math.log(1 - random.nextDouble()));
        return radius * Math.cos(2 * Math.PI * random.nextDouble());
    }
}
