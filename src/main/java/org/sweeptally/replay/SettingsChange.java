package org.sweeptally.replay;

import com.fasterxml.jackson.core.JsonProcessingException;
import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import com.fasterxml.jackson.databind.node.ObjectNode;
import com.fasterxml.jackson.dataformat.yaml.YAMLMapper;
import java.util.ArrayList;
import java.util.List;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.site.EffectiveSettings;
import org.sweeptally.site.Site;
import org.sweeptally.site.SiteReader;
import org.sweeptally.site.SiteResult;

/** Other values for some settings of a site: keys from the top joined by dots, an equals sign, and YAML. */
public final class SettingsChange {

    /** Added to the revisions of changed settings, so that they follow those that a snapshot holds. */
    private static final int REVISIONS = 1_000_000;

    private static final ObjectMapper YAML = new YAMLMapper();

    private final List<String> assignments;

    /** @throws IllegalArgumentException if one is no assignment */
    public SettingsChange(List<String> assignments) {
        for (String assignment : assignments) {
            if (assignment.indexOf('=') < 1) {
                throw new IllegalArgumentException(
                        assignment + ": a setting, = and a value are expected, such as thresholds.confirming=0.8");
            }
        }
        this.assignments = List.copyOf(assignments);
    }

    /**
     * Settings with the changes in them.
     *
     * @throws IllegalArgumentException if a change cannot be made, or makes settings that are none
     */
    public SettingsBody of(SettingsBody body) {
        return new SettingsBody(text(body.getText()), Math.addExact(body.getRevision(), REVISIONS),
                body.getMachineVersion());
    }

    /** The text of effective settings with the changes in it. */
    public String text(String effective) {
        try {
            ObjectNode tree = (ObjectNode) YAML.readTree(effective);
            for (String assignment : assignments) {
                assign(tree, assignment);
            }
            return EffectiveSettings.text(read(YAML.writeValueAsString(tree)));
        } catch (JsonProcessingException e) {
            throw new IllegalArgumentException("effective settings cannot be read: " + e.getMessage(), e);
        }
    }

    private static void assign(ObjectNode tree, String assignment) {
        int equals = assignment.indexOf('=');
        String[] path = assignment.substring(0, equals).trim().split("\\.");
        ObjectNode at = tree;
        for (int i = 0; i < path.length - 1; i++) {
            JsonNode next = at.get(path[i]);
            if (!(next instanceof ObjectNode inner)) {
                throw new IllegalArgumentException(
                        assignment + ": there is no " + path[i] + " that has settings; there are " + names(at));
            }
            at = inner;
        }
        String last = path[path.length - 1];
        if (path.length == 1 && (last.equals("site") || last.equals("revision") || last.equals("from"))) {
            throw new IllegalArgumentException(assignment + ": site, revision and from are those of the log");
        }
        try {
            at.set(last, YAML.readTree(assignment.substring(equals + 1)));
        } catch (JsonProcessingException e) {
            throw new IllegalArgumentException(assignment + ": the value is no YAML: " + e.getOriginalMessage(), e);
        }
    }

    private static List<String> names(ObjectNode node) {
        List<String> names = new ArrayList<>();
        node.fieldNames().forEachRemaining(names::add);
        return names;
    }

    private Site read(String text) {
        SiteResult result = SiteReader.readText(text);
        if (result instanceof SiteResult.Faulty faulty) {
            var fault = faulty.faults().get(0);
            String is = fault.value().isEmpty() ? "" : " is " + fault.value() + ",";
            throw new IllegalArgumentException(
                    String.join(", ", assignments) + ": " + fault.place() + is + " " + fault.sentence());
        }
        return ((SiteResult.Valid) result).site();
    }
}
