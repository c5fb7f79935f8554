package org.sweeptally.newyork;

import static org.assertj.core.api.Assertions.assertThat;
import static org.junit.jupiter.api.Assumptions.assumeTrue;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.InputStream;
import java.io.PrintStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Locale;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.cli.Main;
import org.sweeptally.geo.LocalPlane;
import org.sweeptally.site.Site;
import org.sweeptally.site.SiteReader;
import org.sweeptally.site.SiteResult;

/** One simulated shore radar on real traffic, through the {@code dry-run} command. Limits are our own. */
class NewYorkRadarTest {

    private static final Path SITE = Path.of("src", "test", "resources", "newyork", "site.yaml");
    private static final int SCANS = 400;
    private static final long SEED = 1;

    @TempDir
    private Path folder;

    @BeforeEach
    void reportsAreThere() {
        Path file = NewYorkVessels.file();
        boolean there = Files.isRegularFile(file);
        if (!there) {
            System.err.println("SKIPPED: no reports of vessels at " + file.toAbsolutePath()
                    + "; name another folder by -Dsweeptally.shared=DIR. The product was NOT tried on real traffic.");
        }
        assumeTrue(there, () -> "no reports of vessels at " + file.toAbsolutePath());
    }

    /** Bounds are wide, since one radar's chance is in them: what is far outside is broken, not unlucky. */
    @Test
    void realTrafficIsShownInTheOpen() throws IOException {
        NewYorkScore one = score("open, one kind", Shadow.NONE, settings());
        NewYorkScore several = score("open, several kinds", Shadow.NONE, severalKinds());
        for (NewYorkScore score : List.of(one, several)) {
            assertThat(score.vessels()).isGreaterThan(40);
            assertThat(score.ospaMetres()).isBetween(5.0, 45.0);
            assertThat(score.expectedMean() / score.trueMean()).isBetween(0.93, 1.07);
            assertThat(score.identityChanges()).isLessThan(score.vessels() / 2);
        }
        assertThat(several.ospaMetres()).as("the still ones are known better").isLessThan(one.ospaMetres());
        assertThat(several.stillWrong()).as("share told wrongly whether it moves").isLessThan(0.15);
    }

    /**
     * A site that names the island is not misled by its radar: vessels that go behind it are remembered, and what
     * lies there always is expected. A site that claims to see there has them end.
     */
    @Test
    void behindAnIslandObjectsAreRemembered() throws IOException {
        Shadow island = Shadow.LIBERTY_ISLAND;
        NewYorkScore told = score("island named, several kinds", island, withObstacle(severalKinds(), island));
        NewYorkScore untold = score("island not named, several kinds", island, severalKinds());
        assertThat(told.ospaMetres()).isBetween(5.0, 60.0).isLessThan(untold.ospaMetres());
        assertThat(told.expectedMean() / told.trueMean()).isBetween(0.88, 1.07);
        assertThat(told.expectedMean()).isGreaterThan(untold.expectedMean());
        assertThat(told.identityChanges()).isLessThan(told.vessels() / 2);
    }

    private static String withObstacle(String settings, Shadow island) {
        String changed = settings.replaceFirst("( +)reachMetres:.*\n", "$0$1obstacles: [" + island.polygon() + "]\n");
        assertThat(changed).contains("obstacles:");
        return changed;
    }

    private static String settings() throws IOException {
        return Files.readString(SITE);
    }

    /** Ferries and ships that also stop and turn, and others that lie at their moorings all day. */
    private static String severalKinds() throws IOException {
        String motion = """
                motion:
                  profiles:
                    moored:
                      share: 0.6
                      lifetimeSeconds: 36000
                      modes: {still: {}}
                    underway:
                      speedSigmaMetresPerSecond: 4
                      largestSpeedMetresPerSecond: 20
                      modes:
                        still: {share: 0.1}
                        straight: {accelerationNoise: 0.05, dwellSeconds: 240}
                        turning: {share: 0.1, accelerationNoise: 0.5, dwellSeconds: 20}
                """;
        String changed = settings().replaceFirst("motion:\n(  .*\n)+", motion);
        assertThat(changed).contains("still:");
        return changed;
    }

    private NewYorkScore score(String name, Shadow shadow, String settings) throws IOException {
        NewYorkVessels vessels = new NewYorkVessels(NewYorkVessels.file(), new LocalPlane(SimulatedRadar.PLACE));
        Path site = Files.writeString(folder.resolve(name + ".yaml"), settings);
        Path parts = folder.resolve(name + ".ndjson");
        Files.write(parts, new SimulatedRadar(vessels, shadow, SEED).parts(SCANS));
        Path out = folder.resolve(name);
        ByteArrayOutputStream said = new ByteArrayOutputStream();
        PrintStream stream = new PrintStream(said, true, StandardCharsets.UTF_8);
        int exit = Main.run(
                new String[] {
                    "dry-run", "--site", site.toString(), "--parts", parts.toString(), "--out", out.toString()
                },
                InputStream.nullInputStream(), stream, stream);
        assertThat(exit).as(said.toString(StandardCharsets.UTF_8)).isZero();
        assertThat(Files.size(out.resolve("rejects.ndjson"))).isZero();
        Site read = ((SiteResult.Valid) SiteReader.read(site)).site();
        NewYorkScore score = NewYorkScore.of(out, vessels, read.regions().get(0).core(), SCANS);
        System.out.printf(Locale.ROOT, "New York, %s, seed %d: %s%n", name, SEED, score);
        return score;
    }
}
