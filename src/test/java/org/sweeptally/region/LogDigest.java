package org.sweeptally.region;

import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.HexFormat;
import java.util.List;
import org.sweeptally.event.LogEntry;
import org.sweeptally.site.BoundSettings;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/**
 * Applies a short invented log and prints the digest of what was published: a program of its own, so that a test can
 * run it under different compilers.
 */
public final class LogDigest {

    private static final SensorSettings NORTH = TestSites.sensor("north-shore", 0, 2500);
    private static final SensorSettings PILOT = TestSites.moving("pilot-boat");

    private LogDigest() {}

    public static void main(String[] args) throws NoSuchAlgorithmException {
        System.out.println(digest());
    }

    /** Twice over: clusters solved exactly, and by belief propagation. */
    static String digest() throws NoSuchAlgorithmException {
        MessageDigest digest = MessageDigest.getInstance("SHA-256");
        for (long exactSteps : new long[] {1_000_000, 1}) {
            Recorded out = run(exactSteps);
            if (out.tracks.size() < 50) {
                throw new IllegalStateException("the log publishes too little to tell anything: " + out.tracks.size());
            }
            digest.update(out.publishedBytes());
        }
        return HexFormat.of().formatHex(digest.digest());
    }

    private static Recorded run(long exactSteps) {
        World world = new World(7);
        List<LogEntry> log = new ArrayList<>();
        for (SensorSettings sensor : List.of(NORTH, PILOT)) {
            world.scansOf(sensor, 2).forEach(scan -> log.addAll(scan.parts()));
        }
        log.sort(Comparator.comparingLong(entry -> ScanParts.partOf(entry).getScanTimeMicros()));
        Site site = TestSites.withBounds(TestSites.site(1, NORTH, PILOT), b -> new BoundSettings(
                b.gateSigmas(), b.components(), b.unseenTerms(), exactSteps, b.propagationSweeps(),
                b.detectionsPerPart(), b.waitingBytes(), b.clockAheadSeconds(), b.snapshotScans(), b.snapshotSeconds(),
                b.leastTermWeight(), b.gatedPairs()));
        Rig rig = Rig.with(site);
        rig.applyAll(log);
        rig.apply(Entries.endOfInput());
        return rig.out;
    }
}
