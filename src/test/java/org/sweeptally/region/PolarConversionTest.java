package org.sweeptally.region;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;
import static org.sweeptally.region.Entries.part;

import java.util.List;
import java.util.OptionalDouble;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.Detection;
import org.sweeptally.event.GeoPoint;
import org.sweeptally.event.GeodeticFix;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Noise;
import org.sweeptally.event.Part;
import org.sweeptally.event.PolarFix;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.model.Measurement;
import org.sweeptally.model.PolarMeasurement;
import org.sweeptally.model.PositionMeasurement;
import org.sweeptally.site.PolarSettings;
import org.sweeptally.site.RegionSettings;
import org.sweeptally.site.SensorSettings;

/** A range and an azimuth from the sensor's true north become what they are in the region's plane. */
class PolarConversionTest {

    private static final RegionArea AREA =
            new RegionArea(TestSites.region(TestSites.REGION, TestSites.rectangle(-2000, -2000, 2000, 2000)));

    private static final PolarSettings RADAR =
            new PolarSettings(20, 0.5, OptionalDouble.of(0.3), OptionalDouble.empty(), 0, 25);

    private static SensorSettings radar(double east, double north) {
        return TestSites.withReach(TestSites.sensor("radar", east, north), 90_000).measuring(RADAR);
    }

    private static SensorSettings ferry() {
        return TestSites.moving("ferry").measuring(RADAR);
    }

    private static Detection polar(double range, double degrees, Double rate) {
        return Detection.newBuilder().setIndex(0).setMeasurement(new PolarFix(range, degrees, rate)).build();
    }

    private static Measurement convert(SensorSettings sensor, LogEntry entry) {
        ScanParts parts = ScanParts.begin(ScanParts.partOf(entry).getScanTimeMicros(), sensor);
        parts.add(entry, 0);
        return new ScanConversion(AREA).convert(parts, sensor).orElseThrow().observations().get(0).measurement();
    }

    private static PolarMeasurement convert(SensorSettings sensor, Detection detection) {
        return (PolarMeasurement) convert(sensor, part(sensor.name(), 1).sees(detection).entry());
    }

    /** An azimuth and a range to a place 78 km from the sensor, where north is turned by 0.4 degrees. */
    @Test
    void rangeAndAzimuthPointWhereThePlaceIs() {
        SensorSettings sensor = radar(60_000, 50_000);
        LatLon place = TestSites.at(1200, -700);
        PlanePoint offset = new LocalPlane(sensor.position().orElseThrow()).toPlane(place);
        double range = Math.hypot(offset.eastMetres(), offset.northMetres());
        double degrees = Math.toDegrees(Math.atan2(offset.eastMetres(), offset.northMetres())) + 360;
        PolarMeasurement z = convert(sensor, polar(range, degrees, null));
        PlanePoint expected = AREA.plane().toPlane(place);
        double east = z.station().east() + z.range() * Math.sin(z.azimuth());
        double north = z.station().north() + z.range() * Math.cos(z.azimuth());
        assertThat(east).isCloseTo(expected.eastMetres(), within(1e-6));
        assertThat(north).isCloseTo(expected.northMetres(), within(1e-6));
        double turned = Math.IEEEremainder(Math.toRadians(degrees) - z.azimuth(), 2 * Math.PI);
        double convergence = AREA.plane().convergenceRadians(sensor.position().orElseThrow());
        assertThat(turned).isCloseTo(convergence, within(3e-4));
        assertThat(Math.abs(convergence)).isGreaterThan(0.006);
        assertThat(z.hasRangeRate()).isFalse();
        assertThat(Math.sqrt(z.noise().varRange())).isCloseTo(20, within(1e-9));
        assertThat(Math.toDegrees(Math.sqrt(z.noise().varAzimuth()))).isCloseTo(0.5, within(1e-9));
        // Its own place lies farther out, by the bias of uncertain angles: 78 km times 0.5 degrees squared over 2.
        double outwards = Math.hypot(z.east() - z.station().east(), z.north() - z.station().north()) - z.range();
        assertThat(outwards).isCloseTo(0.5 * range * Math.pow(Math.toRadians(0.5), 2), within(0.01));
    }

    /** Whoever decides which region hears a detection sees it where that region's filter does. */
    @Test
    void theRouterAndTheRegionSeeItAtTheSamePlace() {
        SplittableRandom random = new SplittableRandom(61);
        for (int trial = 0; trial < 200; trial++) {
            SensorSettings sensor = radar(random.nextDouble(-30_000, 30_000), random.nextDouble(-30_000, 30_000));
            Detection detection = polar(random.nextDouble(0, 40_000), random.nextDouble(0, 360), null);
            Part part = ScanParts.partOf(part("radar", 1).sees(detection).entry());
            LocalPlane sensorPlane = new LocalPlane(sensor.position().orElseThrow());
            PlanePoint routed =
                    AREA.plane().toPlane(MeasurementConversion.placeOf(detection, part, sensorPlane, sensor));
            PolarMeasurement z = convert(sensor, detection);
            assertThat(z.east()).as("seed 61, trial %s", trial).isCloseTo(routed.eastMetres(), within(0.01));
            assertThat(z.north()).as("seed 61, trial %s", trial).isCloseTo(routed.northMetres(), within(0.01));
        }
    }

    @Test
    void aDetectionOnEachSideOfAnEdgeIsHeardByWhoOwnsItAndByWhoseApronItIsIn() {
        RegionSettings west = TestSites.region("west", TestSites.rectangle(-4000, -2000, 0, 2000));
        RegionSettings east = TestSites.region("east", TestSites.rectangle(0, -2000, 4000, 2000));
        PartRouter router = new PartRouter(TestSites.site(1, List.of(west, east), List.of(radar(-1000, 0))));
        Detection near = polar(200, 90, 1.0);
        Detection inApron = polar(1200, 90, null);
        inApron.setIndex(1);
        Detection far = polar(3000, 90, null);
        far.setIndex(2);
        Detection beyond = polar(90_100, 90, null);
        beyond.setIndex(3);
        PartRouter.Routed routed =
                router.route(part("radar", 1).sees(near).sees(inApron).sees(far).sees(beyond).entry());
        assertThat(routed.byRegion().get("west").getPart().getDetections()).extracting(Detection::getIndex)
                .containsExactly(0, 1);
        assertThat(routed.byRegion().get("east").getPart().getDetections()).extracting(Detection::getIndex)
                .containsExactly(1, 2);
        assertThat(routed.beyondReach()).isEqualTo(1);
    }

    @Test
    void aSlantRangeIsTakenToTheGroundByTheHeightsThatAreKnown() {
        PolarSettings high = new PolarSettings(20, 0.5, OptionalDouble.empty(), OptionalDouble.of(310), 10, 25);
        SensorSettings sensor = TestSites.sensor("radar", 0, 0).measuring(high);
        assertThat(ground(convert(sensor, polar(500, 0, null)))).isCloseTo(400, within(0.1));
        Detection flying = polar(500, 0, null);
        flying.setHeightMetres(310.0);
        assertThat(ground(convert(sensor, flying))).as("its own height stands before the usual one")
                .isCloseTo(500, within(0.1));
        SensorSettings unknown = TestSites.sensor("radar", 0, 0).measuring(RADAR);
        assertThat(ground(convert(unknown, flying))).as("nobody says how high the sensor is")
                .isCloseTo(500, within(0.1));
        LogEntry entry = part("ferry", 1).from(TestSites.MIDDLE).sees(polar(500, 0, 0.0)).entry();
        LatLon middle = TestSites.MIDDLE;
        ScanParts.partOf(entry).setSensorPosition(new GeoPoint(middle.latitude(), middle.longitude(), 300.0));
        assertThat(ground((PolarMeasurement) convert(ferry(), entry))).as("a moving sensor says how high it is")
                .isCloseTo(400, within(0.1));
    }

    private static double ground(PolarMeasurement z) {
        return Math.hypot(z.east() - z.station().east(), z.north() - z.station().north());
    }

    /** Its velocity is given to the true east and north where it is, and turned into the region's plane. */
    @Test
    void aMovingSensorsVelocityIsTurnedIntoThePlane() {
        LatLon where = TestSites.at(60_000, 0);
        LogEntry entry = part("ferry", 1).from(where).sees(polar(2000, 270, -8.0)).entry();
        ScanParts.partOf(entry).setSensorEastMetresPerSecond(0.0);
        ScanParts.partOf(entry).setSensorNorthMetresPerSecond(8.0);
        PolarMeasurement z = (PolarMeasurement) convert(ferry(), entry);
        double turn = AREA.plane().convergenceRadians(where);
        assertThat(z.station().eastVelocity()).isCloseTo(-8 * Math.sin(turn), within(1e-12));
        assertThat(z.station().northVelocity()).isCloseTo(8 * Math.cos(turn), within(1e-12));
        assertThat(Math.abs(z.station().eastVelocity())).isGreaterThan(0.04);
        assertThat(z.rangeRate()).isEqualTo(-8);
        assertThat(z.noise().varRangeRate()).isCloseTo(0.09, within(1e-12));
    }

    @Test
    void aSensorWithoutAnErrorOfRangeRatesDoesNotUseThem() {
        PolarSettings without = new PolarSettings(20, 0.5, OptionalDouble.empty(), OptionalDouble.empty(), 0, 25);
        SensorSettings sensor = TestSites.sensor("radar", 0, 0).measuring(without);
        assertThat(convert(sensor, polar(500, 0, 7.0)).hasRangeRate()).isFalse();
    }

    @Test
    void aNoiseOfItsOwnIsInSquareMetresAndSquareDegrees() {
        Detection detection = polar(5000, 90, null);
        detection.setNoise(new Noise(16.0, 0.3, 0.25));
        for (SensorSettings sensor : List.of(TestSites.sensor("radar", 0, 0), radar(0, 0))) {
            PolarMeasurement z = convert(sensor, detection);
            assertThat(z.noise().varRange()).isEqualTo(16);
            assertThat(z.noise().covRangeAzimuth()).isCloseTo(Math.toRadians(0.3), within(1e-15));
            assertThat(Math.toDegrees(Math.sqrt(z.noise().varAzimuth()))).isCloseTo(0.5, within(1e-12));
        }
    }

    /** A polar sensor may send places: their error is that of its ranges and azimuths there. */
    @Test
    void aPlaceFromAPolarSensorHasTheErrorOfItsRangeAndAzimuth() {
        LatLon place = TestSites.at(0, 1500);
        Detection detection = Detection.newBuilder()
                .setIndex(0)
                .setMeasurement(new GeodeticFix(place.latitude(), place.longitude()))
                .build();
        LogEntry entry = part("radar", 1).sees(detection).entry();
        PositionMeasurement z = (PositionMeasurement) convert(radar(0, 0), entry);
        assertThat(z.varNorth()).isCloseTo(400, within(0.1));
        assertThat(Math.sqrt(z.varEast())).isCloseTo(1500 * Math.toRadians(0.5), within(0.1));
    }
}
