package org.sweeptally.stream;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.PrintStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.OptionalLong;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.cli.Main;
import org.sweeptally.event.Part;
import org.sweeptally.region.text.PartJson;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.EffectiveSettings;
import org.sweeptally.site.Site;

/** The commands topics, run and publish, against a bus. */
class CommandsTest {

    @TempDir
    private Path folder;

    private final Site site = TestSite.twins();
    private final TopicNames names = TestBus.names(site);
    private Path siteFile;

    private record Run(int exitCode, String out, String err) {}

    @BeforeEach
    void siteFile() throws IOException {
        siteFile = Files.writeString(folder.resolve("site.yaml"), EffectiveSettings.text(site));
    }

    private Run run(byte[] in, String command, String... further) {
        ByteArrayOutputStream out = new ByteArrayOutputStream();
        ByteArrayOutputStream err = new ByteArrayOutputStream();
        List<String> args = new ArrayList<>(List.of(command, "--site", siteFile.toString(), "--bus",
                TestBus.address(), "--detections", names.detections()));
        args.addAll(List.of(further));
        int exitCode = Main.run(args.toArray(String[]::new), new ByteArrayInputStream(in),
                new PrintStream(out, true, StandardCharsets.UTF_8), new PrintStream(err, true, StandardCharsets.UTF_8));
        return new Run(exitCode, out.toString(StandardCharsets.UTF_8), err.toString(StandardCharsets.UTF_8));
    }

    @Test
    void topicsCreatesWhatIsMissingAndIsContentTheSecondTime() {
        Run shown = run(new byte[0], "topics", "--show");
        assertThat(shown.exitCode()).isEqualTo(1);
        assertThat(shown.out()).contains(names.regionLog() + ": missing");
        Run created = run(new byte[0], "topics");
        assertThat(created.exitCode()).as(created.out()).isZero();
        assertThat(created.out()).contains("created");
        Run again = run(new byte[0], "topics");
        assertThat(again.exitCode()).as(again.out()).isZero();
        assertThat(again.out()).doesNotContain("created").contains("right");
        assertThat(run(new byte[0], "topics", "--partitions", "0").exitCode()).isEqualTo(2);
    }

    @Test
    void topicsSaysWhatDiffers() {
        try (Topics topics = new Topics(TestBus.clients())) {
            TopicPlan plan = TopicPlan.of(names, 3).stream()
                    .filter(p -> p.name().equals(names.tracks()))
                    .findFirst()
                    .orElseThrow();
            topics.create(List.of(plan));
        }
        Run run = run(new byte[0], "topics");
        assertThat(run.exitCode()).isEqualTo(1);
        assertThat(run.out()).contains("differs", names.tracks() + ": 3 partitions, should be 2");
    }

    @Test
    void runWithoutTopicsSaysSoAndReturns1() {
        Run run = run(new byte[0], "run", "--state", folder.resolve("state").toString());
        assertThat(run.exitCode()).isEqualTo(1);
        assertThat(run.err()).contains("sweeptally: topic " + names.detections() + " is missing");
    }

    @Test
    void runWithRefusedSettingsReturns2() throws IOException {
        TestBus.createTopics(site, 1, 2);
        RegionPartitions regions = new RegionPartitions(List.of("east-side", "west-side"));
        new SettingsAgreement(TestBus.clients(), names, regions, 2, said -> { }).agree(Revision.of(site));
        Files.writeString(siteFile, EffectiveSettings.text(TestSite.revised(site, 1, OptionalLong.empty(), 0.5)));
        Run run = run(new byte[0], "run", "--state", folder.resolve("state").toString());
        assertThat(run.exitCode()).isEqualTo(2);
        assertThat(run.err()).contains("raise the revision above 1");
    }

    @Test
    void runRefusesWhatIsNotExactlyOnce() {
        Run run = run(new byte[0], "run", "--kafka", "processing.guarantee=at_least_once");
        assertThat(run.exitCode()).isEqualTo(2);
        assertThat(run.err()).contains("only exactly_once_v2 is allowed");
    }

    @Test
    void publishPutsSoundPartsOnTheBusAndNamesTheOtherLines() {
        TestBus.createTopics(site, 1, 2);
        List<Part> parts = TestSite.recording(site).subList(0, 10);
        List<String> lines = new ArrayList<>(parts.stream().map(PartJson::write).toList());
        lines.add(3, "no part");
        Run run = run(TestSite.lines(lines), "publish", "-");
        assertThat(run.exitCode()).isEqualTo(1);
        assertThat(run.out()).isEqualTo("10 parts published to " + names.detections() + ", 1 lines were not\n");
        assertThat(run.err()).startsWith("line 4: not published: ");
        List<Part> onTheBus = new BusReader(names).all(names.detections()).stream()
                .map(record -> Wire.decode(record.value(), Part.class))
                .toList();
        assertThat(onTheBus).isEqualTo(parts);
    }

    @Test
    void publishSaysThatThereIsNoSuchFile() {
        Run run = run(new byte[0], "publish", folder.resolve("nothing.ndjson").toString());
        assertThat(run.exitCode()).isEqualTo(1);
        assertThat(run.err()).contains("nothing.ndjson: there is no such file");
    }
}
