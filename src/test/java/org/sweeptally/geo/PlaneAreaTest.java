package org.sweeptally.geo;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.List;
import java.util.SplittableRandom;
import net.sf.geographiclib.Geodesic;
import net.sf.geographiclib.PolygonArea;
import org.junit.jupiter.api.Test;
import org.locationtech.jts.geom.Coordinate;
import org.locationtech.jts.geom.GeometryFactory;
import org.locationtech.jts.geom.LinearRing;
import org.locationtech.jts.geom.Polygon;

class PlaneAreaTest {

    private static final LocalPlane PLANE = new LocalPlane(new LatLon(52, 4));

    /** Against JTS, an independent implementation, on a star with a hole. */
    @Test
    void anotherLibraryGivesTheSameDistancesAndArea() {
        SplittableRandom random = Wgs84Test.seeded(41);
        List<PlanePoint> star = new ArrayList<>();
        for (int i = 0; i < 40; i++) {
            double radius = random.nextDouble(1500, 3000);
            star.add(new PlanePoint(radius * Math.cos(i * Math.PI / 20), radius * Math.sin(i * Math.PI / 20)));
        }
        List<PlanePoint> hole = List.of(new PlanePoint(-300, -200), new PlanePoint(500, 0), new PlanePoint(0, 400));
        PlaneArea area = area(star, hole);
        GeometryFactory factory = new GeometryFactory();
        Polygon oracle = factory.createPolygon(ring(factory, star), new LinearRing[] {ring(factory, hole)});

        assertThat(area.areaSquareMetres()).isCloseTo(oracle.getArea(), within(1e-3));
        assertThat(area.minEast()).isCloseTo(oracle.getEnvelopeInternal().getMinX(), within(1e-7));
        assertThat(area.maxEast()).isCloseTo(oracle.getEnvelopeInternal().getMaxX(), within(1e-7));
        assertThat(area.minNorth()).isCloseTo(oracle.getEnvelopeInternal().getMinY(), within(1e-7));
        assertThat(area.maxNorth()).isCloseTo(oracle.getEnvelopeInternal().getMaxY(), within(1e-7));
        for (int i = 0; i < 10_000; i++) {
            double east = random.nextDouble(-4000, 4000);
            double north = random.nextDouble(-4000, 4000);
            var point = factory.createPoint(new Coordinate(east, north));
            double distance = oracle.getBoundary().distance(point);
            boolean inside = oracle.contains(point);
            double signed = area.signedDistanceMetres(east, north);
            assertThat(signed).isCloseTo(inside ? distance : -distance, within(1e-6));
            assertThat(area.contains(east, north)).isEqualTo(signed > 0);
            double asked = signed + random.nextDouble(-200, 200);
            assertThat(area.isAtLeast(asked, east, north)).isEqualTo(signed >= asked);
        }
    }

    /** An edge along a parallel bends by d^2 tan(latitude) / (8 R): 126 m over 70 km at 52 N. Its area follows. */
    @Test
    void longEdgesFollowTheirParallel() {
        GeoPolygon polygon = rectangle(51.8, 3.5, 52.3, 4.5);
        PlaneArea area = PlaneArea.of(polygon, PLANE);
        SplittableRandom random = Wgs84Test.seeded(42);
        for (int i = 0; i < 20_000; i++) {
            LatLon place = new LatLon(random.nextDouble(51.7, 52.4), random.nextDouble(3.4, 4.6));
            PlanePoint point = PLANE.toPlane(place);
            double distance = area.signedDistanceMetres(point.eastMetres(), point.northMetres());
            if (Math.abs(distance) > PlaneArea.EDGE_TOLERANCE_METRES) {
                assertThat(distance > 0).as("%s, %s m", place, distance).isEqualTo(polygon.contains(place));
            }
        }
        PlanePoint onEdge = PLANE.toPlane(new LatLon(52.3, 4.123));
        assertThat(area.signedDistanceMetres(onEdge.eastMetres(), onEdge.northMetres()))
                .isCloseTo(0, within(PlaneArea.EDGE_TOLERANCE_METRES));
    }

    /** Against Karney's polygon area (GeographicLib-Java), whose edges are geodesics: 5 km is too short to tell. */
    @Test
    void areaIsThatOnTheEllipsoid() {
        GeoPolygon polygon = rectangle(51.98, 3.96, 52.02, 4.03);
        PolygonArea oracle = new PolygonArea(Geodesic.WGS84, false);
        polygon.outer().forEach(corner -> oracle.AddPoint(corner.latitude(), corner.longitude()));
        double expected = Math.abs(oracle.Compute().area);
        assertThat(PlaneArea.of(polygon, PLANE).areaSquareMetres()).isCloseTo(expected, within(expected * 1e-6));
    }

    @Test
    void neighboursInOnePlaneShareNoPointAndLeaveNoGap() {
        PlaneArea west = PlaneArea.of(rectangle(51.9, 3.8, 52.1, 4), PLANE);
        PlaneArea east = PlaneArea.of(
                new GeoPolygon(
                        List.of(at(52.1, 4.2), at(52.1, 4), at(51.9, 4), at(51.9, 4.2)), List.of()), PLANE);
        PlaneArea north = PlaneArea.of(rectangle(52.1, 3.8, 52.3, 4), PLANE);
        SplittableRandom random = Wgs84Test.seeded(43);
        for (int i = 0; i < 20_000; i++) {
            // On the meridian that two share, or on the parallel, or anywhere near.
            PlanePoint point = PLANE.toPlane(
                    switch (i % 3) {
                        case 0 -> at(random.nextDouble(51.9001, 52.0999), 4);
                        case 1 -> at(52.1, random.nextDouble(3.8001, 3.9999));
                        default -> at(random.nextDouble(51.91, 52.09), random.nextDouble(3.81, 4.19));
                    });
            int owners = 0;
            for (PlaneArea area : List.of(west, east, north)) {
                owners += area.contains(point.eastMetres(), point.northMetres()) ? 1 : 0;
            }
            assertThat(owners).as("owners of %s", point).isEqualTo(1);
        }
    }

    @Test
    void whatIsNoNumberHasNoDistance() {
        PlaneArea area = PlaneArea.of(rectangle(51.9, 3.8, 52.1, 4), PLANE);
        assertThat(area.signedDistanceMetres(Double.NaN, 0)).isNaN();
        assertThat(area.signedDistanceMetres(0, Double.NaN)).isNaN();
        assertThat(area.contains(Double.NaN, 0)).isFalse();
        assertThat(area.isAtLeast(-1e9, Double.NaN, 0)).isFalse();
    }

    private static PlaneArea area(List<PlanePoint> outer, List<PlanePoint> hole) {
        return PlaneArea.of(new GeoPolygon(places(outer), List.of(places(hole))), PLANE);
    }

    private static List<LatLon> places(List<PlanePoint> points) {
        return points.stream().map(PLANE::toGeodetic).toList();
    }

    private static LinearRing ring(GeometryFactory factory, List<PlanePoint> points) {
        Coordinate[] coordinates = new Coordinate[points.size() + 1];
        for (int i = 0; i <= points.size(); i++) {
            PlanePoint point = points.get(i % points.size());
            coordinates[i] = new Coordinate(point.eastMetres(), point.northMetres());
        }
        return factory.createLinearRing(coordinates);
    }

    private static GeoPolygon rectangle(double south, double west, double north, double east) {
        return new GeoPolygon(List.of(at(south, west), at(south, east), at(north, east), at(north, west)), List.of());
    }

    private static LatLon at(double latitude, double longitude) {
        return new LatLon(latitude, longitude);
    }

    /** After so many questions the area has a raster, which must not show. */
    @Test
    void theAnswerIsThatOfTheEdgesHoweverOftenItIsAskedFor() {
        for (long seed = 1; seed <= 4; seed++) {
            SplittableRandom random = new SplittableRandom(seed);
            List<PlanePoint> ring = new ArrayList<>();
            int corners = 60;
            for (int i = 0; i < corners; i++) {
                double angle = 2 * Math.PI * (i + 0.8 * random.nextDouble()) / corners;
                double radius = random.nextDouble(300, 1000);
                ring.add(new PlanePoint(radius * Math.cos(angle), radius * Math.sin(angle)));
            }
            PlaneArea area = PlaneArea.ofRings(List.of(ring));
            for (int i = 0; i < 60_000; i++) {
                double east = random.nextDouble(-1400, 1400);
                double north = random.nextDouble(-1400, 1400);
                double signed = area.signedDistanceMetres(east, north);
                double asked = i % 3 == 0 ? signed : i % 3 == 1 ? Math.nextUp(signed) : random.nextDouble(-300, 300);
                assertThat(area.isAtLeast(asked, east, north))
                        .as("seed %d: %s or more at (%s, %s)", seed, asked, east, north)
                        .isEqualTo(signed >= asked);
                if (signed != 0) {
                    assertThat(area.contains(east, north)).isEqualTo(signed > 0);
                }
            }
        }
    }
}
