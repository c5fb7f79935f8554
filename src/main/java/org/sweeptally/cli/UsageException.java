package org.sweeptally.cli;

/** An option that cannot be followed; the message is the sentence for the user. */
final class UsageException extends RuntimeException {

    private static final long serialVersionUID = 1L;

    UsageException(String sentence) {
        super(sentence);
    }
}
