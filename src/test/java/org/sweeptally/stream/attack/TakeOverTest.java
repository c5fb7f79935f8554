package org.sweeptally.stream.attack;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Path;
import java.time.Duration;
import java.util.List;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.site.Site;

/** Several operator processes of one site: one dies, or is replaced, and the others go on. */
@Tag("long")
class TakeOverTest {

    private static final Duration PATIENCE = Duration.ofSeconds(60);
    private static final long SEED = 815;
    private static final double SPEED = 10;

    /** So many more that whoever runs has worked since. */
    private static final int ENOUGH_COUNTS = 40;

    @TempDir
    private Path folder;

    @Test
    void anotherProcessGoesOnWhereOneWasKilled() throws Exception {
        AttackedSite attacked = new AttackedSite(folder);
        attacked.createTopics();
        Path file = attacked.first();
        Site site = AttackedSite.read(file);
        try (Feeder feeder = new Feeder(site, attacked.names().detections(), SEED, SPEED).start();
                OperatorProcess one = started(attacked, file, "one");
                OperatorProcess two = started(attacked, file, "two")) {
            awaitCounts(attacked, two);
            one.kill();
            awaitRecovery(two);
            awaitCounts(attacked, two);
            feeder.end();
            finished(attacked, List.of(site), two);
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
            awaitCounts(attacked, two);
            one.freeze();
            awaitRecovery(two);
            awaitCounts(attacked, two);
            one.wake();
            awaitCounts(attacked, two);
            feeder.end();
            finished(attacked, List.of(site), two, one);
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
            awaitCounts(attacked, two);
            Path second = attacked.second(feeder.worldMicros() + 150_000_000);
            assertThat(one.stop()).as(one.text()).isZero();
            try (OperatorProcess newer = started(attacked, second, "one")) {
                // For now the two hold different files.
                awaitCounts(attacked, newer);
                assertThat(two.isAlive()).as(two.text()).isTrue();
                assertThat(two.stop()).as(two.text()).isZero();
                refusesToBegin(attacked, first, "revision 2 holds already");
                try (OperatorProcess other = started(attacked, second, "two")) {
                    awaitCounts(attacked, other);
                    feeder.end();
                    finished(attacked, List.of(site, AttackedSite.read(second)), newer, other);
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
            awaitCounts(attacked, one);
            refusesToBegin(attacked, attacked.withAnotherRegion(), "region skell-roads");
            awaitCounts(attacked, one);
            feeder.end();
            finished(attacked, List.of(site), one);
        }
    }

    private OperatorProcess started(AttackedSite attacked, Path siteFile, String state) throws InterruptedException {
        OperatorProcess operator = OperatorProcess.start(attacked, siteFile, folder.resolve(state));
        Waiting.until("running", PATIENCE, operator::hasRun, operator::text);
        return operator;
    }

    private static void awaitCounts(AttackedSite attacked, OperatorProcess operator) throws InterruptedException {
        String counts = attacked.names().counts();
        int enough = Bus.committed(counts).size() + ENOUGH_COUNTS;
        Waiting.until("more counts", PATIENCE, () -> Bus.committed(counts).size() >= enough, operator::text);
    }

    /** Until it has got what the other had. */
    private static void awaitRecovery(OperatorProcess operator) throws InterruptedException {
        Waiting.until("taking over", PATIENCE, () -> operator.hasSaid("is back"), operator::text);
    }

    private void refusesToBegin(AttackedSite attacked, Path siteFile, String words) throws InterruptedException {
        try (OperatorProcess refused = OperatorProcess.start(attacked, siteFile, folder.resolve("refused"))) {
            assertThat(refused.exitCode(PATIENCE)).as(refused.text()).isEqualTo(2);
            assertThat(refused.said()).filteredOn(line -> line.startsWith("sweeptally: ")).singleElement()
                    .asString().contains(words);
        }
    }

    private static void finished(AttackedSite attacked, List<Site> revisions, OperatorProcess... operators)
            throws InterruptedException {
        Undisturbed undisturbed = new Undisturbed(revisions, attacked.names().detections());
        Waiting.untilComplete(operators[0], attacked.names().counts(), undisturbed.outputs().number("counts"));
        for (OperatorProcess operator : operators) {
            assertThat(operator.isAlive()).as(operator.text()).isTrue();
            assertThat(operator.stop()).as(operator.text()).isZero();
        }
        Committed committed = new Committed(attacked.names());
        PictureCheck.followsFromItsLog(committed, undisturbed);
        PictureCheck.hasLostNoPart(committed, undisturbed);
        PictureCheck.isUndisturbed(committed, undisturbed);
    }
}
