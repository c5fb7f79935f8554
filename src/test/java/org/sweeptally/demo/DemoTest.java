package org.sweeptally.demo;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.nio.file.Path;
import java.util.List;
import java.util.concurrent.CopyOnWriteArrayList;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.stream.OperatorStoppedException;

class DemoTest {

    private static final double SECONDS = 60;

    @TempDir
    private Path folder;

    private final Said said = new Said();

    /** The second opinion is the region machine itself, which knows no bus, no threads and no clock. */
    @Test
    void theDigestIsThatOfTheMachineWithoutABusAndAnotherSeedHasAnother() throws Exception {
        DemoReport one = demo(11).untilItsEnd(SECONDS, () -> true);
        DemoReport again = demo(11).untilItsEnd(SECONDS, () -> true);
        DemoReport other = demo(12).untilItsEnd(SECONDS, () -> true);
        DemoReport machine = WithoutABus.report(11, Demo.USUAL_BEGIN_MICROS, SECONDS);
        assertThat(one).isEqualTo(again);
        assertThat(one.digest()).isEqualTo(machine.digest()).isNotEqualTo(other.digest());
        assertThat(one.meanOspaMetres()).isEqualTo(machine.meanOspaMetres());
        assertThat(one.silences()).isZero();
        assertThat(folder.resolve("demo")).doesNotExist();
    }

    @Test
    void inRealTimeThePictureFollowsUntilItIsStopped() throws Exception {
        DemoReport report = demo(3).inRealTime(() -> said.times(" shows ") < 3);
        assertThat(report.regions()).allMatch(row -> row.scans() > 0 && row.objectsNow() > 0);
        assertThat(report.worldSeconds()).isBetween(5.0, 120.0);
        assertThat(folder.resolve("demo")).doesNotExist();
    }

    @Test
    void brokenOffItLeavesNothingBehind() {
        assertThatThrownBy(() -> demo(3).untilItsEnd(SECONDS, () -> false))
                .isInstanceOf(OperatorStoppedException.class)
                .hasMessageContaining("stopped before");
        assertThat(folder.resolve("demo")).doesNotExist();
    }

    private Demo demo(long seed) {
        return new Demo(folder.resolve("demo"), seed, said);
    }

    private static final class Said implements Demo.Listener {

        private final List<String> sentences = new CopyOnWriteArrayList<>();

        long times(String words) {
            return sentences.stream().filter(sentence -> sentence.contains(words)).count();
        }

        @Override
        public void says(String sentence) {
            sentences.add(sentence);
        }

        @Override
        public void progress(String text) {}
    }
}
