package org.sweeptally.region;

/** The log holds settings that were written for a newer machine than this one; the process must not go on. */
public final class NewerMachineVersionException extends RuntimeException {

    private static final long serialVersionUID = 1L;

    public NewerMachineVersionException(String region, int revision, int needed, int ours) {
        super("the log of region " + region + " holds settings, revision " + revision
                + ", that were written for machine version " + needed + ", and this program has machine version " + ours
                + ": start a newer program");
    }
}
