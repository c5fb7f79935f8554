package org.sweeptally.stream;

import java.util.ArrayList;
import java.util.List;
import java.util.NavigableMap;

/**
 * A topic as it is.
 *
 * @param plan       as it should be
 * @param partitions how many it has, 0 where it is missing
 * @param settings   its settings, by their names; empty where it is missing
 */
public record TopicState(TopicPlan plan, int partitions, NavigableMap<String, String> settings) {

    public boolean isMissing() {
        return partitions == 0;
    }

    /** What is not as it should be, a few words each. What is not ours may be as it likes. */
    public List<String> differences() {
        if (isMissing()) {
            return List.of("missing");
        }
        List<String> differences = new ArrayList<>();
        if (plan.ours() && partitions != plan.partitions()) {
            differences.add(partitions + " partitions, should be " + plan.partitions());
        }
        plan.settings().forEach((name, wanted) -> {
            String actual = settings.get(name);
            if (!wanted.equals(actual)) {
                differences.add(name + " is " + actual + ", should be " + wanted);
            }
        });
        return differences;
    }

    /** A setting that is a whole number, or the other where the bus does not tell. */
    long number(String setting, long otherwise) {
        String value = settings.get(setting);
        return value == null ? otherwise : Long.parseLong(value);
    }
}
