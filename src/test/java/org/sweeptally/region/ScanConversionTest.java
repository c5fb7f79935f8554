package org.sweeptally.region;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;
import static org.sweeptally.region.Entries.part;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.Coverage;
import org.sweeptally.event.Detection;
import org.sweeptally.event.GeoPoint;
import org.sweeptally.event.GeodeticFix;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Noise;
import org.sweeptally.event.OffsetFix;
import org.sweeptally.filter.Observation;
import org.sweeptally.filter.Scan;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.model.PositionMeasurement;
import org.sweeptally.site.SensorSettings;

/** Measurements as they were sent become places in the region's plane, with the covariance turned as the plane is. */
class ScanConversionTest {

    private static final RegionArea AREA =
            new RegionArea(TestSites.region(TestSites.REGION, TestSites.rectangle(-2000, -2000, 2000, 2000)));

    private static Scan convert(SensorSettings sensor, LogEntry... entries) {
        ScanParts parts = ScanParts.begin(ScanParts.partOf(entries[0]).getScanTimeMicros(), sensor);
        for (LogEntry entry : entries) {
            parts.add(entry, 0);
        }
        return new ScanConversion(AREA).convert(parts, sensor).orElseThrow();
    }

    private static PositionMeasurement only(Scan scan) {
        assertThat(scan.observations()).hasSize(1);
        return (PositionMeasurement) scan.observations().get(0).measurement();
    }

    @Test
    void aPlaceAndTheSamePlaceAsAnOffsetGiveTheSameMeasurement() {
        SensorSettings sensor = TestSites.sensor("north-shore", 50_000, 30_000);
        LocalPlane sensorPlane = new LocalPlane(sensor.position().orElseThrow());
        LatLon place = TestSites.at(1200, -700);
        PlanePoint offset = sensorPlane.toPlane(place);
        PositionMeasurement byPlace = only(convert(sensor, part("north-shore", 1).sees(0, place).entry()));
        PositionMeasurement byOffset = only(
                convert(sensor, part("north-shore", 1).seesOffset(offset.eastMetres(), offset.northMetres()).entry()));
        assertThat(byOffset.east()).isCloseTo(byPlace.east(), within(1e-6));
        assertThat(byOffset.north()).isCloseTo(byPlace.north(), within(1e-6));
        PlanePoint expected = AREA.plane().toPlane(place);
        assertThat(byPlace.east()).isEqualTo(expected.eastMetres());
        assertThat(byPlace.north()).isEqualTo(expected.northMetres());
    }

    @Test
    void theUsualNoiseLiesAlongAndAcrossTheLineOfSight() {
        SensorSettings sensor = TestSites.moving("pilot-boat");
        PositionMeasurement east = only(convert(
                sensor, part("pilot-boat", 1).from(TestSites.MIDDLE).seesOffset(500, 0).entry()));
        assertThat(east.varEast()).isCloseTo(100, within(1e-4));
        assertThat(east.varNorth()).isCloseTo(400, within(1e-4));
        assertThat(east.covEastNorth()).isCloseTo(0, within(1e-2));
        PositionMeasurement northEast = only(convert(
                sensor, part("pilot-boat", 1).from(TestSites.MIDDLE).seesOffset(500, 500).entry()));
        assertThat(northEast.varEast()).isCloseTo(250, within(1e-3));
        assertThat(northEast.varNorth()).isCloseTo(250, within(1e-3));
        assertThat(northEast.covEastNorth()).isCloseTo(-150, within(1e-3));
        PositionMeasurement above = only(convert(
                sensor, part("pilot-boat", 1).from(TestSites.MIDDLE).seesOffset(0, 0).entry()));
        double determinant = above.varEast() * above.varNorth() - above.covEastNorth() * above.covEastNorth();
        assertThat(determinant).as("whatever the line of sight is there").isCloseTo(40_000, within(1e-3));
    }

    @Test
    void aNoiseOfItsOwnIsTurnedByTheConvergenceBetweenItsAxesAndThePlane() {
        SensorSettings sensor = TestSites.sensor("north-shore", 60_000, 0);
        LatLon place = TestSites.at(1500, 1000);
        Noise noise = new Noise(400.0, 30.0, 25.0);
        double atSensor = AREA.plane().convergenceRadians(sensor.position().orElseThrow());
        double atPlace = AREA.plane().convergenceRadians(place);
        assertThat(Math.abs(atSensor)).as("60 km east at 40 degrees north").isGreaterThan(0.005);
        PlanePoint offset = new LocalPlane(sensor.position().orElseThrow()).toPlane(place);
        PositionMeasurement byPlace = only(convert(sensor, part("north-shore", 1)
                .sees(detection(new GeodeticFix(place.latitude(), place.longitude()), noise)).entry()));
        PositionMeasurement byOffset = only(convert(sensor, part("north-shore", 1)
                .sees(detection(new OffsetFix(offset.eastMetres(), offset.northMetres()), noise)).entry()));
        assertTurned(byPlace, noise, atPlace);
        assertTurned(byOffset, noise, atSensor);
    }

    private static Detection detection(Object measurement, Noise noise) {
        return Detection.newBuilder().setIndex(0).setMeasurement(measurement).setNoise(noise).build();
    }

    /** Against the matrix product R P R', with R the turn counter-clockwise. */
    private static void assertTurned(PositionMeasurement measurement, Noise noise, double turn) {
        double[][] r = {{Math.cos(turn), -Math.sin(turn)}, {Math.sin(turn), Math.cos(turn)}};
        double[][] p = {{noise.getFirst(), noise.getCross()}, {noise.getCross(), noise.getSecond()}};
        double[][] turned = new double[2][2];
        for (int i = 0; i < 2; i++) {
            for (int j = 0; j < 2; j++) {
                for (int k = 0; k < 2; k++) {
                    for (int l = 0; l < 2; l++) {
                        turned[i][j] += r[i][k] * p[k][l] * r[j][l];
                    }
                }
            }
        }
        assertThat(measurement.varEast()).isCloseTo(turned[0][0], within(1e-9));
        assertThat(measurement.covEastNorth()).isCloseTo(turned[0][1], within(1e-9));
        assertThat(measurement.varNorth()).isCloseTo(turned[1][1], within(1e-9));
    }

    @Test
    void aDetectionLagsBehindTheEndOfItsSweep() {
        SensorSettings sensor = TestSites.withSweep(TestSites.sensor("north-shore", 0, 0), 2.5);
        LatLon place = TestSites.at(0, 0);
        Detection timed = Detection.newBuilder()
                .setIndex(0)
                .setTimeMicros(Entries.micros(11))
                .setMeasurement(new GeodeticFix(place.latitude(), place.longitude()))
                .build();
        assertThat(only(convert(sensor, part("north-shore", 10).sees(timed).entry())).lagSeconds()).isEqualTo(1.5);
        assertThat(only(convert(sensor, part("north-shore", 10).sees(0, 0).entry())).lagSeconds()).isEqualTo(2.5);
    }

    @Test
    void observationsAreOrderedByPartAndIndexHoweverTheyCame() {
        SensorSettings sensor = TestSites.sensor("north-shore", 0, 0);
        LatLon place = TestSites.at(0, 0);
        LogEntry second = part("north-shore", 1).part(1).sees(5, place).sees(2, place).entry();
        LogEntry first = part("north-shore", 1).part(0).open().sees(9, place).entry();
        List<Observation> observations = convert(sensor, second, first).observations();
        assertThat(observations.stream().map(o -> o.part() + "-" + o.index()).toList()).containsExactly("0-9", "1-2",
                "1-5");
    }

    @Test
    void aMovingSensorSeesFromWhereItsPartSaysAndTheLookFromWhereTheClosingPartDoes() {
        SensorSettings sensor = TestSites.moving("pilot-boat");
        LogEntry first = part("pilot-boat", 1).part(0).open().from(TestSites.at(-500, 0)).seesOffset(100, 0).entry();
        LogEntry closing = part("pilot-boat", 1).part(1).from(TestSites.at(2900, 0)).seesOffset(-100, 0).entry();
        Scan scan = convert(sensor, first, closing);
        assertThat(scan.observations().get(0).measurement().east()).isCloseTo(-400, within(2.0));
        assertThat(scan.observations().get(1).measurement().east()).isCloseTo(2800, within(10.0));
        assertThat(scan.look().probabilityOfDetection(0, 0)).isEqualTo(0.8);
        assertThat(scan.look().probabilityOfDetection(-200, 0)).as("beyond its reach of 3000 m").isZero();
    }

    @Test
    void aMovingSensorThatDoesNotSayWhereItWasIsRejectedAndCountsNoMiss() {
        Rig rig = Rig.with(TestSites.moving("pilot-boat"));
        rig.apply(part("pilot-boat", 1).seesOffset(0, 0), part("pilot-boat", 2).from(TestSites.MIDDLE).seesOffset(0,
                0));
        assertThat(rig.effects()).containsExactly(2.0);
        assertThat(rig.out.rejects).hasSize(1);
        assertThat(rig.out.rejects.get(0).getSentence()).contains("has no sensorPosition");
    }

    @Test
    void whereTheLookDidNotLookNothingIsDetected() {
        SensorSettings sensor = TestSites.sensor("north-shore", 0, 0);
        Scan sector = convert(sensor, covering(null, 1500.0, 350.0, 80.0, null));
        assertThat(sector.look().probabilityOfDetection(10, 1000)).isEqualTo(0.9);
        assertThat(sector.look().probabilityOfDetection(1000, 300)).isEqualTo(0.9);
        assertThat(sector.look().probabilityOfDetection(1000, 100)).as("azimuth 84 degrees").isZero();
        assertThat(sector.look().probabilityOfDetection(0, -1000)).isZero();
        assertThat(sector.look().probabilityOfDetection(10, 1600)).as("farther than toMetres").isZero();
        Scan ring = convert(sensor, covering(500.0, null, null, null, null));
        assertThat(ring.look().probabilityOfDetection(0, -600)).isEqualTo(0.9);
        assertThat(ring.look().probabilityOfDetection(0, -400)).isZero();
        List<GeoPoint> corners = List.of(corner(0, 0), corner(1000, 0), corner(1000, 1000));
        Scan polygon = convert(sensor, covering(null, null, null, null, corners));
        assertThat(polygon.look().probabilityOfDetection(700, 300)).isEqualTo(0.9);
        assertThat(polygon.look().probabilityOfDetection(300, 700)).isZero();
    }

    @Test
    void anAreaOnTheOtherSideOfTheEarthIsNoneOfThisRegion() {
        SensorSettings sensor = TestSites.sensor("north-shore", 0, 0);
        LatLon here = TestSites.at(0, 0);
        List<GeoPoint> corners = List.of(
                corner(0, 0), corner(1000, 0), new GeoPoint(-here.latitude(), here.longitude() + 179.0, null));
        Scan scan = convert(sensor, covering(null, null, null, null, corners));
        assertThat(scan.look().probabilityOfDetection(300, 100)).isZero();
    }

    private static GeoPoint corner(double east, double north) {
        return new GeoPoint(TestSites.at(east, north).latitude(), TestSites.at(east, north).longitude(), null);
    }

    private static LogEntry covering(Double from, Double to, Double fromAzimuth, Double toAzimuth,
            List<GeoPoint> area) {
        LogEntry entry = part("north-shore", 1).entry();
        ScanParts.partOf(entry).setCoverage(new Coverage(from, to, fromAzimuth, toAzimuth, area));
        return entry;
    }

    @Test
    void beyondTheApronTheRegionHearsNothing() {
        Scan scan = convert(TestSites.sensor("north-shore", 0, 0), part("north-shore", 1).entry());
        assertThat(scan.look().probabilityOfDetection(2290, 0)).isEqualTo(0.9);
        assertThat(scan.look().probabilityOfDetection(2310, 0)).isZero();
    }
}
