package org.sweeptally.replay;

/** A replay cannot be done, for a reason outside the program; the message is the sentence for the user. */
public class ReplayFailedException extends RuntimeException {

    private static final long serialVersionUID = 1L;

    public ReplayFailedException(String sentence) {
        super(sentence);
    }

    public ReplayFailedException(String sentence, Throwable cause) {
        super(sentence, cause);
    }
}
