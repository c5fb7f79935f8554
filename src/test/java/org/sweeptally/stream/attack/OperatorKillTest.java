package org.sweeptally.stream.attack;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Comparator;
import java.util.List;
import java.util.SplittableRandom;
import java.util.concurrent.TimeUnit;
import java.util.stream.Stream;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.site.Site;

/**
 * SIGKILL for the operator, again and again, while its sensors send on, its state is deleted and its settings change.
 * The system properties {@code sweeptally.seed} and, for the long one, {@code sweeptally.kills} choose others.
 */
class OperatorKillTest {

    /** World seconds in a second. */
    private static final double SPEED = 5;

    /** So far ahead of their time settings are given: 40 s for a process to begin, be killed, and write them. */
    private static final long AHEAD_MICROS = 200_000_000;

    @TempDir
    private Path folder;

    @Test
    void twentyKillsLeaveNoTrace() throws Exception {
        killsLeaveNoTrace(20, Long.getLong("sweeptally.seed", 4711));
    }

    @Test
    @Tag("long")
    void twoHundredKillsLeaveNoTrace() throws Exception {
        killsLeaveNoTrace(Integer.getInteger("sweeptally.kills", 200),
                Long.getLong("sweeptally.seed", System.nanoTime()));
    }

    private void killsLeaveNoTrace(int kills, long seed) throws Exception {
        System.out.println("OperatorKillTest: " + kills + " kills, seed " + seed);
        AttackedSite attacked = new AttackedSite(folder);
        attacked.createTopics();
        Path first = attacked.first();
        Site site = AttackedSite.read(first);
        Tally tally = new Tally();
        Path second;
        long fromMicros;
        try (Feeder feeder = new Feeder(site, attacked.names().detections(), seed, SPEED).start()) {
            SplittableRandom random = new SplittableRandom(seed);
            killed(attacked, first, kills / 2, random, tally);
            fromMicros = feeder.worldMicros() + AHEAD_MICROS;
            second = attacked.second(fromMicros);
            killed(attacked, second, kills - kills / 2, random, tally);
            feeder.passes(fromMicros + 30_000_000);
            feeder.end();
        }
        Undisturbed undisturbed = new Undisturbed(
                List.of(site, AttackedSite.read(second)), attacked.names().detections());
        try (OperatorProcess last = OperatorProcess.start(attacked, second, folder.resolve("state"))) {
            Waiting.untilComplete(last, attacked.names().counts(), undisturbed.outputs().number("counts"));
            assertThat(last.stop()).as(last.text()).isZero();
        }
        Committed committed = PictureCheck.holds(
                attacked, undisturbed, "OperatorKillTest, seed " + seed + ": " + tally);
        PictureCheck.changesSettingsAt(attacked, fromMicros);
        // Without work done again, nothing of the recovery has been tried.
        assertThat(tally.again).isPositive();
        assertThat(tally.whileRunning).isGreaterThanOrEqualTo(kills / 3);
        assertThat(committed.snapshots()).isPositive();
    }

    /** What the kills met. */
    private static final class Tally {
        private int killed;
        private int whileRunning;
        private int statesDeleted;
        private int recoveries;
        private long again;

        void add(OperatorProcess operator) {
            killed++;
            whileRunning += operator.hasRun() ? 1 : 0;
            recoveries += operator.recoveries();
            again += operator.entriesAgain();
        }

        @Override
        public String toString() {
            return killed + " kills, " + whileRunning + " of them while it ran, " + statesDeleted
                    + " times with its state deleted; " + recoveries + " partitions recovered, " + again
                    + " entries applied again";
        }
    }

    /** Half of the kills come at any moment after the start, the others soon after the operator has come to run. */
    private void killed(AttackedSite attacked, Path siteFile, int kills, SplittableRandom random, Tally tally)
            throws Exception {
        Path state = folder.resolve("state");
        for (int i = 0; i < kills; i++) {
            try (OperatorProcess operator = OperatorProcess.start(attacked, siteFile, state)) {
                if (random.nextBoolean()) {
                    Waiting.untilRunning(operator);
                    TimeUnit.MILLISECONDS.sleep(random.nextInt(2000));
                } else {
                    TimeUnit.MILLISECONDS.sleep(300 + random.nextInt(4700));
                }
                assertThat(operator.isAlive()).as(operator.text()).isTrue();
                operator.kill();
                tally.add(operator);
            }
            if (i % 2 == 1) {
                delete(state);
                tally.statesDeleted++;
            }
        }
    }

    /** The control: it shows that the checks above can fail, and that they do where only the tail is forgotten. */
    @Test
    void anOperatorThatForgetsTheTailOfItsLogIsFoundOut() throws Exception {
        AttackedSite attacked = new AttackedSite(folder);
        attacked.createTopics();
        Path file = attacked.first();
        Site site = AttackedSite.read(file);
        Path state = folder.resolve("state");
        try (Feeder feeder = new Feeder(site, attacked.names().detections(), 12, SPEED).start()) {
            try (OperatorProcess sound = OperatorProcess.start(attacked, file, state);
                    RecordCount snapshots = RecordCount.ofAll(attacked.names().snapshots())) {
                // Snapshots of both regions, so that not all is lost, and then some scans, so that something is.
                Waiting.until("snapshots", () -> snapshots.now() >= 8, sound::text);
                Waiting.untilMore(sound, attacked.names().counts(), 8);
                sound.kill();
            }
            try (OperatorProcess forgetful = OperatorProcess.startForgetful(attacked, file, state)) {
                Waiting.until("recovery", () -> forgetful.recoveries() >= AttackedSite.LOG_PARTITIONS, forgetful::text);
                assertThat(forgetful.entriesAgain()).as(forgetful.text()).isPositive();
                Waiting.untilMore(forgetful, attacked.names().counts(), 40);
                feeder.end();
                assertThat(forgetful.stop()).as(forgetful.text()).isZero();
            }
        }
        Committed committed = new Committed(attacked.names());
        Undisturbed undisturbed = new Undisturbed(List.of(site), attacked.names().detections());
        assertThatThrownBy(() -> PictureCheck.followsFromItsLog(committed)).isInstanceOf(AssertionError.class);
        assertThatThrownBy(() -> PictureCheck.isUndisturbed(committed, undisturbed)).isInstanceOf(AssertionError.class);
        assertThat(committed.published().differenceFrom(committed.folded(), "tracks")).isPresent();
        System.out.println("OperatorKillTest, control: 1 kill, the tail forgotten; " + PictureCheck.compared(committed)
                + ": found out, " + committed.wrongSnapshots().size() + " snapshots wrong");
    }

    private static void delete(Path state) throws IOException {
        if (Files.exists(state)) {
            try (Stream<Path> files = Files.walk(state)) {
                files.sorted(Comparator.reverseOrder()).forEach(file -> file.toFile().delete());
            }
        }
    }
}
