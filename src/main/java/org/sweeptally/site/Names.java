package org.sweeptally.site;

import java.util.regex.Pattern;
import org.sweeptally.site.Node.Position;

/** Names of the site, its sensors and its regions, which become keys and parts of topics' names. */
final class Names {

    private static final Pattern ALLOWED = Pattern.compile("[a-z0-9][a-z0-9-]{0,63}");

    private static final String RULE =
            "a name of small letters, digits and hyphens, not beginning with a hyphen, at most 64";

    private Names() {}

    /** Whether the text is a name; if not, leaves a fault. */
    static boolean check(String name, Position at, Faults faults) {
        if (ALLOWED.matcher(name).matches()) {
            return true;
        }
        faults.add(at, name.isBlank() ? "empty" : "'" + Node.plain(name) + "'", "must be " + RULE);
        return false;
    }

    /** The name that a key gives; empty text where it is missing or none. */
    static String required(Fields fields, String key, Faults faults) {
        Node node = fields.required(key, RULE).orElse(null);
        if (node == null) {
            return "";
        }
        if (node instanceof Node.Scalar scalar && scalar.text() != null) {
            return check(scalar.text(), node.at(), faults) ? scalar.text() : "";
        }
        faults.add(node.at(), node.shown(), "must be " + RULE);
        return "";
    }
}
