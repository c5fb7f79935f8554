package org.sweeptally.cli;

/** The work failed for a reason outside the program; the message is the sentence for the user. */
final class CommandFailedException extends RuntimeException {

    private static final long serialVersionUID = 1;

    CommandFailedException(String sentence) {
        super(sentence);
    }
}
