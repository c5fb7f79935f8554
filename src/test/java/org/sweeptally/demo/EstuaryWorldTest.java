package org.sweeptally.demo;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.Set;
import java.util.TreeMap;
import java.util.TreeSet;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import org.sweeptally.event.Part;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.region.PartRouter;
import org.sweeptally.region.intake.Intake;
import org.sweeptally.region.intake.PartDecoder;
import org.sweeptally.region.intake.SourcePosition;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.RegionSettings;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

class EstuaryWorldTest {

    private static final long BEGIN = 1_935_374_400_000_000L;

    private final Site site = EstuaryWorld.site();

    @Test
    void theSameSeedGivesTheSameWorldAndAnotherSeedAnother() {
        assertThat(parts(world(5, 60))).isEqualTo(parts(world(5, 60))).isNotEqualTo(parts(world(6, 60)));
    }

    @Test
    void askingForTheTruthChangesNothing() {
        EstuaryWorld asked = world(5, 60);
        asked.truth(BEGIN + 50_000_000L);
        List<Part> parts = parts(asked);
        asked.forgetBefore(BEGIN + 10_000_000L);
        assertThat(parts).isEqualTo(parts(world(5, 60)));
        assertThat(asked.truth(BEGIN + 30_000_000L)).isEqualTo(world(5, 60).truth(BEGIN + 30_000_000L)).isNotEmpty();
    }

    @ParameterizedTest
    @ValueSource(longs = {1, 2, 3})
    void allThatTheIntakeRejectsIsTheBrokenNumbers(long seed) {
        int broken = 0;
        for (Part part : parts(world(seed, Demo.USUAL_SECONDS))) {
            Intake intake = intake(part);
            if (intake.reject().isPresent()) {
                broken++;
                assertThat(intake.reject().get().getSentence()).contains("latitude is NaN");
            }
        }
        assertThat(broken).isEqualTo(3);
    }

    private Intake intake(Part part) {
        return new PartDecoder(site).decode(Wire.encode(part), Optional.of(new SourcePosition(0, 0)));
    }

    @Test
    void theLastPartOfEverySensorPromisesThatNothingMoreComes() {
        TreeMap<String, Part> last = new TreeMap<>();
        for (Part part : parts(world(1, 60))) {
            Part before = last.put(part.getSensor(), part);
            assertThat(before == null || before.getPromise() == null).isTrue();
        }
        assertThat(last).hasSize(3);
        assertThat(last.values()).allMatch(part -> part.getClosesScan()
                && part.getPromise() != null
                && part.getPromise().getNothingBeforeMicros() == null);
    }

    @Test
    void itsLastScanIsTheLastOneThatEveryRegionHears() {
        EstuaryWorld world = world(1, 60);
        EstuaryWorld.Scan last = parts(world).stream()
                .map(part -> new EstuaryWorld.Scan(part.getScanTimeMicros(), part.getSensor()))
                .max(EstuaryWorld.Scan::compareTo)
                .orElseThrow();
        assertThat(world.lastScan()).isEqualTo(last);
        PartRouter router = new PartRouter(site);
        for (SensorSettings sensor : site.sensors()) {
            assertThat(router.regionsSeenBy(sensor.name()))
                    .containsExactlyElementsOf(site.regions().stream().map(RegionSettings::name).toList());
        }
    }

    /** Each of the things that the demo is to show is there, whatever the seed. */
    @ParameterizedTest
    @ValueSource(longs = {1, 2, 3})
    void objectsEnterAndLeaveAndPassFromRegionToRegionAndSailClose(long seed) {
        EstuaryWorld world = world(seed, Demo.USUAL_SECONDS);
        Set<Integer> numbers = new TreeSet<>();
        double nearest = Double.POSITIVE_INFINITY;
        for (int second = 0; second < Demo.USUAL_SECONDS; second += 10) {
            List<LatLon> there = world.truth(BEGIN + second * 1_000_000L);
            for (RegionSettings region : site.regions()) {
                assertThat(there).as("seed %d, second %d", seed, second).anyMatch(region.core()::contains);
            }
            numbers.add(there.size());
            nearest = Math.min(nearest, nearestPair(there));
        }
        assertThat(numbers).as("seed %d", seed).hasSizeGreaterThan(5);
        assertThat(nearest).as("seed %d", seed).isLessThan(50);
    }

    private static double nearestPair(List<LatLon> places) {
        LocalPlane plane = new LocalPlane(new LatLon(44.0, -33.475));
        List<PlanePoint> points = places.stream().map(plane::toPlane).toList();
        double nearest = Double.POSITIVE_INFINITY;
        for (int i = 0; i < points.size(); i++) {
            for (int j = 0; j < i; j++) {
                double east = points.get(i).eastMetres() - points.get(j).eastMetres();
                double north = points.get(i).northMetres() - points.get(j).northMetres();
                nearest = Math.min(nearest, Math.sqrt(east * east + north * north));
            }
        }
        return nearest;
    }

    private EstuaryWorld world(long seed, double seconds) {
        return new EstuaryWorld(site, seed, BEGIN, seconds);
    }

    private static List<Part> parts(EstuaryWorld world) {
        List<Part> parts = new ArrayList<>();
        for (Optional<EstuaryWorld.Sending> next = world.next(); next.isPresent(); next = world.next()) {
            parts.add(next.get().part());
        }
        return parts;
    }
}
