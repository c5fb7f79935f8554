package org.sweeptally.geo;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.locationtech.proj4j.ProjCoordinate;
import org.locationtech.proj4j.datum.Ellipsoid;
import org.locationtech.proj4j.datum.GeocentricConverter;

class Wgs84Test {

    /** NIMA TR8350.2, as EPSG 7030 prints it. */
    @Test
    void theEllipsoidIsThePublishedOne() {
        assertThat(Wgs84.SEMI_MINOR_AXIS_METRES).isCloseTo(6356752.314245179, within(1e-9));
        assertThat(Wgs84.ECCENTRICITY_SQUARED).isCloseTo(.006694379990141317, within(1e-17));
        assertThat(Wgs84.SECOND_ECCENTRICITY_SQUARED).isCloseTo(.006739496742276435, within(1e-17));
        double a = Wgs84.SEMI_MAJOR_AXIS_METRES;
        assertThat((2 * a + Wgs84.SEMI_MINOR_AXIS_METRES) / 3).isCloseTo(6371008.7714, within(1e-4));
    }

    /**
     * IOGP Guidance Note 373-7-2, method 9602: the geographic coordinates from memory, the geocentric ones as printed.
     */
    @Test
    void theExampleOfEpsg9602ComesOut() {
        LatLon place = new LatLon(53 + 48 / 60.0 + 33.820 / 3600, 2 + 7 / 60.0 + 46.380 / 3600);
        GeocentricPoint point = Wgs84.toGeocentric(place, 73);
        isNear(point, 3771793.968, 140253.342, 5124304.349, 1e-3);
        isNear(point, 3771793.9676418, 140253.3418996, 5124304.3493505, 1e-6);
        LatLon back = Wgs84.toPlace(point);
        assertThat(back.latitude()).isCloseTo(place.latitude(), within(1e-11));
        assertThat(back.longitude()).isCloseTo(place.longitude(), within(1e-11));
        assertThat(Wgs84.heightMetres(point, back)).isCloseTo(73, within(1e-6));
    }

    /** From the definition of the ellipsoid; the last two by two independent computations. */
    @Test
    void equatorPolesAndOthersComeOut() {
        isNear(Wgs84.toGeocentric(new LatLon(0, 0), 0), 6378137, 0, 0, 1e-9);
        isNear(Wgs84.toGeocentric(new LatLon(90, 0), 0), 0, 0, 6356752.31424518, 1e-8);
        isNear(Wgs84.toGeocentric(new LatLon(-90, 0), 10), 0, 0, -6356762.31424518, 1e-8);
        isNear(
                Wgs84.toGeocentric(new LatLon(45, 45), 1000),
                3194919.14506057, 3194919.14506057, 4488055.51564711, 1e-7);
        isNear(
                Wgs84.toGeocentric(new LatLon(-33.8688, 151.2093), 58),
                -4646093.4772883, 2553229.53581707, -3534404.71091037, 1e-6);
    }

    /** Against proj4j, an independent implementation. */
    @Test
    void anotherLibraryAgreesAnywhereOnEarth() {
        GeocentricConverter oracle = new GeocentricConverter(Ellipsoid.WGS84);
        SplittableRandom random = seeded(11);
        for (int i = 0; i < 20_000; i++) {
            LatLon place = new LatLon(random.nextDouble(-90, 90), random.nextDouble(-180, 180));
            double height = random.nextDouble(-500, 10_000);
            ProjCoordinate other = new ProjCoordinate(
                    StrictMath.toRadians(place.longitude()), StrictMath.toRadians(place.latitude()), height);
            oracle.convertGeodeticToGeocentric(other);
            isNear(Wgs84.toGeocentric(place, height), other.x, other.y, other.z, 1e-8);
        }
    }

    @Test
    void aPlaceComesBackFromAnyHeight() {
        SplittableRandom random = seeded(12);
        for (int i = 0; i < 20_000; i++) {
            LatLon place = new LatLon(random.nextDouble(-90, 90), random.nextDouble(-180, 180));
            double height = random.nextBoolean() ? random.nextDouble(-10_000, 10_000) : random.nextDouble(0, 1e7);
            GeocentricPoint point = Wgs84.toGeocentric(place, height);
            LatLon back = Wgs84.toPlace(point);
            assertThat(back.latitude()).isCloseTo(place.latitude(), within(1e-11));
            assertThat(back.longitude()).isCloseTo(place.longitude(), within(1e-11));
            assertThat(Wgs84.heightMetres(point, back)).isCloseTo(height, within(1e-6));
        }
        assertThat(Wgs84.toPlace(new GeocentricPoint(0, 0, -6_400_000)).latitude()).isEqualTo(-90);
    }

    private static void isNear(GeocentricPoint point, double x, double y, double z, double metres) {
        assertThat(point.xMetres()).isCloseTo(x, within(metres));
        assertThat(point.yMetres()).isCloseTo(y, within(metres));
        assertThat(point.zMetres()).isCloseTo(z, within(metres));
    }

    static SplittableRandom seeded(long seed) {
        System.out.println("seed " + seed);
        return new SplittableRandom(seed);
    }
}
