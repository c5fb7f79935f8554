package org.sweeptally.filter.association;

/**
 * How the clusters of a scan were solved, and which bounds bit.
 *
 * @param closed         clusters of one row or one column, in closed form
 * @param exact          clusters by the exact method
 * @param exactSteps     table entries that the exact method touched, all clusters together
 * @param propagated     clusters by belief propagation
 * @param sweeps         sweeps of belief propagation, all clusters together
 * @param sweepCapHits   clusters whose messages had not settled at the last sweep allowed
 * @param impossible     clusters whose every event has weight zero, answered by the least impossible explanation
 * @param underflows     clusters within the exact method's cost, but beyond the range of a double there
 * @param widestFrontier most columns (or rows) that an exact solution kept open at once
 */
public record AssociationCounts(
        long closed,
        long exact,
        long exactSteps,
        long propagated,
        long sweeps,
        long sweepCapHits,
        long impossible,
        long underflows,
        int widestFrontier) {
    public static final AssociationCounts NONE = new AssociationCounts(0, 0, 0, 0, 0, 0, 0, 0, 0);

    /** Sums, and the wider of the two frontiers. */
    public AssociationCounts plus(AssociationCounts other) {
        return new AssociationCounts(
                closed + other.closed,
                exact + other.exact,
                exactSteps + other.exactSteps,
                propagated + other.propagated,
                sweeps + other.sweeps,
                sweepCapHits + other.sweepCapHits,
                impossible + other.impossible,
                underflows + other.underflows,
                Math.max(widestFrontier, other.widestFrontier));
    }
}
