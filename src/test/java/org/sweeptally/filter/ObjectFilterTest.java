package org.sweeptally.filter;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.DataInputStream;
import java.io.DataOutputStream;
import java.io.IOException;
import java.util.List;
import java.util.Optional;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.model.DetectionProfile;
import org.sweeptally.model.StandingStill;
import org.sweeptally.model.NearlyConstantVelocity;
import org.sweeptally.model.MotionProfile;
import org.sweeptally.model.MotionMode;
import org.sweeptally.model.MissRuns;
import org.sweeptally.model.CoordinatedTurn;
import org.sweeptally.model.ClutterLearning;
import org.sweeptally.model.Look;
import org.sweeptally.model.LookCoverage;
import org.sweeptally.model.SensorModel;

class ObjectFilterTest {

    private static final long SECOND = 1_000_000L;

    private final FilterScene scene = new FilterScene(4000, 200, 10_000);
    private final Look look = scene.look(0.9, 30 / 16e6);

    @Test
    void anObjectSeenAFewTimesIsConfirmedUnderTheNameOfItsFirstDetection() {
        ObjectFilter filter = scene.filter(FilterScene.settings());
        for (int k = 0; k < 5; k++) {
            step(filter, k, 100 + 10 * k, 200);
        }
        assertThat(filter.components()).hasSize(1);
        Component component = filter.components().get(0);
        assertThat(component.confirmed()).isTrue();
        assertThat(component.existence()).isGreaterThan(0.99);
        assertThat(component.identity()).isEqualTo(new Identity("mast", 0, 0, 0));
        assertThat(component.firstSeenMicros()).isZero();
        assertThat(component.lastDetectedMicros()).isEqualTo(10 * SECOND);
        assertThat(component.density().east()).isCloseTo(140, within(15.0));
        assertThat(component.used()).singleElement().satisfies(use -> {
            assertThat(use.id()).isEqualTo("d0");
            assertThat(use.probability()).isGreaterThan(0.95);
        });
    }

    @Test
    void anEmptyScanLowersExistenceAndAnAbsentOneOnlyLetsItAge() {
        ObjectFilter filter = seen(5);
        double before = filter.components().get(0).existenceLogOdds();
        filter.predict(2.5);
        double aged = filter.components().get(0).existenceLogOdds();
        filter.update(FilterScene.scan(15 * SECOND, look), 15 * SECOND);
        double missed = filter.components().get(0).existenceLogOdds();

        assertThat(aged).isLessThan(before);
        // A miss multiplies the odds by 1 - P_D: Musicki, Evans and Stankovic 1994 (from memory).
        assertThat(missed - aged).isCloseTo(StrictMath.log(0.1), within(1e-12));
    }

    @Test
    void aLookThatCannotSeeAnObjectLeavesItsExistenceAsItWas() {
        ObjectFilter filter = seen(5);
        FilterScene shortSighted = new FilterScene(4000, 200, 50);
        double before = filter.components().get(0).existenceLogOdds();
        filter.update(FilterScene.scan(11 * SECOND, shortSighted.look(0.9, 1e-6)), 11 * SECOND);
        assertThat(filter.components().get(0).existenceLogOdds()).isEqualTo(before);
    }

    @Test
    void identityOutlivesADipOfExistence() {
        ObjectFilter filter = seen(6);
        Identity identity = filter.components().get(0).identity();
        filter.components().get(0).markBorn();
        long time = 6;
        for (int k = 0; k < 4; k++) {
            filter.predict(2.5);
            ScanResult result = filter.update(FilterScene.scan(time * 2500_000, look), time * 2500_000);
            time++;
            if (!result.recycled().isEmpty()) {
                break;
            }
        }
        assertThat(filter.components()).isEmpty();
        assertThat(filter.counters().get(Counters.Name.COMPONENTS_RECYCLED)).isEqualTo(1);
        for (int k = 0; k < 4; k++, time++) {
            filter.predict(2.5);
            filter.update(FilterScene.scan(time * 2500_000, look, 100 + 10 * time, 200), time * 2500_000);
        }
        assertThat(filter.components()).singleElement().satisfies(component -> {
            assertThat(component.identity()).isEqualTo(identity);
            assertThat(component.bornBefore()).isTrue();
            assertThat(component.confirmed()).isTrue();
        });
    }

    @Test
    void twoObjectsNeverShareAnIdentity() {
        SplittableRandom random = new SplittableRandom(11);
        ObjectFilter filter = scene.filter(FilterScene.settings());
        for (int k = 0; k < 40; k++) {
            double[] places = new double[80];
            for (int i = 0; i < places.length; i++) {
                places[i] = 400 * random.nextDouble() - 200;
            }
            filter.predict(k == 0 ? 0 : 1);
            filter.update(FilterScene.scan(k * SECOND, look, places), k * SECOND);
            assertThat(filter.components()).extracting(Component::identity).doesNotHaveDuplicates();
        }
        assertThat(filter.components()).isNotEmpty();
    }

    @Test
    void anObjectThatSailsOutOfHearingIsLetGo() {
        ObjectFilter filter = scene.filter(FilterScene.settings());
        int gone = 0;
        for (int k = 0; k < 120; k++) {
            double east = 1800 + 10 * k;
            filter.predict(k == 0 ? 0 : 2.5);
            Scan scan = east < 2200
                    ? FilterScene.scan(k * 2500_000L, look, east, 0)
                    : FilterScene.scan(k * 2500_000L, look);
            gone += filter.update(scan, k * 2500_000L).gone().size();
        }
        assertThat(gone).isEqualTo(1);
        assertThat(filter.components()).isEmpty();
    }

    @Test
    void theMeanOfTheCountAndTheUnseenPartIsTheWholeIntensity() {
        ObjectFilter filter = seen(3);
        double sum = filter.components().stream().mapToDouble(Component::existence).sum();
        assertThat(filter.count().mean()).isCloseTo(sum, within(1e-12));
        assertThat(filter.expectedUnseen()).isBetween(0.0, 20.0);
    }

    @Test
    void boundsBiteAndAreCounted() {
        FilterSettings s = FilterScene.settings();
        FilterSettings tight = new FilterSettings(
                s.profiles(), s.birthsPerSquareMetrePerSecond(),
                s.outsidePerSquareMetre(), s.initialPerSquareMetre(), s.confirming(), s.ending(), s.recyclingBelow(),
                s.gateSigmas(), s.unseenCellMetres(), 3, 5, s.exactAssociationSteps(), s.propagationSweeps(), s.leastTermWeight(), s.gatedPairs());
        ObjectFilter filter = scene.filter(tight);
        for (int k = 0; k < 6; k++) {
            double[] places = new double[40];
            for (int i = 0; i < 20; i++) {
                places[2 * i] = -1900 + 190 * i;
                places[2 * i + 1] = 50;
            }
            filter.predict(k == 0 ? 0 : 2.5);
            filter.update(FilterScene.scan(k * 2500_000L, look, places), k * 2500_000L);
        }
        assertThat(filter.components()).hasSize(3);
        assertThat(filter.counters().get(Counters.Name.COMPONENTS_OVER_BOUND)).isPositive();
        assertThat(filter.counters().get(Counters.Name.TERMS_OVER_BOUND)).isPositive();
    }

    @Test
    void aStateWrittenAndReadGoesOnToTheLastBit() throws IOException {
        for (long seed = 1; seed <= 5; seed++) {
            SplittableRandom random = new SplittableRandom(seed);
            ObjectFilter one = scene.filter(FilterScene.settings());
            for (int k = 0; k < 12; k++) {
                ObjectFilter two = read(bytes(one));
                Scan scan = randomScan(random, k);
                for (ObjectFilter filter : new ObjectFilter[] {one, two}) {
                    filter.predict(k == 0 ? 0 : 2.5);
                    filter.update(scan, k * 2500_000L);
                }
                assertThat(bytes(two)).as("seed %s, scan %s", seed, k).isEqualTo(bytes(one));
            }
        }
    }

    /** The same with kinds of objects, runs of misses, and craft so close that their identities are in doubt. */
    @Test
    void aStateOfManyKindsWrittenAndReadGoesOnToTheLastBit() throws IOException {
        FilterSettings s = FilterScene.settings();
        FilterSettings kinds = new FilterSettings(
                manyKinds(), s.birthsPerSquareMetrePerSecond(), s.outsidePerSquareMetre(), s.initialPerSquareMetre(),
                s.confirming(), s.ending(), s.recyclingBelow(), s.gateSigmas(), s.unseenCellMetres(), s.components(),
                s.unseenTerms(), s.exactAssociationSteps(), s.propagationSweeps(), s.leastTermWeight(), s.gatedPairs());
        SensorModel sensor = new SensorModel(
                "mast", 6000, DetectionProfile.constant(0.8), 10, new MissRuns(6, 0.95), ClutterLearning.OFF);
        Look looks = new Look(sensor, new PlanePoint(0, 0), Optional.empty(), scene.core(), scene.apronMetres());
        SplittableRandom random = new SplittableRandom(77);
        ObjectFilter one = scene.filter(kinds);
        boolean inDoubt = false;
        for (int k = 0; k < 25; k++) {
            double[] places = new double[8];
            for (int i = 0; i < places.length; i++) {
                places[i] = 25 * (i % 4 / 2) + 30 * (random.nextDouble() - 0.5);
            }
            Scan scan = FilterScene.scan(k * 2_500_000L, looks, k % 5 == 4 ? new double[] {0, 0} : places);
            ObjectFilter two = ObjectFilter.read(
                    new DataInputStream(new ByteArrayInputStream(bytes(one))), kinds, scene.core(), scene.apronMetres());
            for (ObjectFilter filter : new ObjectFilter[] {one, two}) {
                filter.predict(k == 0 ? 0 : 2.5);
                filter.update(scan, k * 2_500_000L);
            }
            assertThat(bytes(two)).as("scan %s", k).isEqualTo(bytes(one));
            inDoubt |= one.components().stream().anyMatch(c -> c.identityProbability() < 1);
        }
        assertThat(inDoubt).isTrue();
    }

    @Test
    void otherKindsOfObjectsTakeOverWhatIsThere() {
        ObjectFilter filter = seen(5);
        FilterSettings s = FilterScene.settings();
        double expected = filter.count().mean();
        double unseen = filter.expectedUnseen();
        filter.settings(
                new FilterSettings(
                        manyKinds(), s.birthsPerSquareMetrePerSecond(), s.outsidePerSquareMetre(),
                        s.initialPerSquareMetre(), s.confirming(), s.ending(), s.recyclingBelow(), s.gateSigmas(),
                        s.unseenCellMetres(), s.components(), s.unseenTerms(), s.exactAssociationSteps(),
                        s.propagationSweeps(), s.leastTermWeight(), s.gatedPairs()),
                scene.apronMetres());
        assertThat(filter.count().mean()).isCloseTo(expected, within(1e-12));
        assertThat(filter.expectedUnseen()).isCloseTo(unseen, within(1e-9));
        filter.predict(2.5);
        filter.update(FilterScene.scan(20 * SECOND, look, 10, 10), 20 * SECOND);
        assertThat(filter.components()).isNotEmpty();
    }

    private static List<MotionProfile> manyKinds() {
        return List.of(
                new MotionProfile("craft", 0.8, 600, 6, 25, List.of(
                        new MotionMode("straight", new NearlyConstantVelocity(0.05), 0.8, 120),
                        new MotionMode("turning-left", new CoordinatedTurn(9, 0.2), 0.1, 10),
                        new MotionMode("turning-right", new CoordinatedTurn(-9, 0.2), 0.1, 10))),
                new MotionProfile("piles", 0.2, 864_000, 0, 0, List.of(
                        new MotionMode("still", new StandingStill(0.01, 0.1), 1, Double.POSITIVE_INFINITY))));
    }

    /** A radar before its clock is set: a legal time, sixty years before the next scan. */
    @Test
    void aGapOfSixtyYearsIsNoMoreWorkThanADay() {
        ObjectFilter filter = seen(3);
        filter.predict(60 * 365.25 * 86_400);
        filter.update(FilterScene.scan(1_900_000_000_000_000L, look, 10, 10), 1_900_000_000_000_000L);
        assertThat(filter.components()).as("the old one is gone, a new one begins").singleElement().satisfies(
                component -> assertThat(component.firstSeenMicros()).isEqualTo(1_900_000_000_000_000L));
        assertThat(filter.expectedUnseen()).as("0.1 of 20, since one look could have seen them").isBetween(1.9, 2.1);
    }

    @Test
    void aCrowdAtOneSpotIsBoundedAndCounted() {
        FilterSettings s = FilterScene.settings();
        ObjectFilter filter = scene.filter(new FilterSettings(
                s.profiles(), s.birthsPerSquareMetrePerSecond(),
                s.outsidePerSquareMetre(), s.initialPerSquareMetre(), s.confirming(), s.ending(), s.recyclingBelow(),
                s.gateSigmas(), s.unseenCellMetres(), 100, 500, 1000, 50, s.leastTermWeight(), 5000));
        SplittableRandom random = new SplittableRandom(4);
        for (int k = 0; k < 4; k++) {
            double[] places = new double[600];
            for (int i = 0; i < places.length; i++) {
                places[i] = 40 * random.nextDouble();
            }
            filter.predict(k == 0 ? 0 : 2.5);
            filter.update(FilterScene.scan(k * 2_500_000L, look, places), k * 2_500_000L);
        }
        assertThat(filter.counters().get(Counters.Name.PAIRS_OVER_BOUND)).isPositive();
        assertThat(filter.counters().get(Counters.Name.TERMS_OVER_BOUND)).isPositive();
        assertThat(filter.components().size()).isLessThanOrEqualTo(100);
    }

    @Test
    void aSensorOnTheOtherSideOfTheEarthSaysNothing() {
        ObjectFilter filter = seen(5);
        double before = filter.components().get(0).existenceLogOdds();
        SensorModel far = new SensorModel("far", 6000, DetectionProfile.constant(0.9), 10);
        Look nowhere = new Look(
                far, new PlanePoint(Double.NaN, Double.NaN), Optional.empty(), scene.core(), scene.apronMetres());
        filter.update(FilterScene.scan(11 * SECOND, nowhere), 11 * SECOND);
        assertThat(filter.components().get(0).existenceLogOdds()).isEqualTo(before);
    }

    /** Two sectors that meet under an object report it in turn, each turn in one of them: it stays one object. */
    @Test
    void sectorsThatMeetUnderAnObjectDoNotTearIt() {
        SplittableRandom random = new SplittableRandom(6);
        SensorModel radar = new SensorModel("mast", 10_000, DetectionProfile.constant(0.9), 10);
        ObjectFilter filter = scene.filter(FilterScene.settings());
        for (int turn = 0; turn < 40; turn++) {
            filter.predict(turn == 0 ? 0 : 2.5);
            double east = 15 * random.nextGaussian();
            double north = 1000 + 15 * random.nextGaussian();
            for (int half = 0; half < 2; half++) {
                LookCoverage sector = new LookCoverage(
                        0, Double.POSITIVE_INFINITY, half * Math.PI, Math.PI, Optional.empty());
                Look part = new Look(radar, new PlanePoint(0, 0), Optional.of(sector), scene.core(), 200);
                boolean inIt = (east >= 0) == (half == 0);
                long time = turn * 2_500_000L + half;
                filter.update(inIt ? FilterScene.scan(time, part, east, north) : FilterScene.scan(time, part), time);
            }
        }
        assertThat(filter.components().stream().filter(Component::confirmed)).as("seed 6").hasSize(1);
    }

    @Test
    void certainAndImpossibleExistenceMakeNoNaN() {
        assertThat(LogOdds.survive(Double.POSITIVE_INFINITY, 1)).isEqualTo(Double.POSITIVE_INFINITY);
        assertThat(LogOdds.probability(LogOdds.survive(Double.POSITIVE_INFINITY, 0.9))).isCloseTo(0.9, within(1e-15));
        assertThat(LogOdds.survive(Double.NEGATIVE_INFINITY, 0.9)).isEqualTo(Double.NEGATIVE_INFINITY);
        assertThat(LogOdds.ofRatio(0, 0)).isEqualTo(Double.NEGATIVE_INFINITY);
        assertThat(LogOdds.complement(40)).isCloseTo(StrictMath.exp(-40), within(1e-30));
    }

    private Scan randomScan(SplittableRandom random, int k) {
        double[] places = new double[2 * (5 + random.nextInt(20))];
        for (int i = 0; i < places.length; i++) {
            places[i] = (k % 2 == 0 ? 600 : 3600) * (random.nextDouble() - 0.5);
        }
        return FilterScene.scan(k * 2500_000L, look, places);
    }

    private ObjectFilter seen(int scans) {
        ObjectFilter filter = scene.filter(FilterScene.settings());
        for (int k = 0; k < scans; k++) {
            step(filter, k, 100 + 10 * k, 200);
        }
        return filter;
    }

    private void step(ObjectFilter filter, int k, double east, double north) {
        filter.predict(k == 0 ? 0 : 2.5);
        filter.update(FilterScene.scan(k * 2500_000L, look, east, north), k * 2500_000L);
    }

    private static byte[] bytes(ObjectFilter filter) throws IOException {
        ByteArrayOutputStream bytes = new ByteArrayOutputStream();
        filter.write(new DataOutputStream(bytes));
        return bytes.toByteArray();
    }

    private ObjectFilter read(byte[] bytes) throws IOException {
        DataInputStream in = new DataInputStream(new ByteArrayInputStream(bytes));
        return ObjectFilter.read(in, FilterScene.settings(), scene.core(), scene.apronMetres());
    }
}
