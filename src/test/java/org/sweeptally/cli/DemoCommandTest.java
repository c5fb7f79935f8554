package org.sweeptally.cli;

import static org.assertj.core.api.Assertions.assertThat;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class DemoCommandTest {

    @TempDir
    private Path folder;

    /** 0.6 is the aim of this project, no outside figure. */
    @Test
    void thePictureIsMuchNearerToTheTruthThanDetectionsAtFaceValue() throws IOException {
        Path file = folder.resolve("report.json");
        CliRun run = CliRun.of("demo", "--report", file.toString());
        assertThat(run.err()).isEmpty();
        assertThat(run.exitCode()).isZero();
        JsonNode report = new ObjectMapper().readTree(Files.readString(file));
        assertThat(report.required("meanOspaMetres").asDouble())
                .isPositive()
                .isLessThan(0.6 * report.required("meanOspaAtFaceValueMetres").asDouble());
        assertThat(report.required("silences").asInt()).isZero();
        assertThat(report.required("digest").asText()).matches("[0-9a-f]{64}");
        rejectsAddUp(report, run);
        assertThat(report.required("regions")).hasSize(2);
        for (JsonNode region : report.required("regions")) {
            asThePersonReadsIt(region, run.out());
        }
        Golden.assertIs("demo.txt", run.out()
                .substring(run.out().indexOf("The invented estuary, seed"))
                .replace(file.toString(), "FILE"));
        assertThat(run.out()).contains("No silence was logged", report.required("digest").asText());
    }

    private static void rejectsAddUp(JsonNode report, CliRun run) {
        long ofRegions = 0;
        for (JsonNode region : report.required("regions")) {
            ofRegions += region.required("rejects").asLong();
        }
        assertThat(ofRegions).isPositive();
        assertThat(run.out())
                .contains(report.required("rejects").asLong() - ofRegions + " more rejects were made before");
    }

    private static void asThePersonReadsIt(JsonNode region, String out) {
        String row = out.lines()
                .filter(line -> line.startsWith(region.required("region").asText() + "  "))
                .findFirst()
                .orElseThrow();
        assertThat(row.replace(",", "").split(" {2,}"))
                .startsWith(
                        region.required("region").asText(),
                        region.required("scans").asText(),
                        region.required("detections").asText(),
                        region.required("rejects").asText(),
                        region.required("births").asText(),
                        region.required("ends").asText(),
                        region.required("objectsNow").asText());
        assertThat(region.required("births").asLong() - region.required("ends").asLong())
                .isEqualTo(region.required("objectsNow").asLong());
    }

    @Test
    void aReportThatCannotBeWrittenFailsInOneSentenceBeforeAnyWork() {
        CliRun run = CliRun.of("demo", "--report", folder.resolve("no/report.json").toString());
        assertThat(run.exitCode()).isEqualTo(1);
        assertThat(run.err().lines()).hasSize(1);
        assertThat(run.err()).contains("report.json").contains("no folder");
        assertThat(run.out()).isEmpty();
    }

    @Test
    void aSeedThatIsNoNumberIsAUsageError() {
        CliRun run = CliRun.of("demo", "--seed", "much");
        assertThat(run.exitCode()).isEqualTo(2);
        assertThat(run.err()).contains("much");
    }
}
