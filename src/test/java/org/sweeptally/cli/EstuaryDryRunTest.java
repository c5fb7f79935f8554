package org.sweeptally.cli;

import static org.assertj.core.api.Assertions.assertThat;

import com.fasterxml.jackson.databind.JsonNode;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** The recording that comes with the program, run as the README says. */
class EstuaryDryRunTest {

    @TempDir
    private Path folder;

    @Test
    void theSummaryIsWhatAPersonShouldRead() throws IOException {
        DryRunOf run = DryRunOf.estuary(folder, Files.readAllBytes(EstuaryRecording.FILE));
        assertThat(run.exitCode()).isZero();
        assertThat(run.err()).isEmpty();
        Golden.assertIs("estuary-dry-run.txt", run.out().replace(folder.toString(), "DIR"));
    }

    @Test
    void aTimeOfTheOnlySettingsIsSaidToHaveNoEffect() throws IOException {
        Path folderOfSite = Files.createDirectory(folder.resolve("site"));
        Path site = folderOfSite.resolve("site.yaml");
        String text = Files.readString(EstuaryRecording.FILE.resolveSibling("site.yaml"));
        Files.writeString(site, text + "\nfrom: 2031-05-01T04:00:30Z\n");
        Files.copy(EstuaryRecording.FILE.resolveSibling("regions.geojson"), folderOfSite.resolve("regions.geojson"));
        CliRun run = CliRun.of("dry-run", "--site", site.toString(), "--parts", EstuaryRecording.FILE.toString(),
                "--out", folder.resolve("out").toString());
        assertThat(run.exitCode()).isZero();
        assertThat(run.err()).isEqualTo(
                "from has no effect here: the settings are the first, and hold from the beginning\n");
    }

    @Test
    void sixVesselsAreBornAndTheOneThatLeavesEnds() throws IOException {
        DryRunOf run = DryRunOf.estuary(folder, Files.readAllBytes(EstuaryRecording.FILE));
        assertThat(run.births()).hasSize(6).noneMatch(birth -> birth.get("again").asBoolean());
        assertThat(run.ends()).singleElement().satisfies(end -> assertThat(end.get("why").asText()).isEqualTo("LEFT"));
        assertThat(run.counts()).hasSize(36 + 30 + 90); // one a scan of each of the three sensors
    }

    @Test
    void theCountsSayHowManyTracksBirthsAndEndsEachScanHas() throws IOException {
        DryRunOf run = DryRunOf.estuary(folder, Files.readAllBytes(EstuaryRecording.FILE));
        for (JsonNode count : run.counts()) {
            assertThat(ofScan(run.tracks(), count)).isEqualTo(count.get("tracks").asLong());
            assertThat(ofScan(run.births(), count)).isEqualTo(count.get("births").asLong());
            assertThat(ofScan(run.ends(), count)).isEqualTo(count.get("ends").asLong());
        }
    }

    private static long ofScan(List<JsonNode> records, JsonNode count) {
        return records.stream().filter(record -> record.get("sequence").equals(count.get("sequence"))).count();
    }

    @Test
    void everyTrackHasWhatAReaderNeeds() throws IOException {
        DryRunOf run = DryRunOf.estuary(folder, Files.readAllBytes(EstuaryRecording.FILE));
        assertThat(run.tracks()).isNotEmpty().allSatisfy(track -> assertThat(Stream.of(
                        "object", "region", "sensor", "scanTime", "scan", "time", "latitude", "longitude", "existence"))
                .allMatch(track::hasNonNull));
    }

    @Test
    void standardInputGivesTheSameBytesAsAFileAndASecondRunToo() throws IOException {
        byte[] parts = Files.readAllBytes(EstuaryRecording.FILE);
        DryRunOf file = DryRunOf.estuary(folder.resolve("file"), parts);
        CliRun again = CliRun.withInput(parts, "dry-run", "--site", EstuaryRecording.SITE.toString(), "--parts", "-",
                "--out", folder.resolve("in").toString());
        assertThat(again.exitCode()).isZero();
        file.assertSameBytesIn(folder.resolve("in"));
        DryRunOf.estuary(folder.resolve("in"), parts); // into the same folder: files are replaced, not added to
        file.assertSameBytesIn(folder.resolve("in"));
    }

    @Test
    void howSensorsInterleaveDoesNotMatter() throws IOException {
        List<String> lines = Files.readAllLines(EstuaryRecording.FILE);
        List<String> later = new ArrayList<>(lines.stream().filter(line -> !isOf("south-shore", line)).toList());
        List<String> moved = lines.stream().filter(line -> isOf("south-shore", line)).toList();
        for (int i = 0; i < moved.size(); i++) {
            later.add(Math.min(later.size(), 9 + 5 * i), moved.get(i)); // some ten parts late
        }
        DryRunOf inTime = DryRunOf.estuary(folder.resolve("time"), String.join("\n", lines).getBytes());
        DryRunOf shifted = DryRunOf.estuary(folder.resolve("shifted"), String.join("\n", later).getBytes());
        for (String file : List.of("tracks.ndjson", "births.ndjson", "ends.ndjson", "counts.ndjson")) {
            assertThat(shifted.folder().resolve(file)).hasSameBinaryContentAs(inTime.folder().resolve(file));
        }
        assertThat(shifted.out()).doesNotContain("SENSOR_SILENT");
    }

    private static boolean isOf(String sensor, String line) {
        return line.startsWith("{\"sensor\":\"" + sensor + "\"");
    }

    @Test
    void aSensorThatNeverSpeaksIsPassedOver() throws IOException {
        String without = String.join("\n", Files.readAllLines(EstuaryRecording.FILE).stream()
                .filter(line -> !isOf("south-shore", line))
                .toList());
        DryRunOf run = DryRunOf.estuary(folder, without.getBytes());
        assertThat(run.counts()).hasSize(36 + 90);
        assertThat(run.births()).hasSize(6);
        assertThat(run.out()).contains("SENSOR_SILENT").contains("sensor south-shore has said nothing for 10.0 s");
    }

    @Test
    void theEndOfTheFilePassesEverything() throws IOException {
        List<String> lines = Files.readAllLines(EstuaryRecording.FILE);
        DryRunOf run = DryRunOf.estuary(folder, lines.get(0).getBytes()); // no other sensor ever promises anything
        assertThat(run.counts()).hasSize(1);
    }
}
