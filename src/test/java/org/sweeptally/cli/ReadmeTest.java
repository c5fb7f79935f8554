package org.sweeptally.cli;

import static java.nio.charset.StandardCharsets.UTF_8;
import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.regex.MatchResult;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import java.util.stream.Stream;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import org.sweeptally.event.EndWhy;
import org.sweeptally.event.FindingKind;
import org.sweeptally.event.RejectReason;
import org.sweeptally.region.intake.Intake;
import org.sweeptally.region.text.PartJson;
import org.sweeptally.model.MotionMode;
import org.sweeptally.site.EffectiveSettings;
import org.sweeptally.site.SiteReader;
import org.sweeptally.site.SiteResult;
import picocli.CommandLine.Command;

/** The README says what the program does, all of it, and shows what it prints. */
class ReadmeTest {

    private static final Path GOLDEN = Path.of("src/test/resources/cli");

    private String readme;

    @BeforeEach
    void read() throws IOException {
        readme = Files.readString(Path.of("README.md"));
    }

    @Test
    void whatItShowsIsWhatTheProgramPrints() throws IOException {
        assertThat(readme)
                .contains(Files.readString(GOLDEN.resolve("demo.txt")).replace("The report is in FILE.\n", ""))
                .contains(Files.readString(GOLDEN.resolve("estuary-check.txt")))
                .contains(Files.readString(GOLDEN.resolve("estuary-dry-run.txt")).replace("DIR", "target/estuary"));
    }

    @Test
    void itsExampleOfAPartIsOne() {
        int begin = readme.indexOf("    {\"sensor\":");
        String line = readme.substring(begin, readme.indexOf("]}\n", begin) + 2).replaceAll("\n\\s*", "");
        Intake intake = new PartJson(CliRun.site(EstuaryRecording.SITE)).read(line.getBytes(UTF_8), Optional.empty());
        assertThat(intake.reject()).isEmpty();
        assertThat(intake.body().orElseThrow().getPart().getDetections()).hasSize(2);
    }

    @Test
    void itsExampleOfKindsOfObjectsIsOne() {
        int begin = readme.indexOf("motion:\n  profiles:");
        String motion = readme.substring(begin, readme.indexOf("```", begin));
        String settings = EffectiveSettings.text(CliRun.site(EstuaryRecording.SITE))
                .replaceFirst("motion:\n(  .*\n)+", Matcher.quoteReplacement(motion));
        SiteResult result = SiteReader.readText(settings);
        assertThat(result).isInstanceOf(SiteResult.Valid.class);
        assertThat(((SiteResult.Valid) result).site().profiles())
                .extracting(kind -> kind.name() + kind.modes().stream().map(MotionMode::name).toList())
                .containsExactly("craft[still, straight, turning-left, turning-right]", "piles[still]");
    }

    @Test
    void itListsEveryCommand() {
        for (Class<?> command : Main.class.getAnnotation(Command.class).subcommands()) {
            assertThat(readme).contains("| `" + command.getAnnotation(Command.class).name() + " ");
        }
    }

    @ParameterizedTest
    @ValueSource(strings = {"src/main/resources/estuary/site.yaml", "src/test/resources/harbour/site.yaml"})
    void itListsEverySettingThatASiteHas(String site) {
        String settings = EffectiveSettings.text(CliRun.site(Path.of(site)));
        List<String> keys = new ArrayList<>(Pattern.compile("([a-z]+[A-Za-z]*):").matcher(settings).results()
                .map(MatchResult::group)
                .map(key -> key.substring(0, key.length() - 1))
                .distinct()
                .toList());
        keys.removeAll(List.of("mouth", "house", "shore", "harbour", "radar", "lidar"));
        assertThat(keys).contains("gateSigmas", "confirming", "reachMetres").allSatisfy(
                key -> assertThat(readme).containsPattern("\\b" + key + "\\b"));
    }

    @Test
    void itExplainsEveryRejectFindingAndEnd() {
        Stream.of(RejectReason.values()).forEach(reason -> assertThat(readme).contains("| `" + reason + "` |"));
        Stream.of(FindingKind.values()).forEach(kind -> assertThat(readme).contains("`" + kind + "`"));
        Stream.of(EndWhy.values()).forEach(why -> assertThat(readme).contains(why.name()));
    }
}
