package org.sweeptally.stream.attack;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.Comparator;
import java.util.List;
import java.util.SplittableRandom;
import java.util.concurrent.TimeUnit;
import java.util.stream.Stream;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.site.Site;

/** SIGKILL for the operator, again and again, while its sensors send on. */
@Tag("long")
class OperatorKillTest {

    /** World seconds in a second. */
    private static final double SPEED = 10;

    @TempDir
    private Path folder;

    @Test
    void twentyKillsLeaveNoTrace() throws Exception {
        killsLeaveNoTrace(Integer.getInteger("sweeptally.kills", 20), Long.getLong("sweeptally.seed", 4711));
    }

    @Test
    @Tag("long")
    void twoHundredKillsLeaveNoTrace() throws Exception {
        killsLeaveNoTrace(200, Long.getLong("sweeptally.seed", System.nanoTime()));
    }

    private void killsLeaveNoTrace(int kills, long seed) throws Exception {
        System.out.println("operator killed " + kills + " times, seed " + seed);
        AttackedSite attacked = new AttackedSite(folder);
        attacked.createTopics();
        Path first = attacked.first();
        Site site = AttackedSite.read(first);
        Path second;
        try (Feeder feeder = new Feeder(site, attacked.names().detections(), seed, SPEED).start()) {
            SplittableRandom random = new SplittableRandom(seed);
            Tally tally = new Tally();
            killed(attacked, first, kills / 2, random, tally);
            second = attacked.second(feeder.worldMicros() + 150_000_000);
            killed(attacked, second, kills - kills / 2, random, tally);
            feeder.end();
            System.out.println(tally);
            // Without work done again, nothing of the recovery has been tried.
            assertThat(tally.recoveries).isPositive();
            assertThat(tally.again).isPositive();
            assertThat(tally.whileRunning).isGreaterThanOrEqualTo(kills / 3);
        }
        Undisturbed undisturbed = new Undisturbed(
                List.of(site, AttackedSite.read(second)), attacked.names().detections());
        Committed committed = completed(attacked, second, undisturbed);
        PictureCheck.followsFromItsLog(committed, undisturbed);
        PictureCheck.hasLostNoPart(committed, undisturbed);
        PictureCheck.isUndisturbed(committed, undisturbed);
        assertThat(committed.snapshots()).isPositive();
    }

    /** What the kills met. */
    private static final class Tally {
        private int killed;
        private int whileRunning;
        private int recoveries;
        private long again;

        void add(OperatorProcess operator) {
            killed++;
            whileRunning += operator.hasRun() ? 1 : 0;
            for (String line : operator.said()) {
                if (line.contains(" is back: ")) {
                    recoveries++;
                    again += Long.parseLong(line.replaceAll(".*, (\\d+) of \\d+ entries applied again.*", "$1"));
                }
            }
        }

        @Override
        public String toString() {
            return killed + " kills, " + whileRunning + " of them while it ran; " + recoveries
                    + " partitions recovered, " + again + " entries applied again";
        }
    }

    /** Half of the kills come at any moment after the start, the others soon after the operator has come to run. */
    private void killed(AttackedSite attacked, Path siteFile, int kills, SplittableRandom random, Tally tally)
            throws Exception {
        Path state = folder.resolve("state");
        for (int i = 0; i < kills; i++) {
            try (OperatorProcess operator = OperatorProcess.start(attacked, siteFile, state)) {
                if (random.nextBoolean()) {
                    Waiting.until("running", Duration.ofSeconds(60), operator::hasRun, operator::text);
                    TimeUnit.MILLISECONDS.sleep(random.nextInt(3000));
                } else {
                    TimeUnit.MILLISECONDS.sleep(500 + random.nextInt(5500));
                }
                assertThat(operator.isAlive()).as(operator.text()).isTrue();
                operator.kill();
                tally.add(operator);
            }
            if (i % 2 == 1) {
                delete(state);
            }
        }
    }

    private Committed completed(AttackedSite attacked, Path siteFile, Undisturbed undisturbed) throws Exception {
        try (OperatorProcess operator = OperatorProcess.start(attacked, siteFile, folder.resolve("state"))) {
            Waiting.untilComplete(operator, attacked.names().counts(), undisturbed.outputs().number("counts"));
            assertThat(operator.stop()).as(operator.text()).isZero();
        }
        return new Committed(attacked.names());
    }

    private static void delete(Path state) throws IOException {
        if (Files.exists(state)) {
            try (Stream<Path> files = Files.walk(state)) {
                files.sorted(Comparator.reverseOrder()).forEach(file -> file.toFile().delete());
            }
        }
    }
}
