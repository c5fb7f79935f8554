package org.sweeptally.region.text;

import java.util.List;
import java.util.Locale;

/** Finds the known name that a mistaken one was probably meant to be. */
final class Nearest {

    /** Longer names are nobody's slip of the pen, and comparing them would cost. */
    private static final int LONGEST_NAME = 60;

    private Nearest() {}

    /** The known name with the least edit distance, upper and lower case alike; the first of equals. */
    static String to(String name, List<String> known) {
        String cut = name.substring(0, Math.min(name.length(), LONGEST_NAME)).toLowerCase(Locale.ROOT);
        String nearest = known.get(0);
        int least = Integer.MAX_VALUE;
        for (String candidate : known) {
            int distance = distance(cut, candidate.toLowerCase(Locale.ROOT));
            if (distance < least) {
                least = distance;
                nearest = candidate;
            }
        }
        return nearest;
    }

    /** Levenshtein distance (Levenshtein 1966, Soviet Physics Doklady 10): insertions, deletions and substitutions. */
    static int distance(String a, String b) {
        int[] row = new int[b.length() + 1];
        for (int j = 0; j <= b.length(); j++) {
            row[j] = j;
        }
        for (int i = 1; i <= a.length(); i++) {
            int diagonal = row[0];
            row[0] = i;
            for (int j = 1; j <= b.length(); j++) {
                int substituted = diagonal + (a.charAt(i - 1) == b.charAt(j - 1) ? 0 : 1);
                diagonal = row[j];
                row[j] = Math.min(substituted, 1 + Math.min(row[j], row[j - 1]));
            }
        }
        return row[b.length()];
    }
}
