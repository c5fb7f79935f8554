package org.sweeptally.site;

/**
 * One thing that is wrong with a site's settings. Its text reads like
 * {@code site.yaml:14: sensors.north-shore.reachMetres: is -3, must be more than 0}.
 *
 * @param file     the file as it was named to the reader
 * @param line     counted from 1; 0 where the file as a whole is meant
 * @param place    keys from the top, joined by dots; empty for the whole
 * @param value    what stands there; empty where the sentence says it
 * @param sentence what is allowed
 */
public record Fault(String file, int line, String place, String value, String sentence) {

    @Override
    public String toString() {
        String where = line > 0 ? file + ":" + line : file;
        String what = place.isEmpty() ? "" : place + ": ";
        String is = value.isEmpty() ? "" : "is " + value + ", ";
        return where + ": " + what + is + sentence;
    }
}
