package org.sweeptally.stream.attack;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Path;
import java.util.List;
import java.util.SplittableRandom;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.site.Site;

/** Several operator processes of one site: one dies, or is replaced, and the others go on. */
class TakeOverTest {

    private static final long SEED = 815;
    private static final double SPEED = 5;

    /** So far ahead of their time settings are given: 40 s for a process to begin and write them. */
    private static final long AHEAD_MICROS = 200_000_000;

    private static final int KILLS = 3;

    /** So many more that whoever runs has worked since. */
    private static final int ENOUGH_COUNTS = 25;

    @TempDir
    private Path folder;

    @Test
    void twoProcessesTakeOverFromEachOtherAsOneAndThenTheOtherIsKilled() throws Exception {
        AttackedSite attacked = new AttackedSite(folder);
        attacked.createTopics();
        Path file = attacked.first();
        Site site = AttackedSite.read(file);
        SplittableRandom random = new SplittableRandom(SEED);
        OperatorProcess[] two = new OperatorProcess[2];
        try (Feeder feeder = new Feeder(site, attacked.names().detections(), SEED, SPEED).start()) {
            two[0] = started(attacked, file, "0");
            two[1] = started(attacked, file, "1");
            Waiting.untilMore(two[0], attacked.names().counts(), ENOUGH_COUNTS);
            for (int kill = 0; kill < KILLS; kill++) {
                int killed = kill % 2;
                OperatorProcess other = two[1 - killed];
                int recoveries = other.recoveries();
                TimeUnit.MILLISECONDS.sleep(random.nextInt(1500));
                two[killed].kill();
                Waiting.until("taking over", () -> other.recoveries() > recoveries, other::text);
                Waiting.untilMore(other, attacked.names().counts(), ENOUGH_COUNTS);
                two[killed] = started(attacked, file, Integer.toString(killed));
            }
            feeder.end();
            finished("two processes, seed " + SEED + ", " + KILLS + " kills", attacked, List.of(site), two);
        } finally {
            for (OperatorProcess operator : two) {
                if (operator != null) {
                    operator.close();
                }
            }
        }
    }

    @Test
    void aProcessThatWakesAfterOthersHaveTakenItsPlaceDoesNoHarm() throws Exception {
        AttackedSite attacked = new AttackedSite(folder);
        attacked.createTopics();
        Path file = attacked.first();
        Site site = AttackedSite.read(file);
        try (Feeder feeder = new Feeder(site, attacked.names().detections(), SEED, SPEED).start();
                OperatorProcess one = started(attacked, file, "one");
                OperatorProcess two = started(attacked, file, "two")) {
            Waiting.untilMore(two, attacked.names().counts(), ENOUGH_COUNTS);
            int recoveries = two.recoveries();
            one.freeze();
            Waiting.until("taking over", () -> two.recoveries() > recoveries, two::text);
            Waiting.untilMore(two, attacked.names().counts(), ENOUGH_COUNTS);
            one.wake();
            Waiting.untilMore(two, attacked.names().counts(), ENOUGH_COUNTS);
            feeder.end();
            finished("one of two frozen, taken over from, and woken", attacked, List.of(site), two, one);
        }
    }

    @Test
    void aRollingRestartChangesTheSettingsInMidStream() throws Exception {
        AttackedSite attacked = new AttackedSite(folder);
        attacked.createTopics();
        Path first = attacked.first();
        Site site = AttackedSite.read(first);
        try (Feeder feeder = new Feeder(site, attacked.names().detections(), SEED, SPEED).start();
                OperatorProcess one = started(attacked, first, "one");
                OperatorProcess two = started(attacked, first, "two")) {
            Waiting.untilMore(two, attacked.names().counts(), ENOUGH_COUNTS);
            long fromMicros = feeder.worldMicros() + AHEAD_MICROS;
            Path second = attacked.second(fromMicros);
            assertThat(one.stop()).as(one.text()).isZero();
            try (OperatorProcess newer = started(attacked, second, "one")) {
                // For now the two hold different files.
                Waiting.untilMore(newer, attacked.names().counts(), ENOUGH_COUNTS);
                assertThat(two.isAlive()).as(two.text()).isTrue();
                assertThat(two.stop()).as(two.text()).isZero();
                refusesToBegin(attacked, first, "revision 2 holds already");
                try (OperatorProcess other = started(attacked, second, "two")) {
                    Waiting.untilMore(other, attacked.names().counts(), ENOUGH_COUNTS);
                    feeder.hurryTo(fromMicros + 60_000_000);
                    finished("rolling restart with two site files", attacked,
                            List.of(site, AttackedSite.read(second)), newer, other);
                    PictureCheck.changesSettingsAt(attacked, fromMicros);
                }
            }
        }
    }

    @Test
    void aProcessWithOtherRegionsIsRefusedAndDisturbsNobody() throws Exception {
        AttackedSite attacked = new AttackedSite(folder);
        attacked.createTopics();
        Path file = attacked.first();
        Site site = AttackedSite.read(file);
        try (Feeder feeder = new Feeder(site, attacked.names().detections(), SEED, SPEED).start();
                OperatorProcess one = started(attacked, file, "one")) {
            Waiting.untilMore(one, attacked.names().counts(), ENOUGH_COUNTS);
            refusesToBegin(attacked, attacked.withAnotherRegion(), "region skell-roads");
            Waiting.untilMore(one, attacked.names().counts(), ENOUGH_COUNTS);
            feeder.end();
            finished("a process with another region refused", attacked, List.of(site), one);
        }
    }

    private OperatorProcess started(AttackedSite attacked, Path siteFile, String state) throws InterruptedException {
        OperatorProcess operator = OperatorProcess.start(attacked, siteFile, folder.resolve(state));
        Waiting.untilRunning(operator);
        return operator;
    }

    private void refusesToBegin(AttackedSite attacked, Path siteFile, String words) throws InterruptedException {
        try (OperatorProcess refused = OperatorProcess.start(attacked, siteFile, folder.resolve("refused"))) {
            assertThat(refused.exitCode(Waiting.PATIENCE)).as(refused.text()).isEqualTo(2);
            assertThat(refused.said()).filteredOn(line -> line.startsWith("sweeptally: ")).singleElement()
                    .asString().contains(words);
        }
    }

    private static void finished(
            String what, AttackedSite attacked, List<Site> revisions, OperatorProcess... operators)
            throws InterruptedException {
        Undisturbed undisturbed = new Undisturbed(revisions, attacked.names().detections());
        Waiting.untilComplete(operators[0], attacked.names().counts(), undisturbed.outputs().number("counts"));
        for (OperatorProcess operator : operators) {
            assertThat(operator.isAlive()).as(operator.text()).isTrue();
            assertThat(operator.stop()).as(operator.text()).isZero();
        }
        PictureCheck.holds(attacked, undisturbed, "TakeOverTest: " + what);
    }
}
