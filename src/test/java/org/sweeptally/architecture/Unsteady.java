package org.sweeptally.architecture;

import java.time.Instant;
import java.util.Arrays;
import java.util.HashMap;
import java.util.HashSet;
import java.util.List;
import java.util.Map;
import java.util.Random;
import java.util.Set;
import java.util.function.DoubleUnaryOperator;
import java.util.stream.Collectors;

/** Does what the machine must not do: that the rules which forbid it can fail is shown with this class. */
final class Unsteady {

    private Unsteady() {}

    static long clocks() {
        return System.currentTimeMillis() + System.nanoTime() + Instant.now().getNano();
    }

    static double chance() {
        return new Random(1).nextDouble() + Math.random();
    }

    static int hashOrder(List<String> names) {
        return new HashMap<String, String>().size()
                + new HashSet<>(names).size()
                + Map.of("a", "b").size()
                + Set.of("a").size()
                + Map.copyOf(Map.of()).size()
                + names.stream().collect(Collectors.toSet()).size()
                + names.stream().collect(Collectors.groupingBy(String::length)).size()
                + System.identityHashCode(names);
    }

    static double intrinsics(double x) {
        DoubleUnaryOperator reference = Math::exp;
        return reference.applyAsDouble(x)
                + Math.log(x)
                + Math.log1p(x)
                + Math.expm1(x)
                + Math.sin(x)
                + Math.cos(x)
                + Math.tan(x)
                + Math.atan2(x, 1)
                + Math.pow(x, 3)
                + Math.hypot(x, 1)
                + Math.cbrt(x);
    }

    static double threads(double[] values) {
        Arrays.parallelPrefix(values, Double::sum);
        new Thread(() -> {}).start();
        return List.of(1.0).parallelStream().mapToDouble(v -> v).sum() + Arrays.stream(values).parallel().sum();
    }
}
