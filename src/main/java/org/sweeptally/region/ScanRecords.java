package org.sweeptally.region;

import java.util.ArrayList;
import java.util.List;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.sweeptally.event.Birth;
import org.sweeptally.event.Count;
import org.sweeptally.event.DeclaredIdentity;
import org.sweeptally.event.DetectionRef;
import org.sweeptally.event.End;
import org.sweeptally.event.EndWhy;
import org.sweeptally.event.IdentityShare;
import org.sweeptally.event.NumberDistribution;
import org.sweeptally.event.Track;
import org.sweeptally.event.UsedDetection;
import org.sweeptally.filter.Component;
import org.sweeptally.filter.ObjectFilter;
import org.sweeptally.geo.LatLon;
import org.sweeptally.geo.PlanePoint;

/** Makes the records of one scan of one region. */
final class ScanRecords {

    /** The interval that a count states shall hold the number with this probability. */
    private static final double INTERVAL = 0.9;

    private final RegionArea area;
    private final ScanParts scan;
    private final Long number;
    private final long sequence;

    ScanRecords(RegionArea area, ScanParts scan, long sequence) {
        this.area = area;
        this.scan = scan;
        this.number = scan.number();
        this.sequence = sequence;
    }

    static LatLon placeOf(Component component, RegionArea area) {
        return area.plane().toGeodetic(new PlanePoint(component.density().east(), component.density().north()));
    }

    /** @param place where its mean is */
    Birth birth(Component component, LatLon place) {
        return Birth.newBuilder()
                .setObject(component.identity().text())
                .setRegion(area.name())
                .setSequence(sequence)
                .setSensor(scan.sensor())
                .setScanTimeMicros(scan.scanTimeMicros())
                .setScan(number)
                .setTimeMicros(scan.logTimeMicros())
                .setLatitude(place.latitude())
                .setLongitude(place.longitude())
                .setExistence(component.existence())
                .setFirstSeenMicros(component.firstSeenMicros())
                .setAgain(component.bornBefore())
                .build();
    }

    /**
     * @param place      where its mean is
     * @param tellsStill whether the site tells still objects from moving ones
     */
    Track track(Component component, LatLon place, boolean tellsStill) {
        DMatrix4 mean = component.density().mean;
        return Track.newBuilder()
                .setObject(component.identity().text())
                .setRegion(area.name())
                .setSequence(sequence)
                .setSensor(scan.sensor())
                .setScanTimeMicros(scan.scanTimeMicros())
                .setScan(number)
                .setTimeMicros(scan.logTimeMicros())
                .setLatitude(place.latitude())
                .setLongitude(place.longitude())
                .setEastMetres(mean.a1)
                .setNorthMetres(mean.a2)
                .setEastMetresPerSecond(mean.a3)
                .setNorthMetresPerSecond(mean.a4)
                .setCovariance(covariance(component))
                .setExistence(component.existence())
                .setMoving(tellsStill ? component.isMoving() : null)
                .setIdentityProbability(component.identityProbability())
                .setMayBe(mayBe(component))
                .setFirstSeenMicros(component.firstSeenMicros())
                .setLastDetectedMicros(component.lastDetectedMicros())
                .setUsed(used(component))
                .setDeclaredIdentity(declared(component))
                .build();
    }

    private static List<IdentityShare> mayBe(Component component) {
        return component.otherIdentities().stream()
                .map(other -> new IdentityShare(other.identity().text(), other.probability()))
                .toList();
    }

    private static List<Double> covariance(Component component) {
        List<Double> numbers = new ArrayList<>(16);
        DMatrix4x4 covariance = component.density().covariance;
        for (int row = 0; row < 4; row++) {
            for (int column = 0; column < 4; column++) {
                numbers.add(covariance.get(row, column));
            }
        }
        return numbers;
    }

    private List<UsedDetection> used(Component component) {
        List<UsedDetection> used = new ArrayList<>(component.used().size());
        for (Component.Use use : component.used()) {
            DetectionRef ref = new DetectionRef(scan.sensor(), scan.scanTimeMicros(), use.part(), use.index());
            used.add(new UsedDetection(ref, use.id(), use.probability()));
        }
        return used;
    }

    private static DeclaredIdentity declared(Component component) {
        return component.declared() == null
                ? null
                : new DeclaredIdentity(component.declared(), component.declaredProbability());
    }

    End end(Component component, EndWhy why) {
        LatLon place = placeOf(component, area);
        return End.newBuilder()
                .setObject(component.identity().text())
                .setRegion(area.name())
                .setSequence(sequence)
                .setSensor(scan.sensor())
                .setScanTimeMicros(scan.scanTimeMicros())
                .setScan(number)
                .setTimeMicros(scan.logTimeMicros())
                .setWhy(why)
                .setLatitude(place.latitude())
                .setLongitude(place.longitude())
                .setExistence(component.existence())
                .setFirstSeenMicros(component.firstSeenMicros())
                .setLastDetectedMicros(component.lastDetectedMicros())
                .build();
    }

    Count count(ObjectFilter filter, int tracks, int births, int ends, int revision) {
        return Count.newBuilder()
                .setRegion(area.name())
                .setSequence(sequence)
                .setSensor(scan.sensor())
                .setScanTimeMicros(scan.scanTimeMicros())
                .setScan(number)
                .setTimeMicros(scan.logTimeMicros())
                .setAll(distribution(filter.count()))
                .setMoving(filter.countMoving().map(ScanRecords::distribution).orElse(null))
                .setExpectedUnseen(filter.expectedUnseen())
                .setTracks(tracks)
                .setBirths(births)
                .setEnds(ends)
                .setSettingsRevision(revision)
                .setMachineVersion(RegionMachine.MACHINE_VERSION)
                .build();
    }

    private static NumberDistribution distribution(org.sweeptally.filter.count.NumberDistribution number) {
        double[] probabilities = number.band();
        List<Double> band = new ArrayList<>(probabilities.length);
        for (double probability : probabilities) {
            band.add(probability);
        }
        return NumberDistribution.newBuilder()
                .setMean(number.mean())
                .setVariance(number.variance())
                .setBandOffset(number.bandOffset())
                .setBand(band)
                .setBelow(number.below())
                .setAbove(number.above())
                .setLeast(number.least(INTERVAL))
                .setMost(number.most(INTERVAL))
                .setHeld(number.held(INTERVAL))
                .build();
    }
}
