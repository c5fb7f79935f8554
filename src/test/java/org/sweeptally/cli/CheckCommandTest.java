package org.sweeptally.cli;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Optional;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.geo.LatLon;
import org.sweeptally.model.DetectionProfile;
import org.sweeptally.site.SensorSettings;

class CheckCommandTest {

    @TempDir
    private Path folder;

    @Test
    void aSoundSiteIsToldWhatItWillDo() throws IOException {
        CliRun run = CliRun.of("check", "--site", EstuaryRecording.SITE.toString());
        assertThat(run.exitCode()).isZero();
        assertThat(run.err()).isEmpty();
        Golden.assertIs("estuary-check.txt", run.out());
    }

    @Test
    void everyFaultOfASiteIsToldAtOnceEachOnALine() throws IOException {
        CliRun run = CliRun.of("check", "--site", "src/test/resources/site/faulty.yaml");
        assertThat(run.exitCode()).isEqualTo(2);
        assertThat(run.out()).isEmpty();
        assertThat(run.err().lines().toList())
                .isEqualTo(Files.readAllLines(Path.of("src/test/resources/site/faulty.txt")));
    }

    @Test
    void dryRunTellsTheSameFaultsAndWritesNothing() {
        Path out = folder.resolve("picture");
        CliRun run = CliRun.of("dry-run", "--site", "src/test/resources/site/faulty.yaml", "--parts",
                EstuaryRecording.FILE.toString(), "--out", out.toString());
        assertThat(run.exitCode()).isEqualTo(2);
        assertThat(run.err()).isEqualTo(CliRun.of("check", "--site", "src/test/resources/site/faulty.yaml").err());
        assertThat(out).doesNotExist();
    }

    @Test
    void aFileThatIsNoYamlIsAFaultWithoutAStackTrace() throws IOException {
        Path site = Files.writeString(folder.resolve("site.yaml"), "site: [unclosed\nrevision: {");
        CliRun run = CliRun.of("check", "--site", site.toString());
        assertThat(run.exitCode()).isEqualTo(2);
        assertThat(run.err()).startsWith(site + ":").doesNotContain("\tat ");
        assertThat(run.err().lines()).hasSize(1);
    }

    @Test
    void aRegionWhoseCoreNoSensorReachesIsToldSo() throws IOException {
        String site = Files.readString(EstuaryRecording.SITE)
                .replace("regions: regions.geojson", "regions:\n"
                        + "  near: {polygon: [[[-33.52, 43.99], [-33.48, 43.99], [-33.48, 44.0], [-33.52, 43.99]]]}\n"
                        + "  far: {polygon: [[[-33.0, 43.99], [-32.9, 43.99], [-32.9, 44.0], [-33.0, 43.99]]]}");
        Path file = Files.writeString(folder.resolve("site.yaml"), site);
        CliRun run = CliRun.of("check", "--site", file.toString());
        assertThat(run.err()).isEmpty();
        assertThat(run.exitCode()).isZero();
        assertThat(run.out()).contains("region far:").contains("no sensor reaches its core: it will have no picture");
    }

    @Test
    void thePictureWaitsForTheNextPromiseOfAnother() {
        assertThat(CheckReport.othersWaitSeconds(sensor(3, 0, 0))).isEqualTo(3);
        assertThat(CheckReport.othersWaitSeconds(sensor(3, 2.9, 0))).isCloseTo(0.1, within(1e-9));
        assertThat(CheckReport.othersWaitSeconds(sensor(3, 2.9, 1))).isCloseTo(1.1, within(1e-9));
    }

    @Test
    void aSensorThatMayBeOutOfOrderWaitsForItself() {
        assertThat(CheckReport.ownWaitSeconds(sensor(3, 0, 0))).isZero();
        assertThat(CheckReport.ownWaitSeconds(sensor(3, 2.5, 2))).isZero(); // its own least interval promises more
        assertThat(CheckReport.ownWaitSeconds(sensor(3, 0, 2))).isEqualTo(3);
        assertThat(CheckReport.ownWaitSeconds(sensor(3, 0, 4))).isEqualTo(6);
        // A promise of nothing before a time leaves that time open.
        assertThat(CheckReport.ownWaitSeconds(sensor(3, 0, 3))).isEqualTo(6);
    }

    private static SensorSettings sensor(double interval, double leastInterval, double disorder) {
        return new SensorSettings(
                "radar", Optional.of(new LatLon(44, -33.5)), Optional.empty(), 5000,
                new SensorSettings.PositionNoise(10, 10), DetectionProfile.constant(0.9), 10, interval, 0,
                leastInterval, disorder, 10);
    }
}
