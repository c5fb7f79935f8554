package org.sweeptally.stream.attack;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Path;
import java.time.Duration;
import java.util.List;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.Assumptions;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.event.Heartbeat;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/**
 * An operator that is an hour behind, and reads one partition of the detections entirely before the other: two
 * processes have one each, and the second is frozen meanwhile. The sensors make a scan in 2.3 s.
 */
@Tag("long")
class BacklogTest {

    private static final Duration PATIENCE = Duration.ofSeconds(60);
    private static final long HOUR_MICROS = 3_600_000_000L;
    private static final long SEED = 99;
    private static final double SPEED = 10;

    /** So long a frozen process keeps its partitions. */
    private static final String LONG_SESSION = "consumer.session.timeout.ms=60000";

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
            awaitReading(attacked);
            frozen.freeze();
            feeder.hurryTo(Feeder.BEGIN_MICROS + HOUR_MICROS);
            awaitOneReadToItsEnd(attacked, awake);
            TimeUnit.SECONDS.sleep(FROZEN_SECONDS);
            assertThat(read(attacked)).as("partitions read to their end").containsOnlyOnce(true);
            frozen.wake();
            finished(attacked, site, awake, frozen);
        }
    }

    private OperatorProcess started(AttackedSite attacked, Path siteFile, String state) throws InterruptedException {
        OperatorProcess operator = OperatorProcess.start(
                attacked, siteFile, folder.resolve(state), "--kafka", LONG_SESSION);
        Waiting.until("running", PATIENCE, operator::hasRun, operator::text);
        return operator;
    }

    /** Until both partitions have been read from. */
    private static void awaitReading(AttackedSite attacked) throws InterruptedException {
        Waiting.until("both partitions read", PATIENCE,
                () -> offsets(attacked).stream().allMatch(offset -> offset > 0), () -> offsets(attacked).toString());
    }

    private static void awaitOneReadToItsEnd(AttackedSite attacked, OperatorProcess awake)
            throws InterruptedException {
        Waiting.until("one partition read to its end", PATIENCE, () -> read(attacked).contains(true), awake::text);
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

    private static void finished(
            AttackedSite attacked, Site site, OperatorProcess awake, OperatorProcess frozen)
            throws InterruptedException {
        Undisturbed undisturbed = new Undisturbed(List.of(site), attacked.names().detections());
        Waiting.untilComplete(awake, attacked.names().counts(), undisturbed.outputs().number("counts"));
        assertThat(awake.stop()).as(awake.text()).isZero();
        assertThat(frozen.stop()).as(frozen.text()).isZero();
        Committed committed = new Committed(attacked.names());
        PictureCheck.followsFromItsLog(committed, undisturbed);
        PictureCheck.hasLostNoPart(committed, undisturbed);
        PictureCheck.isUndisturbed(committed, undisturbed);
        assertThat(mostWaitingBytes(attacked)).isBetween(100_000L, site.bounds().waitingBytes());
    }

    private static long mostWaitingBytes(AttackedSite attacked) {
        return Bus.committed(attacked.names().heartbeat()).stream()
                .mapToLong(record -> Wire.decode(record.value(), Heartbeat.class).getWaitingBytes())
                .max()
                .orElseThrow();
    }
}
