package org.sweeptally.stream;

/** The operator cannot begin or go on for a reason outside the program; the message is the sentence for the user. */
public class OperatorStoppedException extends RuntimeException {

    private static final long serialVersionUID = 1L;

    public OperatorStoppedException(String sentence) {
        super(sentence);
    }

    public OperatorStoppedException(String sentence, Throwable cause) {
        super(sentence, cause);
    }
}
