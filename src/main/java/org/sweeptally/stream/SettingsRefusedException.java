package org.sweeptally.stream;

/** The site file does not go with what runs, or a property is not allowed; the message is the sentence for the user. */
public final class SettingsRefusedException extends OperatorStoppedException {

    private static final long serialVersionUID = 1L;

    public SettingsRefusedException(String sentence) {
        super(sentence);
    }
}
