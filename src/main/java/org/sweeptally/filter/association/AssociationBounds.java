package org.sweeptally.filter.association;

/**
 * What the association of one cluster may cost.
 *
 * @param exactSteps        table entries that the exact method may touch; a cluster that needs more goes to belief
 *                          propagation; 0 sends every cluster without a closed form there
 * @param propagationSweeps sweeps of belief propagation, each over all messages both ways, at least 1
 */
public record AssociationBounds(long exactSteps, int propagationSweeps) {
    public AssociationBounds {
        if (exactSteps < 0 || propagationSweeps < 1) {
            throw new IllegalArgumentException("exactSteps " + exactSteps + " is below 0 or propagationSweeps "
                    + propagationSweeps + " below 1");
        }
    }
}
