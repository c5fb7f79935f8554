package org.sweeptally;

import static com.tngtech.archunit.lang.syntax.ArchRuleDefinition.classes;
import static org.assertj.core.api.Assertions.assertThat;

import com.tngtech.archunit.core.domain.AccessTarget;
import com.tngtech.archunit.core.domain.JavaAccess;
import com.tngtech.archunit.core.domain.JavaClass;
import com.tngtech.archunit.core.domain.JavaClasses;
import com.tngtech.archunit.core.importer.ClassFileImporter;
import com.tngtech.archunit.core.importer.ImportOption;
import com.tngtech.archunit.lang.ArchCondition;
import com.tngtech.archunit.lang.ArchRule;
import com.tngtech.archunit.lang.ConditionEvents;
import com.tngtech.archunit.lang.EvaluationResult;
import com.tngtech.archunit.lang.SimpleConditionEvent;
import java.util.ArrayList;
import java.util.List;
import java.util.Set;
import java.util.regex.Pattern;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** Who may know whom, and what the machine must not touch so that the same log gives the same bytes everywhere. */
class ArchitectureTest {

    private static final String ROOT = "org.sweeptally.";

    private static final JavaClasses PRODUCT = new ClassFileImporter()
            .withImportOption(new ImportOption.DoNotIncludeTests())
            .importPackages("org.sweeptally");

    private static final JavaClasses FIXTURES =
            new ClassFileImporter().importPackages("org.sweeptally.architecture", "org.sweeptally.geo");

    /** Packages from the highest to the lowest, each with what it may use besides the JDK and those below. */
    private record Layer(String name, String... libraries) {}

    private static final List<Layer> LAYERS = List.of(
            new Layer("cli", "picocli..", "org.slf4j..", "com.fasterxml.jackson..", "org.apache.avro..",
                    "org.sweeptally.event..", "org.apache.kafka.."),
            new Layer("demo", "org.sweeptally.event..", "org.apache.avro..", "org.apache.kafka..", "kafka..", "scala..",
                    "org.slf4j..", "com.fasterxml.jackson.."),
            new Layer("replay", "org.sweeptally.event..", "org.apache.avro..", "org.apache.kafka..", "com.fasterxml.jackson.."),
            new Layer("score"),
            new Layer("stream", "org.sweeptally.event..", "org.apache.avro..", "org.apache.kafka..", "org.slf4j.."),
            new Layer("region", "org.sweeptally.event..", "org.apache.avro..", "com.fasterxml.jackson..", "org.ejml..",
                    "org.locationtech.jts.."),
            new Layer("site", "com.fasterxml.jackson..", "org.locationtech.jts.."),
            new Layer("filter", "org.ejml.."),
            new Layer("model", "org.ejml.."),
            new Layer("geo", "org.ejml.."));

    private static ArchRule mayKnowOnlyWhatIsBelow(int layer) {
        List<String> allowed = new ArrayList<>(List.of("java.."));
        allowed.addAll(List.of(LAYERS.get(layer).libraries()));
        for (Layer below : LAYERS.subList(layer, LAYERS.size())) {
            allowed.add(ROOT + below.name() + "..");
        }
        return classes()
                .that()
                .resideInAPackage(ROOT + LAYERS.get(layer).name() + "..")
                .should()
                .onlyDependOnClassesThat()
                .resideInAnyPackage(allowed.toArray(String[]::new))
                .allowEmptyShould(true);
    }

    @ParameterizedTest
    @ValueSource(ints = {0, 1, 2, 3, 4, 5, 6, 7, 8, 9})
    void arrowsGoDownOnly(int layer) {
        mayKnowOnlyWhatIsBelow(layer).check(PRODUCT);
    }

    @Test
    void anArrowUpWouldBeFound() {
        EvaluationResult result = mayKnowOnlyWhatIsBelow(LAYERS.size() - 1).evaluate(FIXTURES);
        assertThat(result.getFailureReport().getDetails()).anyMatch(line -> line.contains("ArrowUp")
                && line.contains("Site"));
    }

    @Test
    void everyPackageHasItsPlaceInTheOrder() {
        List<String> known = new ArrayList<>(LAYERS.stream().map(layer -> ROOT + layer.name()).toList());
        known.add(ROOT + "event");
        for (JavaClass type : PRODUCT) {
            assertThat(known)
                    .as("%s is in a package that no rule of this test knows", type.getName())
                    .anyMatch(name -> (type.getPackageName() + ".").startsWith(name + "."));
        }
    }

    @Test
    void theMachineReadsNoClockNoChanceNoHashOrderNoThreadAndNoIntrinsic() {
        classes()
                .that()
                .resideInAnyPackage("org.sweeptally.geo..", "org.sweeptally.model..", "org.sweeptally.filter..",
                        "org.sweeptally.region..")
                .should(beSteady())
                .check(PRODUCT);
    }

    @Test
    void whateverIsUnsteadyWouldBeFound() {
        List<String> found = classes()
                .that()
                .haveSimpleName("Unsteady")
                .should(beSteady())
                .evaluate(FIXTURES)
                .getFailureReport()
                .getDetails();
        for (String expected : List.of(
                "System.currentTimeMillis", "System.nanoTime", "Instant.now", "Random.<init>", "Math.random",
                "HashMap.<init>", "HashSet.<init>", "Map.of", "Set.of", "Map.copyOf", "Collectors.toSet",
                "Collectors.groupingBy", "System.identityHashCode", "Math.exp", "Math.log", "Math.log1p", "Math.expm1",
                "Math.sin", "Math.cos", "Math.tan", "Math.atan2", "Math.pow", "Math.hypot", "Math.cbrt",
                "Arrays.parallelPrefix", "Thread.<init>", "parallelStream", "DoubleStream.parallel")) {
            assertThat(found).as(expected).anyMatch(line -> line.contains(expected + " in "));
        }
    }

    private static ArchCondition<JavaClass> beSteady() {
        return new ArchCondition<>("give the same on every machine, every time") {
            @Override
            public void check(JavaClass type, ConditionEvents events) {
                Stream.concat(type.getCodeUnitCallsFromSelf().stream(), type.getCodeUnitReferencesFromSelf().stream())
                        .filter(access -> isUnsteady(access.getTarget()))
                        .forEach(access -> events.add(SimpleConditionEvent.violated(type, sentence(access))));
            }
        };
    }

    private static String sentence(JavaAccess<?> access) {
        AccessTarget target = access.getTarget();
        return target.getOwner().getSimpleName() + "." + target.getName() + " in " + access.getDescription();
    }

    private static final Set<String> UNSTEADY_TYPES = Set.of(
            "java.util.Random", "java.util.SplittableRandom", "java.util.concurrent.ThreadLocalRandom",
            "java.security.SecureRandom", "java.util.random.RandomGenerator", "java.time.Clock", "java.util.HashMap",
            "java.util.HashSet", "java.util.IdentityHashMap", "java.util.Hashtable", "java.util.WeakHashMap",
            "java.util.concurrent.ConcurrentHashMap", "java.lang.Thread", "java.util.concurrent.Executors",
            "java.util.concurrent.ForkJoinPool", "java.util.concurrent.CompletableFuture");

    private static final Set<String> INTRINSICS = Set.of(
            "random", "exp", "expm1", "log", "log10", "log1p", "sin", "cos", "tan", "asin", "acos", "atan", "atan2",
                    "sinh",
            "cosh", "tanh", "pow", "hypot", "cbrt");

    private static final Pattern COLLECTORS = Pattern.compile("to(Unmodifiable|Concurrent)?(Set|Map)|groupingBy.*");

    private static boolean isUnsteady(AccessTarget target) {
        String owner = target.getOwner().getName();
        String name = target.getName();
        return UNSTEADY_TYPES.contains(owner)
                || owner.startsWith("java.time.") && name.equals("now")
                || name.equals("parallelStream")
                || owner.startsWith("java.util.stream.") && name.equals("parallel")
                || switch (owner) {
                    case "java.lang.System" -> Set.of("currentTimeMillis", "nanoTime", "identityHashCode")
                            .contains(name);
                    case "java.lang.Math" -> INTRINSICS.contains(name);
                    case "java.util.UUID" -> name.equals("randomUUID");
                    case "java.util.Collections" -> name.equals("shuffle");
                    case "java.util.Arrays" -> name.startsWith("parallel");
                    case "java.util.Map", "java.util.Set" -> Set.of("of", "ofEntries", "copyOf").contains(name);
                    case "java.util.stream.Collectors" -> COLLECTORS.matcher(name).matches();
                    default -> false;
                };
    }
}
