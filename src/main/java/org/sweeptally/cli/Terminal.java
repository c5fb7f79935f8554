package org.sweeptally.cli;

import java.io.InputStream;
import java.io.PrintStream;

/**
 * What a command reads from and writes to.
 *
 * @param isWatched whether a person watches, who wants to see progress
 */
record Terminal(InputStream in, PrintStream out, PrintStream err, boolean isWatched) {

    /** Shows progress on one line that the next one overwrites; nothing where nobody watches. */
    void progress(String text) {
        if (isWatched) {
            err.print("\r\u001b[K" + text);
            err.flush();
        }
    }

    /** Clears the line of progress. */
    void endProgress() {
        progress("");
    }
}
