package org.sweeptally.cli;

import static java.nio.charset.StandardCharsets.ISO_8859_1;
import static java.nio.charset.StandardCharsets.UTF_8;
import static org.assertj.core.api.Assertions.assertThat;

import com.fasterxml.jackson.databind.JsonNode;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.nio.file.Path;
import java.time.Instant;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/**
 * Whatever comes, nothing stops the run, what cannot be used is rejected with a sentence or counted, and what is sound
 * beside it is used: one vessel that stands still in the middle keeps its identity throughout.
 */
class BadInputDryRunTest {

    /** Where the bad line goes: after the south shore's second scan. */
    private static final int PLACE = 4;

    @TempDir
    private Path folder;

    @ParameterizedTest(name = "{0}")
    @CsvSource(delimiter = '|', textBlock = """
        text | what the gull saw | NOT_A_PART | the line is not JSON, at column 1
        a broken-off line | {"sensor":"north-shore","scanTi | NOT_A_PART | the line is not JSON, at column
        a list | [1,2] | NOT_A_PART | is not a JSON object
        two parts on a line | {$NORTH,$TIME} {} | NOT_A_PART | something follows the part
        a slip in a field | {$NORTH,$TIME,"detektions":[]} | BAD_FIELD | detections
        a field twice | {$NORTH,$NORTH,$TIME} | BAD_FIELD | sensor is given more than once
        no scan time | {$NORTH,"detections":[]} | BAD_FIELD | scanTime is missing
        no zone | {$NORTH,"scanTime":"2031-05-01T04:00:04"} | BAD_FIELD | scanTime is "2031-05-01T04:00:04"
        an unknown sensor | {"sensor":"lighthouse",$TIME} | UNKNOWN_SENSOR | sensors are north-shore, pilot-house, south
        """)
    void aLineThatIsNoUsablePartIsRejectedWithASentence(String what, String line, String reason, String words)
            throws IOException {
        List<String> lines = vessel(20);
        lines.add(PLACE, line.replace("$NORTH", "\"sensor\":\"north-shore\"")
                .replace("$TIME", "\"scanTime\":\"2031-05-01T04:00:04Z\""));
        DryRunOf run = run(lines);
        assertOneReject(run, reason, words);
        assertThat(run.counts()).hasSize(lines.size() - 1);
        assertVesselFollowed(run);
        assertThat(run.out()).contains(reason);
    }

    @ParameterizedTest(name = "{0}")
    @CsvSource(delimiter = '|', textBlock = """
        latitude not a number | $AT NaN,"longitude":-33.5 | latitude is NaN: degrees north from -90 to 90
        endless longitude | $AT 44,"longitude":Infinity | longitude is Infinity: degrees east from -180 to 180
        latitude 91 | $AT 91,"longitude":-33.5 | latitude is 91.0: degrees north from -90 to 90
        an endless offset | "eastMetres":-Infinity,"northMetres":0 | eastMetres is -Infinity: metres from the sensor
        no place | "id":"nowhere" | latitude and longitude
        noise below zero | $AT 44,"longitude":-33.5,"sigmaMetres":-1 | sigmaMetres is -1
        another day's time | $AT 44,"longitude":-33.5,"time":"2031-05-02T04:00:05Z" | the look lasts from
        """)
    void aBadDetectionIsRejectedAndItsNeighboursAreUsed(String what, String fields, String words) throws IOException {
        List<String> lines = vessel(20);
        String detection = "{" + fields.replace("$AT", "\"latitude\":") + "}";
        String bad = lines.get(PLACE).replace("\"detections\":[", "\"detections\":[" + detection + ",");
        String good = "n3"; // the id of the detection that follows
        assertThat(bad).contains("\"id\":\"" + good + "\"");
        lines.set(PLACE, bad);
        DryRunOf run = run(lines);
        JsonNode reject = assertOneReject(run, "BAD_FIELD", words);
        assertThat(reject.get("whole").asBoolean()).isFalse();
        assertThat(reject.get("reasons").get(0).get("indexes")).singleElement().satisfies(
                index -> assertThat(index.asInt()).isZero());
        assertThat(reject.get("originalText").asText()).isEqualTo(bad);
        assertThat(run.tracks()).anyMatch(track -> uses(track, good));
        assertVesselFollowed(run);
    }

    private static boolean uses(JsonNode track, String id) {
        return track.get("used").findValuesAsText("id").contains(id);
    }

    @Test
    void aPolarMeasurementOfASensorThatMeasuresPositionsIsRejected() throws IOException {
        List<String> lines = vessel(20);
        lines.set(PLACE, lines.get(PLACE).replace(
                "\"detections\":[", "\"detections\":[{\"rangeMetres\":2000,\"azimuthDegrees\":180},"));
        DryRunOf run = run(lines);
        assertOneReject(run, "WRONG_MEASUREMENT", "sensor north-shore measures positions");
        assertVesselFollowed(run);
    }

    @Test
    void bytesThatAreNoTextAreRejectedAndKept() throws IOException {
        List<String> lines = vessel(20);
        ByteArrayOutputStream bytes = new ByteArrayOutputStream();
        bytes.write((String.join("\n", lines) + "\n").getBytes(UTF_8));
        bytes.write("\u00c3\u0001\u00ff\u00fe\u0000rubbish\n".getBytes(ISO_8859_1));
        DryRunOf run = DryRunOf.estuary(folder, bytes.toByteArray());
        JsonNode reject = assertOneReject(run, "NOT_A_PART", "the line is not");
        assertThat(reject.get("originalBase64").asText()).isEqualTo("wwH//gBydWJiaXNo");
        assertVesselFollowed(run);
    }

    @Test
    void aPartThatComesAfterItsScanWasClosedIsRejected() throws IOException {
        List<String> lines = vessel(20);
        lines.add(PLACE, scan("north-shore", 2.5, 2, 1, false, "x1"));
        DryRunOf run = run(lines);
        assertOneReject(run, "SCAN_CLOSED", "comes after its scan was closed");
        assertThat(run.tracks()).noneMatch(track -> uses(track, "x1"));
        assertVesselFollowed(run);
    }

    @Test
    void aPartOfAnEarlierScanIsLate() throws IOException {
        List<String> lines = vessel(20);
        lines.add(PLACE, scan("north-shore", 1, null, 0, true, "x1"));
        DryRunOf run = run(lines);
        assertOneReject(run, "LATE", "disorderSeconds allows more disorder");
        assertVesselFollowed(run);
    }

    @Test
    void aPartSentTwiceIsCountedAndChangesNothing() throws IOException {
        List<String> lines = vessel(20);
        DryRunOf once = DryRunOf.estuary(folder.resolve("once"), String.join("\n", lines).getBytes(UTF_8));
        lines.add(PLACE, lines.get(1));
        DryRunOf twice = run(lines);
        once.assertSameBytesIn(twice.folder());
        assertThat(twice.out()).contains("1 part that had come before");
    }

    @Test
    void ofTwoPartsThatContradictTheFirstStands() throws IOException {
        List<String> lines = vessel(20);
        lines.add(PLACE, lines.get(1).replace("\"id\":\"s1\"", "\"id\":\"other\""));
        DryRunOf run = run(lines);
        assertOneReject(run, "REPEAT_CONFLICT", "came before with other content, and the first stands");
        assertThat(run.tracks()).anyMatch(track -> uses(track, "s1")).noneMatch(track -> uses(track, "other"));
        assertVesselFollowed(run);
    }

    @Test
    void aSensorThatStartsAgainIsTakenOnAndFound() throws IOException {
        List<String> lines = new ArrayList<>();
        for (String line : vessel(20)) {
            lines.add(line.contains("\"scan\":5,") ? line.replace("\"scan\":5,", "\"scan\":1,") : line);
        }
        DryRunOf run = run(lines);
        assertThat(run.rejects()).isEmpty();
        assertThat(run.counts()).hasSize(lines.size());
        assertThat(run.out()).contains("SENSOR_RESTART").contains("sensor south-shore has started again");
        assertVesselFollowed(run);
    }

    @Test
    void aScanThatIsNeverFinishedIsRejectedAndCountsNoMiss() throws IOException {
        List<String> lines = vessel(6);
        lines.add(scan("south-shore", 6.6, 3, 0, false, "x1")); // and then it falls silent
        for (int scan = 4; scan <= 16; scan++) {
            lines.add(scan("north-shore", 2.5 * (scan - 1), scan, 0, true, "n" + scan));
        }
        DryRunOf run = run(lines);
        assertOneReject(run, "UNFINISHED", "of sensor south-shore belongs to an unfinished scan");
        assertThat(run.tracks()).noneMatch(track -> uses(track, "x1"));
        assertThat(run.counts()).hasSize(lines.size() - 1);
        assertVesselFollowed(run);
    }

    @Test
    void aSensorWhoseClockIsAnHourAheadHoldsNobodyAndIsFound() throws IOException {
        List<String> lines = new ArrayList<>();
        for (int scan = 1; scan <= 16; scan++) {
            lines.add(scan("north-shore", 2.5 * (scan - 1), scan, 0, true, "n" + scan));
            lines.add(scan("south-shore", 3600.6 + 3 * (scan - 1), scan, 0, true, "s" + scan));
        }
        DryRunOf run = run(lines);
        assertThat(run.rejects()).isEmpty();
        assertThat(run.counts()).hasSize(lines.size());
        assertThat(run.counts().stream().filter(count -> count.get("sensor").asText().equals("north-shore")))
                .hasSize(16);
        assertThat(run.out()).contains("CLOCK_AHEAD").contains("the clock of sensor south-shore seems to run ahead");
        assertThat(run.out()).doesNotContain("-shore has said nothing");
    }

    @Test
    void oneScanAnHourAheadDoesNotMakeTheOthersLookSilent() throws IOException {
        List<String> lines = vessel(20);
        lines.add(PLACE, scan("pilot-house", 3600, 1, 0, true, "x1"));
        DryRunOf run = run(lines);
        assertThat(run.rejects()).isEmpty();
        assertThat(run.counts()).hasSize(lines.size());
        assertThat(run.out()).contains("CLOCK_AHEAD").doesNotContain("-shore has said nothing");
    }

    @Test
    void aPartWithMoreDetectionsThanAllowedIsRejectedAndItsScanCountsNoMiss() throws IOException {
        List<String> lines = vessel(20);
        lines.set(PLACE, flood("2031-05-01T04:00:05Z", 20_001));
        DryRunOf run = run(lines);
        assertOneReject(run, "TOO_LARGE", "detections has 20001 entries: at most 20000 are allowed in one part");
        assertThat(run.counts()).hasSize(lines.size() - 1);
        assertVesselFollowed(run);
    }

    @Test
    void aMillionDetectionsInOnePartAreRejectedByLengthAndTheBeginningIsKept() throws IOException {
        List<String> lines = vessel(20);
        String flood = flood("2031-05-01T04:00:05Z", 1_000_000);
        lines.add(PLACE, flood);
        DryRunOf run = run(lines);
        JsonNode reject = assertOneReject(run, "TOO_LARGE", "a scan may come in several parts");
        assertThat(reject.get("lengthBytes").asInt()).isEqualTo(flood.length());
        assertThat(reject.get("sha256").asText()).hasSize(64);
        assertThat(reject.get("sourceOffset").asInt()).isEqualTo(PLACE);
        assertThat(reject.get("originalText").asText()).hasSize(4096).isEqualTo(flood.substring(0, 4096));
        assertVesselFollowed(run);
    }

    @Test
    void aRecordingOfWhichNothingCanBeUsedIsDoneAndSaysSoLoudly() throws IOException {
        DryRunOf run = run(List.of("one", "two", "three"));
        assertThat(run.exitCode()).isZero();
        assertThat(run.rejects()).hasSize(3);
        assertThat(run.out()).contains("NOTHING COULD BE USED").contains("no scan took effect, so there is no picture");
    }

    @Test
    void anEmptyRecordingIsDoneAndGivesEmptyFiles() throws IOException {
        DryRunOf run = run(List.of());
        assertThat(run.exitCode()).isZero();
        assertThat(run.out()).contains("no scan took effect, so there is no picture").doesNotContain("NaN");
        for (String file : DryRunOf.FILES) {
            assertThat(folder.resolve(file)).isEmptyFile();
        }
    }

    private DryRunOf run(List<String> lines) throws IOException {
        DryRunOf run = DryRunOf.estuary(folder, String.join("\n", lines).getBytes(UTF_8));
        assertThat(run.exitCode()).as("exit code; standard error: %s", run.err()).isZero();
        assertThat(run.err()).isEmpty();
        return run;
    }

    private static JsonNode assertOneReject(DryRunOf run, String reason, String words) throws IOException {
        assertThat(run.rejects()).hasSize(1);
        JsonNode first = run.rejects().get(0).get("reasons").get(0);
        assertThat(first.get("reason").asText()).isEqualTo(reason);
        assertThat(first.get("sentence").asText()).contains(words);
        return run.rejects().get(0);
    }

    private static void assertVesselFollowed(DryRunOf run) throws IOException {
        assertThat(run.births()).hasSize(1);
        assertThat(run.ends()).isEmpty();
        JsonNode last = run.tracks().get(run.tracks().size() - 1);
        assertThat(last.get("latitude").asDouble()).isBetween(43.9999, 44.0001);
        assertThat(last.get("longitude").asDouble()).isBetween(-33.5001, -33.4999);
        assertThat(run.counts().get(run.counts().size() - 1).get("tracks").asInt()).isEqualTo(1);
    }

    /** So many seconds of two radars that see one vessel, which stands still in the middle; ids n1, s1, n2, ... */
    private static List<String> vessel(double seconds) {
        List<String> lines = new ArrayList<>();
        int north = 0;
        int south = 0;
        while (2.5 * north < seconds) {
            if (2.5 * north <= 0.6 + 3 * south) {
                lines.add(scan("north-shore", 2.5 * north, north + 1, 0, true, "n" + (north + 1)));
                north++;
            } else {
                lines.add(scan("south-shore", 0.6 + 3 * south, south + 1, 0, true, "s" + (south + 1)));
                south++;
            }
        }
        return lines;
    }

    private static String scan(String sensor, double seconds, Integer scan, int part, boolean closes, String id) {
        Instant at = Instant.parse("2031-05-01T04:00:00Z").plusMillis(Math.round(seconds * 1000));
        String number = scan == null ? "" : "\"scan\":" + scan + ",";
        return String.format(Locale.ROOT, "{\"sensor\":\"%s\",\"scanTime\":\"%s\",%s\"part\":%d,\"closesScan\":%b,"
                + "\"detections\":[{\"id\":\"%s\",\"latitude\":44.0,\"longitude\":-33.5}]}", sensor, at, number, part,
                closes, id);
    }

    private static String flood(String time, int detections) {
        return "{\"sensor\":\"north-shore\",\"scanTime\":\"" + time + "\",\"scan\":3,\"closesScan\":true,"
                + "\"detections\":["
                + "{\"latitude\":44,\"longitude\":-33.5},".repeat(detections - 1)
                + "{\"latitude\":44,\"longitude\":-33.5}]}";
    }
}
