package org.sweeptally.stream;

import static org.assertj.core.api.Assertions.assertThat;

import com.tngtech.archunit.core.domain.Dependency;
import com.tngtech.archunit.core.domain.JavaClass;
import com.tngtech.archunit.core.importer.ClassFileImporter;
import com.tngtech.archunit.core.importer.ImportOption;
import java.io.File;
import java.io.IOException;
import java.nio.file.Path;
import java.time.Duration;
import java.util.Arrays;
import java.util.List;
import java.util.TreeSet;
import java.util.regex.Pattern;
import java.util.stream.Collectors;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.site.Site;

/** The operator does without the broker that the demo has in its process. */
class OperatorClassPathTest {

    /** Jars of Kafka that the operator has; all others are the broker's. */
    private static final Pattern OF_OPERATOR = Pattern.compile("kafka-(clients|streams)-[0-9.]+\\.jar");

    private static final Pattern OF_BROKER = Pattern.compile("(kafka|scala)[-_].*\\.jar");

    @TempDir
    private Path folder;

    private static boolean isOfBroker(String path) {
        String name = path.substring(path.lastIndexOf('/') + 1);
        return OF_BROKER.matcher(name).matches() && !OF_OPERATOR.matcher(name).matches();
    }

    @Test
    void onlyTheDemoKnowsClassesOfTheBroker() {
        TreeSet<String> who = new TreeSet<>();
        for (JavaClass one : new ClassFileImporter()
                .withImportOption(new ImportOption.DoNotIncludeTests())
                .importPackages("org.sweeptally")) {
            for (Dependency dependency : one.getDirectDependenciesFromSelf()) {
                dependency.getTargetClass().getSource()
                        .filter(source -> isOfBroker(source.getUri().toString().replaceAll("!/.*", "")))
                        .ifPresent(source -> who.add(one.getPackageName()));
            }
        }
        assertThat(who).containsExactly("org.sweeptally.demo");
    }

    @Test
    void theOperatorRunsWithoutTheBrokersJars() throws IOException, InterruptedException {
        Site site = TestSite.twins();
        TestBus.createTopics(site, 1, 2);
        List<String> whole = Arrays.asList(OperatorProcess.classPath().split(File.pathSeparator));
        String without = whole.stream()
                .filter(path -> !isOfBroker(path))
                .collect(Collectors.joining(File.pathSeparator));
        assertThat(without).isNotEqualTo(String.join(File.pathSeparator, whole));
        try (OperatorProcess operator = OperatorProcess.start(site, folder, "without", without)) {
            Waiting.until("running", Duration.ofSeconds(60), () -> operator.said().contains(" running\n"));
            assertThat(operator.stop()).as(operator.said()).isZero();
            assertThat(operator.said()).endsWith(" stopped\n");
        }
    }
}
