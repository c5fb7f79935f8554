package org.sweeptally.region;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.sweeptally.region.Entries.part;

import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.Coverage;
import org.sweeptally.event.Detection;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.RejectReason;
import org.sweeptally.geo.GeoPolygon;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.site.RegionSettings;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/** Each region gets what it hears and, of each sensor that can see any of it, every word that moves its horizon. */
class PartRouterTest {

    private static final RegionSettings WEST = TestSites.region("west", TestSites.rectangle(-4000, -2000, 0, 2000));
    private static final RegionSettings EAST = TestSites.region("east", TestSites.rectangle(0, -2000, 4000, 2000));
    private static final RegionSettings FAR = TestSites.region("far", TestSites.rectangle(40_000, -2000, 44_000, 2000));
    private static final SensorSettings NORTH = TestSites.sensor("north-shore", -1000, 0);
    private static final SensorSettings BOAT = TestSites.moving("pilot-boat");

    private static Site site(SensorSettings... sensors) {
        return TestSites.site(1, List.of(WEST, EAST, FAR), List.of(sensors));
    }

    private static List<Integer> indexes(PartRouter.Routed routed, String region) {
        return routed.byRegion().get(region).getPart().getDetections().stream().map(Detection::getIndex).toList();
    }

    @Test
    void aRegionGetsTheDetectionsOfItsCoreAndApronWithTheirOwnIndexes() {
        PartRouter router = new PartRouter(site(NORTH));
        LogEntry entry = part("north-shore", 1).sees(-3000, 0).sees(-200, 0).sees(200, 0).sees(3000, 0).sees(500, 0)
                .entry();
        PartRouter.Routed routed = router.route(entry);
        assertThat(routed.byRegion()).containsOnlyKeys("east", "west");
        assertThat(indexes(routed, "west")).containsExactly(0, 1, 2);
        assertThat(indexes(routed, "east")).containsExactly(1, 2, 3, 4);
        PartBody whole = ScanParts.bodyOf(entry);
        for (PartBody body : routed.byRegion().values()) {
            assertThat(body.getWholeDigest()).isEqualTo(whole.getWholeDigest());
            assertThat(body.getDetectionsSent()).isEqualTo(5);
            assertThat(body.getPart().getClosesScan()).isTrue();
        }
        assertThat(whole.getPart().getDetections()).as("the part itself is left as it is").hasSize(5);
    }

    @Test
    void aClosingPartGoesToEveryRegionThatTheReachTouchesWhateverItCovers() {
        PartRouter router = new PartRouter(site(NORTH));
        LogEntry entry = part("north-shore", 1).entry();
        ScanParts.partOf(entry).setCoverage(new Coverage(null, 100.0, null, null, null));
        assertThat(router.route(entry).byRegion()).containsOnlyKeys("east", "west");
        assertThat(router.regionsSeenBy("north-shore")).containsExactly("east", "west");
    }

    @Test
    void theReachTouchesTheApronToo() {
        assertThat(new PartRouter(site(TestSites.withReach(NORTH, 699))).regionsSeenBy("north-shore"))
                .containsExactly("west");
        assertThat(new PartRouter(site(TestSites.withReach(NORTH, 711))).regionsSeenBy("north-shore"))
                .containsExactly("east", "west");
    }

    @Test
    void aPartThatConcernsNobodyAndClosesNothingIsNotSent() {
        PartRouter router = new PartRouter(site(NORTH));
        assertThat(router.route(part("north-shore", 1).open().entry()).byRegion()).isEmpty();
        assertThat(router.route(part("north-shore", 1).open().sees(-1000, 3000).entry()).byRegion()).isEmpty();
        assertThat(router.route(part("north-shore", 1).open().sees(-3000, 0).entry()).byRegion())
                .containsOnlyKeys("west");
    }

    @Test
    void aPromiseOrAPartThatCouldNotBeUsedGoesWhereAClosingPartGoes() {
        PartRouter router = new PartRouter(site(NORTH));
        assertThat(router.route(part("north-shore", 1).open().nothingBefore(9).entry()).byRegion())
                .containsOnlyKeys("east", "west");
        PartRouter.Routed unusable = router.route(part("north-shore", 1).open().unusable().sees(-3000, 0).entry());
        assertThat(unusable.byRegion()).containsOnlyKeys("east", "west");
        assertThat(indexes(unusable, "west")).isEmpty();
        assertThat(unusable.byRegion().get("west").getUnusable()).isTrue();
    }

    @Test
    void whatLiesBeyondReachOrOutsideEveryRegionIsCountedAndRejectedOnlyIfTheSiteAsks() {
        LogEntry entry = part("north-shore", 1).sees(0, 0).sees(0, 4000).sees(42_000, 0).entry();
        PartRouter.Routed silent = new PartRouter(site(NORTH)).route(entry);
        assertThat(silent.beyondReach()).isEqualTo(1);
        assertThat(silent.outside()).isEqualTo(1);
        assertThat(silent.reject()).isNull();
        PartRouter.Routed told = new PartRouter(TestSites.rejectingOutside(site(NORTH))).route(entry);
        assertThat(told.reject().getReasons().get(0).getReason()).isEqualTo(RejectReason.OUTSIDE);
        assertThat(told.reject().getReasons().get(0).getIndexes()).containsExactly(1, 2);
        assertThat(told.reject().getWhole()).isFalse();
        assertThat(told.reject().getSentence())
                .contains("has 1 of 3 detections beyond the sensor's reach of 6000.0 m")
                .contains("and 1 more outside every region");
        assertThat(new PartRouter(TestSites.rejectingOutside(site(NORTH))).route(part("north-shore", 1).sees(0, 0)
                .entry())
                .reject()).isNull();
    }

    @Test
    void aMovingSensorMayBeAnywhereAndItsOffsetsCountFromWhereItSaysThatItIs() {
        PartRouter router = new PartRouter(site(BOAT));
        PartRouter.Routed routed = router.route(
                part("pilot-boat", 1).from(TestSites.at(42_000, 1500)).seesOffset(0, -500).seesOffset(0, 1000).entry());
        assertThat(routed.byRegion()).containsOnlyKeys("east", "far", "west");
        assertThat(indexes(routed, "far")).containsExactly(0);
        assertThat(indexes(routed, "west")).isEmpty();
        assertThat(routed.outside()).isEqualTo(1);
    }

    @Test
    void whereAMovingSensorRoamsSaysWhichRegionsWaitForIt() {
        SensorSettings west = TestSites.roaming(BOAT, TestSites.rectangle(-9000, -500, -6000, 500));
        assertThat(new PartRouter(site(west)).regionsSeenBy("pilot-boat")).containsExactly("west");
        SensorSettings across = TestSites.roaming(BOAT, TestSites.rectangle(-9000, -3, 60_000, 3));
        assertThat(new PartRouter(site(across)).regionsSeenBy("pilot-boat")).containsExactly("east", "far", "west");
        LatLon here = TestSites.at(0, 0);
        SensorSettings antipodes = TestSites.roaming(BOAT, new GeoPolygon(
                List.of(
                        new LatLon(-here.latitude(), here.longitude() + 178),
                        new LatLon(-here.latitude(), here.longitude() + 179),
                        new LatLon(-here.latitude() + 1, here.longitude() + 179)),
                List.of()));
        assertThat(new PartRouter(site(antipodes)).regionsSeenBy("pilot-boat")).as("it may pass on its way")
                .containsExactly("east", "far", "west");
        SensorSettings nowhere = TestSites.roaming(BOAT, TestSites.rectangle(20_000, -500, 21_000, 500));
        assertThat(new PartRouter(site(nowhere)).regionsSeenBy("pilot-boat")).isEmpty();
    }

    /** Against the distance between many points of both, of random rectangles and crosses. */
    @Test
    void theDistanceOfPolygonsIsThatOfTheirNearestPoints() {
        long seed = 5;
        Random random = new Random(seed);
        RegionArea area = new RegionArea(TestSites.region("square", TestSites.rectangle(-1000, -1000, 1000, 1000)));
        for (int i = 0; i < 40; i++) {
            double west = -4000 + 8000 * random.nextDouble();
            double south = -4000 + 8000 * random.nextDouble();
            double east = west + 50 + 3000 * random.nextDouble();
            double north = south + 50 + 3000 * random.nextDouble();
            GeoPolygon other = TestSites.rectangle(west, south, east, north);
            double distance = PolygonDistance.between(
                    area.settings().core(), area.core(), other, org.sweeptally.geo.PlaneArea.of(other, area.plane()),
                            area.plane());
            double across = Math.max(0, Math.max(west - 1000, -1000 - east));
            double along = Math.max(0, Math.max(south - 1000, -1000 - north));
            assertThat(distance)
                    .as("seed %s, rectangle %s", seed, i)
                    .isCloseTo(Math.sqrt(across * across + along * along),
                            org.assertj.core.api.Assertions.within(15.0));
        }
    }

    @Test
    void aRegionRoutedToGivesTheSameBytesAsOneThatGetsThePartsWhole() {
        Site one = TestSites.site(1, NORTH, BOAT);
        PartRouter router = new PartRouter(one);
        World world = new World(3);
        List<LogEntry> parts = new ArrayList<>();
        for (SensorSettings sensor : List.of(NORTH, BOAT)) {
            world.scansOf(sensor, 3).forEach(scan -> parts.addAll(scan.parts()));
        }
        Rig whole = Rig.with(one);
        Rig routed = Rig.with(one);
        int dropped = 0;
        for (LogEntry entry : parts) {
            PartRouter.Routed route = router.route(entry);
            dropped += route.outside() + route.beyondReach();
            PartBody body = route.byRegion().get(TestSites.REGION);
            if (body != null) {
                routed.apply(LogEntry.newBuilder().setSender(entry.getSender()).setBody(body).build());
            }
            if (dropped == 0) {
                whole.apply(entry);
            } else {
                break;
            }
        }
        assertThat(dropped).as("everything of this world lies in the region").isZero();
        whole.apply(Entries.endOfInput());
        routed.apply(Entries.endOfInput());
        assertThat(whole.out.tracks).hasSizeGreaterThan(20);
        assertThat(routed.out.publishedBytes()).isEqualTo(whole.out.publishedBytes());
    }

    @Test
    void whatTheProgramMustNotAskIsAnException() {
        PartRouter router = new PartRouter(site(BOAT));
        assertThatThrownBy(() -> router.route(part("nobody", 1).entry()))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("no sensor nobody");
        assertThatThrownBy(() -> router.route(part("pilot-boat", 1).seesOffset(0, 0).entry()))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("does not say where it was");
    }

    @Test
    void theRegionsPlaneTouchesInTheMiddleOfItsCore() {
        RegionArea area = new RegionArea(WEST);
        PlanePoint middle = area.plane().toPlane(TestSites.at(-2000, 0));
        assertThat(Math.abs(middle.eastMetres()) + Math.abs(middle.northMetres())).isLessThan(10);
    }
}
