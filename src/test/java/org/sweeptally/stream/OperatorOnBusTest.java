package org.sweeptally.stream;

import static org.assertj.core.api.Assertions.assertThat;
import static org.junit.jupiter.api.Assumptions.assumeTrue;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.event.Part;
import org.sweeptally.harbour.HarbourRecordings;
import org.sweeptally.site.Site;

/** The operator beside a real broker, with real recordings. */
class OperatorOnBusTest {

    private static final Duration PATIENCE = Duration.ofSeconds(90);
    private static final int[] SCENARIOS = {2, 4, 13, 22};

    @TempDir
    private Path folder;

    private record Recording(int scenario, Site site, List<Part> parts, Published expected) {}

    /** One operator for each, all at once, so that the test waits once. */
    @Test
    void harbourRecordingsInOrderOfArrivalGiveTheRecordsOfADryRun() throws IOException, InterruptedException {
        assumeTrue(Files.isDirectory(HarbourRecordings.folder()),
                "SKIPPED: no harbour recordings in " + HarbourRecordings.folder());
        List<Operator> operators = new ArrayList<>();
        try {
            List<Recording> recordings = new ArrayList<>();
            for (int scenario : SCENARIOS) {
                Recording recording = recording(scenario);
                recordings.add(recording);
                TestBus.createTopics(recording.site, 1, 1);
                TestBus.publish(recording.site, recording.parts);
                Operator operator = new Operator(new OperatorSettings(recording.site, TestBus.names(recording.site),
                        TestBus.clients(), folder.resolve(recording.site.name())), said -> { });
                operators.add(operator);
                operator.start();
            }
            for (Recording recording : recordings) {
                BusReader reader = new BusReader(TestBus.names(recording.site));
                Waiting.until("the counts of scenario " + recording.scenario, PATIENCE,
                        () -> reader.counts() >= recording.expected.counts());
            }
            operators.forEach(Operator::close);
            recordings.forEach(OperatorOnBusTest::assertIsTheDryRun);
        } finally {
            operators.forEach(Operator::close);
        }
    }

    private static Recording recording(int scenario) throws IOException {
        Site site = TestSite.named(
                TestSite.read(Path.of("src/test/resources/harbour/site.yaml")), TestBus.newSiteName());
        List<Part> parts = TestSite.parts(TestSite.lines(new HarbourRecordings(HarbourRecordings.folder())
                .parts(scenario, List.of("radar", "lidar"), HarbourRecordings.Order.ARRIVAL)), site);
        return new Recording(scenario, site, parts, DryRunOf.of(site, parts));
    }

    private static void assertIsTheDryRun(Recording recording) {
        BusReader reader = new BusReader(TestBus.names(recording.site));
        Published published = reader.published();
        assertThat(recording.expected.records()).isPositive();
        assertThat(published.all()).isEqualTo(recording.expected.all());
        assertThat(published.rejects()).isEqualTo(recording.expected.rejects());
        assertThat(reader.fold().all()).isEqualTo(recording.expected.all());
        assertThat(reader.silences()).isZero();
        System.out.println("OperatorOnBusTest: harbour scenario " + recording.scenario + ", " + recording.parts.size()
                + " parts in order of arrival; " + published.records() + " records and " + published.rejects().size()
                + " rejects compared with the dry run and the machine over the log; 0 silences");
    }
}
