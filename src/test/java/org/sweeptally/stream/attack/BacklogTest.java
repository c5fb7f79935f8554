package org.sweeptally.stream.attack;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.Assumptions;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.event.Heartbeat;
import org.sweeptally.event.SnapshotHead;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/**
 * An operator that is an hour behind, and reads one partition of the detections entirely before the other: two
 * processes have one each, and the second is frozen meanwhile. The sensors make a scan in 2.3 s.
 */
class BacklogTest {

    private static final long HOUR_MICROS = 3_600_000_000L;
    private static final long SEED = 99;
    private static final double SPEED = 10;

    /** So long a frozen process keeps its partitions. */
    private static final String LONG_SESSION = "consumer.session.timeout.ms=60000";

    private static final long LEAST_WAITING_BYTES = 100_000;

    /** In which the regions take in what has been read. */
    private static final int SETTLED_SECONDS = 3;

    /** Longer than a sensor may be silent (10 s). */
    private static final int FROZEN_SECONDS = 15;

    @TempDir
    private Path folder;

    @Test
    void aBacklogReadUnevenlyGivesTheRecordOfALiveRun() throws Exception {
        boolean signals = !System.getProperty("os.name").startsWith("Windows");
        Assumptions.assumeTrue(signals, "freezing a process needs signals");
        AttackedSite attacked = new AttackedSite(folder);
        attacked.createTopics();
        Path file = attacked.withSlowSensors();
        Site site = AttackedSite.read(file);
        try (Feeder feeder = new Feeder(site, attacked.names().detections(), SEED, SPEED).start();
                OperatorProcess awake = started(attacked, file, "awake");
                OperatorProcess frozen = started(attacked, file, "frozen")) {
            Waiting.until("both partitions read",
                    () -> offsets(attacked).stream().allMatch(offset -> offset > 0), awake::text);
            frozen.freeze();
            feeder.hurryTo(Feeder.BEGIN_MICROS + HOUR_MICROS);
            Waiting.until("one partition read to its end", () -> read(attacked).contains(true), awake::text);
            TimeUnit.SECONDS.sleep(SETTLED_SECONDS);
            List<SnapshotHead> before = snapshots(attacked);
            TimeUnit.SECONDS.sleep(FROZEN_SECONDS);
            Waiting.until("a snapshot of what waits", () -> snapshots(attacked).size() > before.size(), awake::text);
            List<SnapshotHead> meanwhile = new ArrayList<>(snapshots(attacked));
            meanwhile.removeAll(before);
            assertThat(read(attacked)).as("partitions read to their end").containsOnlyOnce(true);
            frozen.wake();
            finished(attacked, site, awake, frozen, meanwhile);
        }
    }

    private OperatorProcess started(AttackedSite attacked, Path siteFile, String state) throws InterruptedException {
        OperatorProcess operator = OperatorProcess.start(
                attacked, siteFile, folder.resolve(state), "--kafka", LONG_SESSION);
        Waiting.untilRunning(operator);
        return operator;
    }

    private static List<Long> offsets(AttackedSite attacked) {
        return Bus.committedOffsets(attacked.names().applicationId(), attacked.names().detections());
    }

    /** Whether each partition has been read to its end. */
    private static List<Boolean> read(AttackedSite attacked) {
        List<Long> offsets = offsets(attacked);
        List<Long> ends = Bus.ends(attacked.names().detections());
        return List.of(offsets.get(0) >= ends.get(0), offsets.get(1) >= ends.get(1));
    }

    private static List<SnapshotHead> snapshots(AttackedSite attacked) {
        return Bus.committed(attacked.names().snapshots()).stream()
                .filter(record -> Committed.isOf("SnapshotHead", record))
                .map(record -> Wire.decode(record.value(), SnapshotHead.class))
                .toList();
    }

    private static void finished(
            AttackedSite attacked,
            Site site,
            OperatorProcess awake,
            OperatorProcess frozen,
            List<SnapshotHead> meanwhile)
            throws InterruptedException {
        // They are of a picture that stood still, and of an hour of scans that waited.
        assertThat(meanwhile).allSatisfy(head -> {
            assertThat(head.getPictureMicros()).isLessThan(Feeder.BEGIN_MICROS + HOUR_MICROS / 2);
            assertThat(head.getLengthBytes()).isGreaterThan(LEAST_WAITING_BYTES);
        });
        Undisturbed undisturbed = new Undisturbed(List.of(site), attacked.names().detections());
        Waiting.untilComplete(awake, attacked.names().counts(), undisturbed.outputs().number("counts"));
        assertThat(awake.stop()).as(awake.text()).isZero();
        assertThat(frozen.stop()).as(frozen.text()).isZero();
        long waitingBytes = mostWaitingBytes(attacked);
        int parts = Bus.committed(attacked.names().detections()).size();
        PictureCheck.holds(attacked, undisturbed, "BacklogTest: an hour behind, " + parts + " parts, 1 in "
                + HOUR_MICROS / 1000 / parts + " ms, one partition read before the other, " + meanwhile.size()
                + " snapshots while " + waitingBytes + " bytes waited");
        assertThat(waitingBytes).isBetween(LEAST_WAITING_BYTES, site.bounds().waitingBytes());
    }

    private static long mostWaitingBytes(AttackedSite attacked) {
        return Bus.committed(attacked.names().heartbeat()).stream()
                .mapToLong(record -> Wire.decode(record.value(), Heartbeat.class).getWaitingBytes())
                .max()
                .orElseThrow();
    }
}
