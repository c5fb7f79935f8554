package org.sweeptally.stream;

import static org.assertj.core.api.Assertions.assertThat;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.PrintStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.OptionalLong;
import java.util.SplittableRandom;
import java.util.concurrent.ExecutionException;
import java.util.function.Function;
import java.util.stream.Collectors;
import java.util.stream.Stream;
import org.apache.kafka.clients.admin.Admin;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.cli.Main;
import org.sweeptally.event.Part;
import org.sweeptally.event.Track;
import org.sweeptally.region.RegionMachine;
import org.sweeptally.region.intake.Times;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.replay.BusSource;
import org.sweeptally.replay.Difference;
import org.sweeptally.replay.RecordKind;
import org.sweeptally.replay.RegionReport;
import org.sweeptally.replay.Replay;
import org.sweeptally.replay.Span;
import org.sweeptally.site.EffectiveSettings;
import org.sweeptally.site.Site;
import org.sweeptally.site.SiteReader;
import org.sweeptally.site.SiteResult;

/**
 * What an operator published is made anew from a bus: an operator that was killed and came back, whose settings changed
 * meanwhile, and that rejected some of what came.
 */
class ReplayOnBusTest {

    private static final Duration PATIENCE = Duration.ofSeconds(90);
    private static final String REGION = "east-side";

    @TempDir
    private static Path folder;

    private static Site site;
    private static TopicNames names;
    private static Path siteFile;
    private static Published published;
    private static List<Part> parts;

    /** After the middle of the recording of ninety seconds, which two revisions of the settings share. */
    private static final long FROM = Times.parse("2031-05-01T04:00:35Z").orElseThrow();

    private static final long TO = Times.parse("2031-05-01T04:01:10Z").orElseThrow();

    @BeforeAll
    static void recordAnOperatorThatIsKilled() throws IOException, InterruptedException {
        site = TestSite.withSnapshotScans(TestSite.twins(), 40);
        names = TestBus.names(site);
        TestBus.createTopics(site, 1, 2);
        parts = new ArrayList<>(TestSite.recording(site));
        parts.add(70, late(parts.get(10)));
        parts.add(90, late(parts.get(20)));
        int half = parts.size() / 2;
        BusReader reader = new BusReader(names);
        TestBus.publish(site, parts.subList(0, half));
        try (OperatorProcess operator = OperatorProcess.start(site, folder, "killed")) {
            Waiting.until("counts of the first half", PATIENCE, () -> reader.counts() > half / 2);
            operator.kill();
        }
        Site revised = TestSite.revised(site, 2, OptionalLong.empty(), 0.5);
        siteFile = Files.writeString(folder.resolve("site.yaml"), EffectiveSettings.text(revised));
        try (OperatorProcess operator = OperatorProcess.start(revised, folder, "killed")) {
            // The second half must meet the second revision, or the stretch would have one only.
            Waiting.until("both revisions in both logs", PATIENCE, () -> reader.all(names.settings()).size() == 2);
            TestBus.publish(site, parts.subList(half, parts.size()));
            long expected = DryRunOf.of(site, parts).counts();
            Waiting.until("all counts", PATIENCE, () -> reader.counts() >= expected);
            assertThat(operator.stop()).as(operator.said()).isZero();
        }
        published = reader.published();
    }

    /** The same scan with another number of its part and other detections: its scan is closed. */
    private static Part late(Part part) {
        Part late = TestSite.at(part, part.getScanTimeMicros());
        late.setPart(7);
        return late;
    }

    private record Run(int exitCode, String out, String err) {}

    private static Run replay(String... further) {
        return onBus("replay", further);
    }

    private static Run onBus(String command, String... further) {
        List<String> args = new ArrayList<>(List.of(command, "--site", siteFile.toString(), "--bus",
                TestBus.address(), "--detections", names.detections()));
        args.addAll(List.of(further));
        return run(args);
    }

    private static Run run(List<String> args) {
        ByteArrayOutputStream out = new ByteArrayOutputStream();
        ByteArrayOutputStream err = new ByteArrayOutputStream();
        int exitCode = Main.run(args.toArray(String[]::new), new ByteArrayInputStream(new byte[0]),
                new PrintStream(out, true, StandardCharsets.UTF_8), new PrintStream(err, true, StandardCharsets.UTF_8));
        return new Run(exitCode, out.toString(StandardCharsets.UTF_8), err.toString(StandardCharsets.UTF_8));
    }

    @Test
    void fromTheMiddleOfARecordingEveryRecordIsReproducedBitForBit() {
        Run run = replay("--from", Times.text(FROM), "--to", Times.text(TO));
        System.out.println("ReplayOnBusTest: " + run.out);
        assertThat(run.exitCode).as(run.out + run.err).isZero();
        assertThat(run.out)
                // When a region takes its snapshots depends on the clock; one of the two has one before the stretch.
                .containsPattern("(east|west)-side: from snapshot \\d+ \\(picture of 2031-05-01T04:00:")
                .contains("settings revision 1, machine version " + RegionMachine.MACHINE_VERSION,
                        "settings revision 2, machine version " + RegionMachine.MACHINE_VERSION)
                .containsPattern("\nreproduced [\\d,]+ of [\\d,]+ records bit for bit\n");
    }

    @Test
    void theWholeRecordIsReproducedFromTheBeginningOfTheLog() {
        Run run = replay();
        assertThat(run.exitCode).as(run.out + run.err).isZero();
        long all = published.records() + published.rejects().size();
        assertThat(published.rejects()).isNotEmpty();
        assertThat(run.out).contains("from the beginning of its log")
                .contains(String.format("reproduced %,d of %,d records bit for bit", all, all));
    }

    @Test
    void oneRegionAloneIsReproduced() {
        Run run = replay("--region", REGION);
        assertThat(run.exitCode).isZero();
        assertThat(run.out).contains("east-side: ").doesNotContain("west-side");
    }

    @Test
    void aSpanWithoutScansReproducesNothing() {
        Run run = replay("--from", "2031-05-02T00:00:00Z");
        assertThat(run.exitCode).as(run.out + run.err).isZero();
        assertThat(run.out).contains("no scan took effect in this span").contains("reproduced 0 of 0 records");
    }

    @Test
    void whatCannotBeFollowedIsRefused() {
        assertThat(replay("--from", "yesterday").exitCode).isEqualTo(2);
        assertThat(replay("--from", "2031-05-01T05:00:00Z", "--to", "2031-05-01T04:00:00Z").err)
                .contains("is not before --to");
        assertThat(replay("--region", "north-side").err)
                .contains("--region north-side: the site's regions are [east-side, west-side]");
    }

    private static RegionReport tampered(RecordKind kind, int nth, Function<byte[], List<byte[]>> change) {
        return tampered(REGION, new Span(FROM, TO), kind, nth, change);
    }

    private static RegionReport tampered(
            String region, Span span, RecordKind kind, int nth, Function<byte[], List<byte[]>> change) {
        try (BusSource bus = new BusSource(TestBus.clients(), names, List.of("east-side", "west-side"))) {
            return new Replay(new TamperedSource(bus, kind, nth, change), (at, entries, share) -> { })
                    .region(region, span);
        }
    }

    @Test
    void aTrackChangedInOneFieldIsFoundAndNamed() {
        RegionReport report = tampered(RecordKind.TRACKS, 40, value -> {
            Track track = Wire.decode(value, Track.class);
            track.setExistence(Math.nextDown(track.getExistence()));
            return List.of(Wire.encode(track));
        });
        Difference difference = report.difference().orElseThrow();
        System.out.println("ReplayOnBusTest: " + difference.sentence());
        assertThat(difference.field()).isEqualTo("existence");
        assertThat(difference.record()).startsWith("the track of ").contains("in region east-side, sequence ");
        assertThat(difference.sentence()).containsPattern("offset \\d+ of partition 0 of " + names.tracks())
                .contains("existence was published as 0.");
        assertThat(report.reproduced().get(RecordKind.TRACKS)).isEqualTo(39);
    }

    @Test
    void everyKindOfRecordTakenOutPutInTwiceOrBrokenIsFound() {
        for (RecordKind kind : RecordKind.values()) {
            assertIsFound(kind, "taken out", value -> List.of());
            assertIsFound(kind, "broken", value -> List.of(new byte[] {1, 2, 3}));
            if (kind != RecordKind.REJECTS) { // what stands before the first reject may have been made before
                assertIsFound(kind, "put in twice", value -> List.of(value, value));
            }
        }
    }

    private static void assertIsFound(RecordKind kind, String how, Function<byte[], List<byte[]>> change) {
        String region = kind == RecordKind.ENDS ? REGION : "west-side";
        assertThat(tampered(region, Span.ALL, kind, 1, change).difference())
                .as("%s: the first %s", kind, how)
                .hasValueSatisfying(difference -> assertThat(difference.kind()).isEqualTo(kind));
    }

    @Test
    void anArchiveGivesTheSameAnswerWithoutABus() throws IOException {
        Path archive = folder.resolve("archive");
        Run made = onBus("archive", "--from", Times.text(FROM), "--to", Times.text(TO), "--out", archive.toString());
        assertThat(made.exitCode).as(made.out + made.err).isZero();
        String digest = made.out.strip().substring(made.out.strip().lastIndexOf('\n') + 1);
        assertThat(digest).matches("[0-9a-f]{64}");
        Run bus = replay("--from", Times.text(FROM), "--to", Times.text(TO));
        Run again = run(List.of("replay", "--archive", archive.toString(), "--digest", digest));
        assertThat(again.exitCode).as(again.out + again.err).isZero();
        assertThat(again.out).startsWith("archive of site " + names.site() + ", from 2031-05-01T04:00:35.000000Z to ");
        assertThat(again.out).endsWith(bus.out);
        Run narrower = run(List.of("replay", "--archive", archive.toString(), "--from", "2031-05-01T04:00:50Z",
                "--to", "2031-05-01T04:01:00Z"));
        assertThat(narrower.exitCode).as(narrower.out + narrower.err).isZero();
        assertThat(run(List.of("replay", "--archive", archive.toString(), "--from", "2031-05-01T04:00:00Z")).err)
                .contains("the archive holds what is from 2031-05-01T04:00:35.000000Z");
        Run other = run(List.of("replay", "--archive", archive.toString(), "--digest", "0".repeat(64)));
        assertThat(other.exitCode).isEqualTo(1);
        assertThat(other.err).contains("the archive was altered, or is another: manifest.json has SHA-256 " + digest);
        assertThat(onBus("archive", "--out", archive.toString()).err).contains("is not empty");
        assertEveryFlippedBitIsFound(archive);
    }

    private static void assertEveryFlippedBitIsFound(Path archive) throws IOException {
        List<Path> files;
        try (Stream<Path> all = Files.walk(archive)) {
            files = all.filter(Files::isRegularFile).sorted().toList();
        }
        long seed = 6;
        SplittableRandom random = new SplittableRandom(seed);
        int flips = 0;
        for (Path file : files) {
            byte[] bytes = Files.readAllBytes(file);
            for (int i = 0; i < 5; i++) {
                int bit = random.nextInt(8 * bytes.length);
                byte[] flipped = bytes.clone();
                flipped[bit / 8] ^= (byte) (1 << (bit % 8));
                Files.write(file, flipped);
                Run run = run(List.of("replay", "--archive", archive.toString()));
                String name = archive.relativize(file).toString();
                assertThat(run.exitCode).as("bit %d of %s, seed %d", bit, name, seed).isEqualTo(1);
                assertThat(run.err).contains("the archive was altered").contains(name);
                flips++;
            }
            Files.write(file, bytes);
        }
        Path gone = files.get(3);
        byte[] bytes = Files.readAllBytes(gone);
        Files.delete(gone);
        assertThat(run(List.of("replay", "--archive", archive.toString())).err)
                .contains(archive.relativize(gone) + " is missing");
        Files.write(gone, bytes);
        Path added = Files.writeString(archive.resolve("note.txt"), "by somebody");
        assertThat(run(List.of("replay", "--archive", archive.toString())).err)
                .contains("note.txt was not there when it was written");
        Files.delete(added);
        assertThat(run(List.of("replay", "--archive", archive.toString())).exitCode).isZero();
        System.out.println("ReplayOnBusTest: " + flips + " single bits flipped in " + files.size()
                + " files of an archive, seed " + seed + ": each found, its file named");
    }

    @Test
    void anObjectIsExplainedScanByScanInTheWordsOfAPerson() throws IOException {
        String object = "north-shore-20310501T040000.000000Z-0-11";
        Path out = folder.resolve("explained");
        Run run = onBus("replay", "--from", Times.text(FROM), "--to", Times.text(TO), "--explain", object, "--out",
                out.toString());
        assertThat(run.exitCode).as(run.out + run.err).isZero();
        // Rejects have no log time: those since the snapshot count, and when that was taken depends on the clock.
        assertThat(run.out).containsPattern("reproduced (3\\d\\d) of \\1 records bit for bit");
        String text = Files.readString(out.resolve("east-side").resolve(object + ".txt"));
        System.out.println("ReplayOnBusTest: " + text.lines().limit(30).collect(Collectors.joining("\n")));
        assertThat(text).startsWith("Object " + object + " in region east-side\n")
                .contains("The steps sum to the\nwhole change.")
                .contains("look of north-shore, region east-side", "one detection may be its",
                        "time has passed, in which it may have gone", "; shown where it is in the region");
        assertThat(Files.readAllLines(out.resolve("evidence.ndjson"))).isNotEmpty().allSatisfy(line ->
                assertThat(line).contains("\"object\":\"" + object + "\"", "\"logOddsAfter\":", "\"steps\":["));
        Run nobody = onBus("replay", "--explain", "nobody", "--out", out.toString());
        assertThat(nobody.exitCode).isEqualTo(1);
        assertThat(nobody.err).contains("no region held object nobody");
        assertThat(replay("--explain", "all").exitCode).isEqualTo(2);
    }

    @Test
    void aSettingThatChangesNothingGivesNoDifference() {
        Run run = replay("--with", "sensors.north-shore.detectionProbability=0.9", "--with", "bounds.gateSigmas=5.0");
        assertThat(run.exitCode).as(run.out + run.err).isZero();
        assertThat(run.out).contains("With sensors.north-shore.detectionProbability=0.9, bounds.gateSigmas=5.0")
                .containsPattern("east-side: nothing would have been other, in \\d+ scans")
                .containsPattern("west-side: nothing would have been other, in \\d+ scans");
        Run middle = replay("--with", "lifetimeSeconds=" + site.lifetimeSeconds(), "--from", Times.text(FROM));
        assertThat(middle.out).containsPattern("east-side: nothing would have been other, in \\d+ scans");
    }

    /** What a change gives from the beginning of the log is what a site with that setting makes of the same parts. */
    @Test
    void aChangeGivesWhatASiteWithThatSettingMakes() throws IOException {
        Path out = folder.resolve("what-if");
        Run run = onBus("replay", "--with", "sensors.north-shore.detectionProbability=0.6", "--out", out.toString());
        assertThat(run.exitCode).as(run.out + run.err).isZero();
        System.out.println("ReplayOnBusTest: " + run.out.substring(run.out.indexOf("With ")));
        assertThat(run.out).containsPattern("[1-9]\\d* of [\\d,]+ scans would have been other");
        String text = EffectiveSettings.text(site);
        String changed = text.replaceFirst("(?s)(north-shore:.*?detectionProbability: )0\\.9\n", "$10.6\n");
        assertThat(changed).isNotEqualTo(text);
        Published dryRun = DryRunOf.of(((SiteResult.Valid) SiteReader.readText(changed)).site(), parts);
        ObjectMapper json = new ObjectMapper();
        List<String> lines = Files.readAllLines(out.resolve("numbers.ndjson"));
        assertThat((long) lines.size()).isEqualTo(dryRun.counts());
        for (String region : List.of("east-side", "west-side")) {
            List<Double> expected = new ArrayList<>();
            for (String count : dryRun.of("counts", region)) {
                expected.add(json.readTree(count).get("all").get("mean").asDouble());
            }
            List<Double> means = new ArrayList<>();
            for (String line : lines) {
                JsonNode numbers = json.readTree(line);
                if (numbers.get("region").asText().equals(region)) {
                    means.add(numbers.get("changedMean").asDouble());
                }
            }
            assertThat(means).as(region).isEqualTo(expected);
        }
        assertThat(Files.readAllLines(out.resolve("existence.ndjson"))).isNotEmpty();
    }

    /** Asking for more before an object is shown shows some later, and the table says by how many scans. */
    @Test
    void aHigherThresholdShowsObjectsLater() {
        Run run = replay("--with", "thresholds.confirming=0.999");
        System.out.println("ReplayOnBusTest: " + run.out.substring(run.out.indexOf("With ")));
        assertThat(run.exitCode).as(run.out + run.err).isZero();
        assertThat(run.out).containsPattern("\\n(north|south|pilot)-\\S+ .* [1-9]\\d* scans? later\\n")
                .doesNotContain("earlier");
    }

    @Test
    void aChangeThatIsNoneIsRefused() {
        assertThat(replay("--with", "sensors.north-pole.detectionProbability=0.6").err)
                .contains("there is no north-pole that has settings; there are [north-shore");
        assertThat(replay("--with", "sensors.north-shore.detectionProbability=6").err)
                .contains("detectionProbability is 6");
        assertThat(replay("--with", "sensors.north-shore.detectionprobability=0.6").exitCode).isEqualTo(2);
        assertThat(replay("--with", "revision=7").err).contains("are those of the log");
        assertThat(replay("--with", "nothing").exitCode).isEqualTo(2);
    }

    @Test
    void theOperatorsGroupIsNotTouched() {
        List<Long> before = offsets();
        replay("--from", Times.text(FROM));
        assertThat(offsets()).isEqualTo(before).isNotEmpty();
    }

    private static List<Long> offsets() {
        try (Admin admin = Admin.create(TestBus.clients().admin("test"))) {
            return admin.listConsumerGroupOffsets(names.applicationId())
                    .partitionsToOffsetAndMetadata()
                    .get()
                    .entrySet()
                    .stream()
                    .sorted(Comparator.comparing(entry -> entry.getKey().toString()))
                    .map(entry -> entry.getValue().offset())
                    .toList();
        } catch (InterruptedException | ExecutionException e) {
            throw new IllegalStateException(e);
        }
    }
}
