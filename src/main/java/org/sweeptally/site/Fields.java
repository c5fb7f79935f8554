package org.sweeptally.site;

import java.math.BigInteger;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;
import org.sweeptally.site.Node.Position;

/**
 * The keys of one mapping, taken out one by one; what nobody took is unknown. A number that is missing or wrong comes
 * out as NaN or 0 and leaves a fault, so that reading goes on and finds the others.
 */
final class Fields {

    /** A key that differs in more letters than this from every known one is not a slip of one of them. */
    private static final int SLIPS = 3;

    private final Position at;
    private final Map<String, Node> entries;
    private final Faults faults;
    private final List<String> known = new ArrayList<>();

    /** Whether missing keys are faults; not where the mapping itself is one already. */
    private final boolean demanding;

    private Fields(Position at, Map<String, Node> entries, Faults faults, boolean demanding) {
        this.at = at;
        this.entries = entries;
        this.faults = faults;
        this.demanding = demanding;
    }

    /** @param what the mapping holds, to complete "must be a mapping of" */
    static Fields of(Node node, String what, Faults faults) {
        if (node instanceof Node.Mapping mapping) {
            return new Fields(mapping.at(), mapping.entries(), faults, true);
        }
        faults.add(node.at(), node.shown(), "must be a mapping of " + what);
        return new Fields(node.at(), Map.of(), faults, false);
    }

    Position at() {
        return at;
    }

    Position at(String key) {
        Node node = entries.get(key);
        return node == null ? at.key(key, at.line()) : node.at();
    }

    boolean has(String key) {
        return entries.containsKey(key);
    }

    /** The value of a key that may be absent. */
    Optional<Node> optional(String key) {
        known.add(key);
        return Optional.ofNullable(entries.get(key));
    }

    /** The value of a key that must be there. */
    Optional<Node> required(String key, String mustBe) {
        Optional<Node> node = optional(key);
        if (node.isEmpty() && demanding) {
            faults.add(at(key), "missing", "must be " + mustBe);
        }
        return node;
    }

    /** A section that must be there. */
    Fields section(String key, String what) {
        return required(key, "a mapping of " + what)
                .map(node -> of(node, what, faults))
                .orElseGet(() -> new Fields(at(key), Map.of(), faults, false));
    }

    /** A section all of whose keys have defaults. */
    Fields optionalSection(String key, String what) {
        return optional(key)
                .map(node -> of(node, what, faults))
                .orElseGet(() -> new Fields(at(key), Map.of(), faults, false));
    }

    double number(String key, Allowed allowed) {
        return required(key, "a number " + allowed.words())
                .map(node -> number(node, allowed, faults))
                .orElse(Double.NaN);
    }

    double number(String key, Allowed allowed, double whenAbsent) {
        return optional(key).map(node -> number(node, allowed, faults)).orElse(whenAbsent);
    }

    OptionalDouble optionalNumber(String key, Allowed allowed) {
        Optional<Node> node = optional(key);
        return node.isPresent() ? OptionalDouble.of(number(node.get(), allowed, faults)) : OptionalDouble.empty();
    }

    static double number(Node node, Allowed allowed, Faults faults) {
        OptionalDouble value =
                node instanceof Node.Scalar scalar ? Numbers.parse(scalar.text()) : OptionalDouble.empty();
        if (value.isEmpty()) {
            faults.add(node.at(), node.shown(), "must be a number " + allowed.words());
            return Double.NaN;
        }
        if (!allowed.holds(value.getAsDouble())) {
            faults.add(node.at(), node.shown(), "must be " + allowed.words());
            return Double.NaN;
        }
        return value.getAsDouble();
    }

    long whole(String key, long least, long most) {
        return required(key, "a whole number from " + least + " to " + most)
                .map(node -> whole(node, least, most))
                .orElse(0L);
    }

    long whole(String key, long least, long most, long whenAbsent) {
        return optional(key).map(node -> whole(node, least, most)).orElse(whenAbsent);
    }

    private long whole(Node node, long least, long most) {
        if (node instanceof Node.Scalar scalar && scalar.text() != null && scalar.text().matches("[-+]?\\d{1,30}")) {
            BigInteger value = new BigInteger(scalar.text());
            if (value.compareTo(BigInteger.valueOf(least)) >= 0 && value.compareTo(BigInteger.valueOf(most)) <= 0) {
                return value.longValue();
            }
        }
        faults.add(node.at(), node.shown(), "must be a whole number from " + least + " to " + most);
        return 0;
    }

    boolean flag(String key, boolean whenAbsent) {
        Optional<Node> node = optional(key);
        if (node.isEmpty()) {
            return whenAbsent;
        }
        if (node.get() instanceof Node.Scalar scalar && List.of("true", "false").contains(scalar.text() + "")) {
            return "true".equals(scalar.text());
        }
        faults.add(node.get().at(), node.get().shown(), "must be true or false");
        return whenAbsent;
    }

    /** Reports the keys that nobody asked for. */
    void end() {
        entries.forEach((key, node) -> {
            if (!known.contains(key)) {
                faults.add(node.at(), "", "is not known here, " + advice(key));
            }
        });
    }

    private String advice(String key) {
        String nearest = null;
        int least = SLIPS + 1;
        for (String candidate : known) {
            int distance = editDistance(key, candidate);
            if (distance < least) {
                least = distance;
                nearest = candidate;
            }
        }
        return nearest != null ? "the nearest known key is " + nearest : "known are " + String.join(", ", known);
    }

    /** Letters to insert, delete or replace (Levenshtein 1966), upper and lower case alike. */
    private static int editDistance(String one, String other) {
        int[] previous = new int[other.length() + 1];
        for (int j = 0; j <= other.length(); j++) {
            previous[j] = j;
        }
        for (int i = 1; i <= one.length(); i++) {
            int[] row = new int[other.length() + 1];
            row[0] = i;
            for (int j = 1; j <= other.length(); j++) {
                boolean same = Character.toLowerCase(one.charAt(i - 1)) == Character.toLowerCase(other.charAt(j - 1));
                row[j] = Math.min(previous[j - 1] + (same ? 0 : 1), 1 + Math.min(previous[j], row[j - 1]));
            }
            previous = row;
        }
        return previous[other.length()];
    }
}
