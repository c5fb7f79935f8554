package org.sweeptally.region;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;
import static org.sweeptally.region.Entries.part;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.Birth;
import org.sweeptally.event.Count;
import org.sweeptally.event.Detection;
import org.sweeptally.event.End;
import org.sweeptally.event.EndWhy;
import org.sweeptally.event.FindingKind;
import org.sweeptally.event.GeodeticFix;
import org.sweeptally.event.Picture;
import org.sweeptally.event.Track;
import org.sweeptally.geo.LatLon;
import org.sweeptally.site.BoundSettings;
import org.sweeptally.site.SensorSettings;

/** What is published of a filter's state, and when. */
class PublishingTest {

    private static final SensorSettings NORTH = TestSites.sensor("north-shore", 0, 0);

    /** An object at a place, seen in scans at each second from one to another. */
    private static void seen(Rig rig, int from, int to, double east, double north) {
        for (int i = from; i <= to; i++) {
            rig.apply(part("north-shore", i).scan(i).sees(east, north));
        }
    }

    @Test
    void anObjectIsBornOnceAndTrackedInEveryScan() {
        Rig rig = Rig.with(NORTH);
        seen(rig, 1, 8, 300, -400);
        assertThat(rig.out.births).hasSize(1);
        Birth birth = rig.out.births.get(0);
        assertThat(birth.getAgain()).isFalse();
        assertThat(birth.getObject()).isEqualTo("north-shore-20310501T040001.000000Z-0-0");
        assertThat(birth.getFirstSeenMicros()).isEqualTo(Entries.micros(1));
        Track last = rig.out.tracks.get(rig.out.tracks.size() - 1);
        assertThat(last.getObject()).isEqualTo(birth.getObject());
        assertThat(last.getRegion()).isEqualTo(TestSites.REGION);
        assertThat(last.getSequence()).isEqualTo(8);
        assertThat(last.getScan()).isEqualTo(8);
        assertThat(last.getTimeMicros()).isEqualTo(Entries.micros(8));
        LatLon place = TestSites.at(300, -400);
        assertThat(last.getLatitude()).isCloseTo(place.latitude(), within(1e-5));
        assertThat(last.getLongitude()).isCloseTo(place.longitude(), within(1e-5));
        assertThat(last.getCovariance()).hasSize(16);
        assertThat(last.getCovariance().get(1)).isEqualTo(last.getCovariance().get(4));
        assertThat(last.getUsed()).hasSize(1);
        assertThat(last.getUsed().get(0).getId()).isEqualTo("d0");
        assertThat(last.getUsed().get(0).getRef().getScanTimeMicros()).isEqualTo(Entries.micros(8));
        assertThat(last.getUsed().get(0).getProbability()).isGreaterThan(0.9);
    }

    @Test
    void theCountSaysHowManyRecordsItsScanHas() {
        Rig rig = Rig.with(NORTH);
        seen(rig, 1, 6, 300, -400);
        seenNothing(rig, 7, 30);
        long tracks = 0;
        long births = 0;
        long ends = 0;
        for (Count count : rig.out.counts) {
            tracks += count.getTracks();
            births += count.getBirths();
            ends += count.getEnds();
            long here = rig.out.tracks.stream().filter(t -> t.getSequence() == count.getSequence()).count();
            assertThat(here).isEqualTo(count.getTracks());
        }
        assertThat(List.of(tracks, births, ends))
                .containsExactly((long) rig.out.tracks.size(), (long) rig.out.births.size(),
                        (long) rig.out.ends.size());
        assertThat(rig.out.counts.stream().map(Count::getSequence).toList()).startsWith(1L, 2L, 3L).hasSize(30);
        Count first = rig.out.counts.get(0);
        assertThat(first.getMachineVersion()).isEqualTo(RegionMachine.MACHINE_VERSION);
        assertThat(first.getSettingsRevision()).isEqualTo(1);
        assertThat(first.getMoving()).isNull();
        assertThat(first.getAll().getHeld()).isGreaterThanOrEqualTo(0.9);
        assertThat(first.getExpectedUnseen()).isPositive();
    }

    private static void seenNothing(Rig rig, int from, int to) {
        for (int i = from; i <= to; i++) {
            rig.apply(part("north-shore", i).scan(i));
        }
    }

    @Test
    void anEmptyScanLowersExistenceAndEnoughOfThemEndTheObject() {
        Rig rig = Rig.with(NORTH);
        seen(rig, 1, 6, 300, -400);
        double before = rig.out.tracks.get(rig.out.tracks.size() - 1).getExistence();
        seenNothing(rig, 7, 7);
        assertThat(rig.out.tracks.get(rig.out.tracks.size() - 1).getExistence()).isLessThan(before);
        seenNothing(rig, 8, 30);
        assertThat(rig.out.ends).hasSize(1);
        End end = rig.out.ends.get(0);
        assertThat(end.getWhy()).isEqualTo(EndWhy.FADED);
        assertThat(end.getExistence()).isLessThan(0.3);
        assertThat(end.getLastDetectedMicros()).isEqualTo(Entries.micros(6));
    }

    @Test
    void whoIsBornAgainKeepsItsIdentityAndTheBirthSaysSo() {
        Rig rig = Rig.with(NORTH);
        seen(rig, 1, 6, 300, -400);
        int second = 6;
        while (rig.out.ends.isEmpty() && second < 60) {
            second++;
            seenNothing(rig, second, second);
        }
        seen(rig, second + 1, second + 8, 300, -400);
        assertThat(rig.out.births).hasSize(2);
        assertThat(rig.out.births.get(1).getObject()).isEqualTo(rig.out.births.get(0).getObject());
        assertThat(rig.out.births.get(1).getAgain()).isTrue();
    }

    @Test
    void whoLeavesTheCoreIsEndedAsLeftAndIsNotPublishedInTheApron() {
        Rig rig = Rig.with(NORTH);
        for (int i = 1; i <= 40; i++) {
            rig.apply(part("north-shore", i).sees(1700 + 12 * i, 0));
        }
        assertThat(rig.out.ends).hasSize(1);
        End end = rig.out.ends.get(0);
        assertThat(end.getWhy()).isEqualTo(EndWhy.LEFT);
        assertThat(end.getExistence()).isGreaterThan(0.9);
        assertThat(rig.out.tracks.stream().map(Track::getEastMetres)).allMatch(east -> east < 2005);
        assertThat(rig.out.tracks.stream().filter(t -> t.getSequence() > end.getSequence())).isEmpty();
    }

    @Test
    void thePictureRepeatsAKeyAtMostOnceASecondAndATombstoneComesAtOnce() {
        Rig rig = Rig.with(NORTH);
        for (int i = 0; i < 40; i++) {
            rig.apply(part("north-shore", 1 + i / 8.0).sees(300, -400));
        }
        String key = TestSites.REGION + "/" + rig.out.births.get(0).getObject();
        List<Long> times = rig.out.pictures.get(key).stream().map(p -> ((Track) p.getContent()).getTimeMicros())
                .toList();
        assertThat(times).hasSizeBetween(3, 5);
        for (int i = 1; i < times.size(); i++) {
            assertThat(times.get(i) - times.get(i - 1)).isGreaterThanOrEqualTo(1_000_000);
        }
        assertThat(rig.out.pictures.get(TestSites.REGION)).hasSize(5);
        seenNothing(rig, 7, 40);
        List<Picture> last = rig.out.pictures.get(key);
        assertThat(last.get(last.size() - 1)).isNull();
    }

    @Test
    void whoIsPushedOutByTheBoundOnComponentsIsEndedForThatAndTheBoundIsAFinding() {
        Rig rig = Rig.with(TestSites.withBounds(TestSites.site(1, NORTH), b -> new BoundSettings(
                b.gateSigmas(), 1, b.unseenTerms(), b.exactAssociationSteps(), b.propagationSweeps(),
                b.detectionsPerPart(), b.waitingBytes(), b.clockAheadSeconds(), b.snapshotScans(), b.snapshotSeconds(),
                b.leastTermWeight(), b.gatedPairs())));
        seen(rig, 1, 6, 300, -400);
        seen(rig, 7, 20, -900, 800);
        assertThat(rig.out.ends).hasSize(1);
        assertThat(rig.out.ends.get(0).getWhy()).isEqualTo(EndWhy.BOUND);
        assertThat(rig.out.births).hasSize(2);
        assertThat(rig.out.findingKinds()).contains(FindingKind.BOUND_REACHED);
        assertThat(rig.out.findings.get(0).getSubject()).isEqualTo("components");
    }

    @Test
    void theDeclaredIdentityIsCarriedThrough() {
        Rig rig = Rig.with(NORTH);
        for (int i = 1; i <= 5; i++) {
            LatLon place = TestSites.at(10, 10);
            rig.apply(part("north-shore", i).sees(Detection.newBuilder()
                    .setIndex(0)
                    .setMeasurement(new GeodeticFix(place.latitude(), place.longitude()))
                    .setDeclaredIdentity("Tern")
                    .build()));
        }
        Track last = rig.out.tracks.get(rig.out.tracks.size() - 1);
        assertThat(last.getDeclaredIdentity().getName()).isEqualTo("Tern");
        assertThat(last.getDeclaredIdentity().getProbability()).isBetween(0.9, 1.0);
    }

    @Test
    void endOfInputClosesWhatIsOpenAndLetsAllTakeEffectInOrder() {
        Rig rig = Rig.with(NORTH, TestSites.sensor("south-shore", 0, -100));
        rig.apply(part("north-shore", 3), part("north-shore", 9).open().sees(0, 0), part("north-shore", 9).part(1)
                .open());
        assertThat(rig.effects()).isEmpty();
        rig.apply(Entries.endOfInput());
        assertThat(rig.effects()).containsExactly(3.0, 9.0);
        rig.apply(part("north-shore", 10));
        assertThat(rig.out.rejects).hasSize(1);
        assertThat(rig.out.rejects.get(0).getSentence()).contains("the input had ended");
    }

    @Test
    void aScanInOnePartAndTheSameInSeveralGiveTheSamePictureButForNames() {
        Rig whole = Rig.with(NORTH);
        Rig split = Rig.with(NORTH);
        for (int i = 1; i <= 12; i++) {
            Entries.PartMaker all = part("north-shore", i).scan(i);
            Entries.PartMaker first = part("north-shore", i).scan(i).part(0).open();
            Entries.PartMaker second = part("north-shore", i).scan(i).part(1);
            for (int k = 0; k < 6; k++) {
                LatLon place = TestSites.at(400 * k - 1000 + 5 * i, 60 * k + 3 * i * (k % 2 == 0 ? 1 : -1));
                all.sees(k, place);
                (k < 3 ? first : second).sees(k, place);
            }
            whole.apply(all);
            // Within a scan the order of arrival does not matter, but that the closing part is the last.
            split.apply(first, second);
        }
        assertThat(split.out.tracks).hasSameSizeAs(whole.out.tracks).hasSizeGreaterThan(50);
        for (int i = 0; i < whole.out.counts.size(); i++) {
            assertThat(split.out.counts.get(i)).isEqualTo(whole.out.counts.get(i));
        }
        for (int i = 0; i < whole.out.tracks.size(); i++) {
            Track a = whole.out.tracks.get(i);
            Track b = split.out.tracks.get(i);
            assertThat(b.getObject().replace("Z-1-", "Z-0-")).isEqualTo(a.getObject());
            assertThat(b.getCovariance()).isEqualTo(a.getCovariance());
            assertThat(b.getEastMetres()).isEqualTo(a.getEastMetres());
            assertThat(b.getExistence()).isEqualTo(a.getExistence());
        }
    }
}
