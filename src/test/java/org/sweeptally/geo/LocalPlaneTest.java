package org.sweeptally.geo;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.SplittableRandom;
import net.sf.geographiclib.Geodesic;
import net.sf.geographiclib.GeodesicData;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class LocalPlaneTest {

    /** IOGP Guidance Note 373-7-2, method 9836; its origin is 55 N 5 E, 200 m high. */
    @Test
    void theExampleOfEpsg9836ComesOut() {
        TopocentricFrame frame = new TopocentricFrame(new LatLon(55, 5), 200);
        GeocentricPoint point = new GeocentricPoint(3771793.968, 140253.342, 5124304.349);
        assertThat(frame.east(point)).isCloseTo(-189013.869, within(1e-3));
        assertThat(frame.north(point)).isCloseTo(-128642.040, within(1e-3));
        assertThat(frame.up(point)).isCloseTo(-4220.171, within(1e-3));
        GeocentricPoint back = frame.toGeocentric(frame.east(point), frame.north(point), frame.up(point));
        assertThat(back.xMetres()).isCloseTo(point.xMetres(), within(1e-8));
        assertThat(back.yMetres()).isCloseTo(point.yMetres(), within(1e-8));
        assertThat(back.zMetres()).isCloseTo(point.zMetres(), within(1e-8));
    }

    /** IOGP Guidance Note 373-7-2, method 9837: the same from geographic coordinates, in closed form. */
    @Test
    void theClosedFormOfEpsg9837Agrees() {
        SplittableRandom random = Wgs84Test.seeded(21);
        for (int i = 0; i < 2000; i++) {
            LatLon origin = new LatLon(random.nextDouble(-89, 89), random.nextDouble(-180, 180));
            LatLon place = new LatLon(
                    origin.latitude() + random.nextDouble(-1, 1), origin.longitude() + random.nextDouble(-1, 1));
            double phi0 = Math.toRadians(origin.latitude());
            double phi = Math.toRadians(place.latitude());
            double turn = Math.toRadians(place.longitude() - origin.longitude());
            double nu0 = Wgs84.primeVerticalRadiusMetres(Math.sin(phi0));
            double nu = Wgs84.primeVerticalRadiusMetres(Math.sin(phi));
            double e2 = Wgs84.ECCENTRICITY_SQUARED;
            double east = nu * Math.cos(phi) * Math.sin(turn);
            double north = nu * (Math.sin(phi) * Math.cos(phi0) - Math.cos(phi) * Math.sin(phi0) * Math.cos(turn))
                    + e2 * (nu0 * Math.sin(phi0) - nu * Math.sin(phi)) * Math.cos(phi0);
            PlanePoint point = new LocalPlane(origin).toPlane(place);
            assertThat(point.eastMetres()).isCloseTo(east, within(1e-6));
            assertThat(point.northMetres()).isCloseTo(north, within(1e-6));
        }
    }

    /** East, north and up from 52 N 4 E, by two independent computations. */
    @ParameterizedTest
    @CsvSource({
        "52.01, 4, 0, 0, 1112.674477268, -.097099193",
        "52.1, 4, 0, 0, 11126.824654862, -9.710016364",
        "52, 4.1, 0, 6867.798121177, 4.722773817617, -3.689835301",
        "52.5, 4.5, 100, 33955.216978948, 55752.965284949, -233.979265734",
        "53, 5, 10000, 67238.849268082, 111908.09277164, 8666.139953450"
    })
    void eastNorthAndUpComeOut(double latitude, double longitude, double height, double east, double north, double up) {
        TopocentricFrame frame = new TopocentricFrame(new LatLon(52, 4), 0);
        LatLon place = new LatLon(latitude, longitude);
        GeocentricPoint point = Wgs84.toGeocentric(place, height);
        assertThat(frame.east(point)).isCloseTo(east, within(1e-6));
        assertThat(frame.north(point)).isCloseTo(north, within(1e-6));
        assertThat(frame.up(point)).isCloseTo(up, within(1e-6));
        if (height == 0) {
            PlanePoint inPlane = new LocalPlane(new LatLon(52, 4)).toPlane(place);
            assertThat(inPlane.eastMetres()).isEqualTo(frame.east(point));
            assertThat(inPlane.northMetres()).isEqualTo(frame.north(point));
        }
    }

    /**
     * How far the ellipsoid falls away from the plane along the parallel of 52 N, and how far the parallel bends north.
     */
    @ParameterizedTest
    @CsvSource({
        "1000, -.07823, 5e-6, .100, 5e-4",
        "10000, -7.823, 5e-4, 10.01, .005",
        "50000, -195.57, .005, 250.3, .05",
        "100000, -782.25, .005, 1001.2, .05",
        "200000, -3128.5, .05, 4004.3, .05"
    })
    void theEarthFallsAwayAsComputed(double arc, double up, double upDigits, double north, double northDigits) {
        double phi = Math.toRadians(52);
        double radius = Wgs84.primeVerticalRadiusMetres(Math.sin(phi)) * Math.cos(phi);
        TopocentricFrame frame = new TopocentricFrame(new LatLon(52, 4), 0);
        GeocentricPoint point = Wgs84.toGeocentric(new LatLon(52, 4 + Math.toDegrees(arc / radius)), 0);
        assertThat(frame.up(point)).isCloseTo(up, within(upDigits));
        assertThat(frame.north(point)).isCloseTo(north, within(northDigits));
    }

    /** Lengths of a degree by the radii of curvature, computed independently. */
    @ParameterizedTest
    @CsvSource({
        "52, 111267.353293, 68678.0160793",
        "55, 111323.530176, 63994.1292977",
        "0, 110574.275822, 111319.490793"
    })
    void aDegreeIsAsLongAsItShouldBe(double latitude, double north, double east) {
        LocalPlane plane = new LocalPlane(new LatLon(latitude, 4));
        double step = 1e-3;
        double dn = plane.toPlane(new LatLon(latitude + step, 4)).northMetres()
                - plane.toPlane(new LatLon(latitude - step, 4)).northMetres();
        double de = plane.toPlane(new LatLon(latitude, 4 + step)).eastMetres();
        assertThat(dn / (2 * step)).isCloseTo(north, within(1e-4));
        assertThat(de / step).isCloseTo(east, within(1e-4));
    }

    /**
     * Karney 2013, "Algorithms for geodesics", Journal of Geodesy 87: 43-55, from memory: the oracle is the one we
     * think.
     */
    @Test
    void theOracleGivesThePublishedGeodesics() {
        GeodesicData direct = Geodesic.WGS84.Direct(40, 0, 30, 10_000_000);
        assertThat(direct.lat2).isCloseTo(41.79331020506, within(1e-11));
        assertThat(direct.lon2).isCloseTo(137.84490004377, within(1e-11));
        GeodesicData inverse = Geodesic.WGS84.Inverse(-30, 0, 29.9, 179.8);
        assertThat(inverse.s12).isCloseTo(19989832.827610, within(1e-5));
        // From the documentation of the library.
        assertThat(Geodesic.WGS84.Inverse(-41.32, 174.81, 40.96, -5.50).s12).isCloseTo(19959679.267, within(1e-3));
    }

    /**
     * Against geodesics (GeographicLib-Java): a plane's lengths differ by d^3 / (6 R^2), its directions by no more than
     * e^2 (d / R)^2 / 6 radians.
     */
    @Test
    void lengthsAndDirectionsAreThoseOfGeodesics() {
        SplittableRandom random = Wgs84Test.seeded(22);
        for (int i = 0; i < 5000; i++) {
            LatLon origin = new LatLon(random.nextDouble(-85, 85), random.nextDouble(-180, 180));
            double distance = random.nextDouble(100, 50_000);
            GeodesicData to = Geodesic.WGS84.Direct(
                    origin.latitude(), origin.longitude(), random.nextDouble(-180, 180), distance);
            PlanePoint point = new LocalPlane(origin).toPlane(new LatLon(to.lat2, to.lon2));
            double length = Math.hypot(point.eastMetres(), point.northMetres());
            double expected = distance * distance * distance / (6 * 6371e3 * 6371e3);
            assertThat(distance - length).isCloseTo(expected, within(1e-5 + expected * .02));
            double azimuth = Math.toDegrees(Math.atan2(point.eastMetres(), point.northMetres()));
            assertThat(Math.IEEEremainder(azimuth - to.azi1, 360)).isCloseTo(0, within(4e-6));
        }
    }

    @Test
    void aPointInThePlaneComesBackFromItsPlace() {
        SplittableRandom random = Wgs84Test.seeded(23);
        for (int i = 0; i < 20_000; i++) {
            LocalPlane plane = new LocalPlane(new LatLon(random.nextDouble(-90, 90), random.nextDouble(-180, 180)));
            double far = random.nextBoolean() ? 1e6 : 5e4;
            PlanePoint point = new PlanePoint(random.nextDouble(-far, far), random.nextDouble(-far, far));
            PlanePoint back = plane.toPlane(plane.toGeodetic(point));
            assertThat(back.eastMetres()).isCloseTo(point.eastMetres(), within(1e-8));
            assertThat(back.northMetres()).isCloseTo(point.northMetres(), within(1e-8));
        }
    }

    @Test
    void theAntimeridianIsNoEdge() {
        PlanePoint point = new LocalPlane(new LatLon(10, 179.9)).toPlane(new LatLon(10, -179.9));
        assertThat(point.eastMetres()).isCloseTo(21_926, within(5.0));
        LatLon place = new LocalPlane(new LatLon(10, 179.9)).toGeodetic(point);
        assertThat(place.longitude()).isCloseTo(-179.9, within(1e-12));
    }

    @Test
    void aPlaneAtThePoleHoldsAllLongitudes() {
        LocalPlane plane = new LocalPlane(new LatLon(90, 0));
        assertThat(plane.toPlane(new LatLon(89.9, 90)).eastMetres()).isCloseTo(11_169.4, within(1.0));
        assertThat(plane.toPlane(new LatLon(89.9, 180)).northMetres()).isCloseTo(11_169.4, within(1.0));
        LatLon back = plane.toGeodetic(plane.toPlane(new LatLon(89.9, -135)));
        assertThat(back.longitude()).isCloseTo(-135, within(1e-10));
        assertThat(back.latitude()).isCloseTo(89.9, within(1e-12));
    }

    @Test
    void theFarSideOfTheEarthIsNotFoldedBack() {
        LocalPlane plane = new LocalPlane(new LatLon(52, 4));
        assertThat(plane.toPlane(new LatLon(-52, -176)).eastMetres()).isNaN();
        assertThat(plane.toPlane(new LatLon(-40, 4)).northMetres()).isNaN();
        assertThat(plane.toPlane(new LatLon(-37, 4)).northMetres()).isLessThan(-6e6);
        assertThat(plane.toGeodetic(new PlanePoint(6.4e6, 0)).latitude()).isNaN();
    }

    /** By differences: a short step to true north, seen in the plane. */
    @Test
    void convergenceIsTheTurnOfTrueNorth() {
        SplittableRandom random = Wgs84Test.seeded(24);
        for (int i = 0; i < 2000; i++) {
            LatLon origin = new LatLon(random.nextDouble(-85, 85), random.nextDouble(-180, 180));
            LocalPlane plane = new LocalPlane(origin);
            PlanePoint at = new PlanePoint(random.nextDouble(-5e4, 5e4), random.nextDouble(-5e4, 5e4));
            LatLon place = plane.toGeodetic(at);
            PlanePoint northwards = plane.toPlane(new LatLon(place.latitude() + 1e-5, place.longitude()));
            double turn = Math.atan2(
                    -(northwards.eastMetres() - at.eastMetres()), northwards.northMetres() - at.northMetres());
            assertThat(plane.convergenceRadians(place)).isCloseTo(turn, within(1e-6));
        }
        LocalPlane plane = new LocalPlane(new LatLon(52, 4));
        // East of the origin, in the northern hemisphere, meridians lean to the west: counter-clockwise.
        assertThat(plane.convergenceRadians(new LatLon(52, 4.5)))
                .isCloseTo(Math.toRadians(.5) * Math.sin(Math.toRadians(52)), within(1e-5));
        assertThat(plane.convergenceRadians(new LatLon(53, 4))).isEqualTo(0);
    }
}
