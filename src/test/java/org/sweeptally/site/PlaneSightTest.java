package org.sweeptally.site;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.junit.jupiter.api.Test;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.model.ClutterLearning;
import org.sweeptally.model.DetectionProfile;
import org.sweeptally.model.FieldOfView;
import org.sweeptally.model.MissRuns;
import org.sweeptally.site.SightSettings.SectorSettings;

class PlaneSightTest {

    /** So far from the plane's middle that its north is 2.1 degrees off the plane's. */
    private static final LatLon POSITION = new LatLon(60, 12.5);

    private static final LocalPlane PLANE = new LocalPlane(new LatLon(60, 10));

    @Test
    void sectorsCountFromTrueNorthWhereTheSensorIs() {
        FieldOfView view = sight(new SectorSettings(10, 20), false).from(POSITION, 90.0);
        for (double azimuth = 0.5; azimuth < 360; azimuth += 1) {
            assertThat(sees(view, azimuth)).as("azimuth %f", azimuth).isEqualTo(azimuth > 10 && azimuth < 20);
        }
    }

    @Test
    void sectorsCountFromTheHeadingWhereTheSiteSaysSoAndThePartTellsIt() {
        PlaneSight sight = sight(new SectorSettings(-30, 40), true);
        for (double azimuth = 0.5; azimuth < 360; azimuth += 1) {
            double fromNorth = azimuth > 180 ? azimuth - 360 : azimuth;
            assertThat(sees(sight.from(POSITION, 100.0), azimuth)).isEqualTo(azimuth > 70 && azimuth < 140);
            assertThat(sees(sight.from(POSITION, null), azimuth)).isEqualTo(fromNorth > -30 && fromNorth < 40);
        }
    }

    @Test
    void theViewIsMadeAnewOnlyWhenTheSensorHasMoved() {
        PlaneSight sight = sight(new SectorSettings(-30, 40), false);
        FieldOfView first = sight.from(POSITION, 5.0);
        assertThat(sight.from(POSITION, 6.0)).isSameAs(first);
        assertThat(sight.from(new LatLon(60, 12.4), 6.0)).isNotSameAs(first);
    }

    @Test
    void whatIsOnTheOtherSideOfTheEarthIsInNobodysWay() {
        GeoPolygon there = new GeoPolygon(List.of(new LatLon(-60, -170), new LatLon(-60, -169), new LatLon(-59, -170)), List.of());
        SightSettings all = new SightSettings(0, List.of(), false, List.of(there), List.of(there),
                List.of(new SightSettings.AreaSettings(there, 0.5, true)));
        assertThat(sees(new PlaneSight(sensor(all), PLANE).from(POSITION, null), 17)).isTrue();
    }

    @Test
    void anObstacleHidesWhatLiesBehindItSeenFromWhereTheSensorIs() {
        LocalPlane own = new LocalPlane(POSITION);
        List<LatLon> corners = new ArrayList<>();
        for (double[] c : new double[][] {{-50, 300}, {50, 300}, {50, 320}, {-50, 320}}) {
            corners.add(own.toGeodetic(new PlanePoint(c[0], c[1])));
        }
        SightSettings walled = new SightSettings(
                0, List.of(), false, List.of(), List.of(new GeoPolygon(corners, List.of())), List.of());
        PlaneSight sight = new PlaneSight(sensor(walled), PLANE);
        assertThat(sees(sight.from(POSITION, null), 0)).isFalse();
        assertThat(sees(sight.from(POSITION, null), 9)).isFalse();
        assertThat(sees(sight.from(POSITION, null), 10)).isTrue();
        // From 600 m farther north the same place, 800 m from the sensor's first, is in plain sight.
        LatLon north = own.toGeodetic(new PlanePoint(0, 600));
        PlanePoint place = PLANE.toPlane(own.toGeodetic(new PlanePoint(0, 800)));
        assertThat(sight.from(north, null).sees(place.eastMetres(), place.northMetres())).isTrue();
    }

    private static PlaneSight sight(SectorSettings sector, boolean fromHeading) {
        return new PlaneSight(
                sensor(new SightSettings(0, List.of(sector), fromHeading, List.of(), List.of(), List.of())), PLANE);
    }

    private static SensorSettings sensor(SightSettings sight) {
        return new SensorSettings(
                "mast", Optional.empty(), Optional.empty(), 1000, new SensorSettings.PositionNoise(5, 5),
                DetectionProfile.constant(0.9), 5, 1, 0, 0, 0, 10, sight, MissRuns.NONE, ClutterLearning.OFF, Optional.empty(), 0);
    }

    /** Whether the sensor sees a place 800 m away in a direction from true north. */
    private static boolean sees(FieldOfView view, double azimuthDegrees) {
        double azimuth = Math.toRadians(azimuthDegrees);
        PlanePoint place = PLANE.toPlane(
                new LocalPlane(POSITION).toGeodetic(new PlanePoint(800 * Math.sin(azimuth), 800 * Math.cos(azimuth))));
        return view.sees(place.eastMetres(), place.northMetres());
    }
}
