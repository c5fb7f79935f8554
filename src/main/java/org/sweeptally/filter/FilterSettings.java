package org.sweeptally.filter;

/**
 * What the recursion needs to know of a site.
 *
 * @param accelerationNoise              spectral density of the acceleration, square metres a second cubed
 * @param speedSigma                     standard deviation of the velocity of unseen objects along each axis, metres a second
 * @param lifetimeSeconds                mean lifetime of an object
 * @param birthsPerSquareMetrePerSecond  objects that come into being
 * @param outsidePerSquareMetre          density of objects beyond open borders
 * @param initialPerSquareMetre          density of unseen objects at the beginning
 * @param confirming                     existence from which an object is confirmed
 * @param ending                         existence below which a confirmed object is no longer confirmed
 * @param recyclingBelow                 existence below which a component goes back into the unseen part
 * @param gateSigmas                     half-width of the gate, standard deviations of the innovation
 * @param unseenCellMetres               side of a cell of the unseen grid
 * @param components                     bound on live components
 * @param unseenTerms                    bound on Gaussian terms of the unseen part
 * @param exactAssociationSteps          bound on the work of one exactly solved cluster
 * @param propagationSweeps              bound on sweeps of belief propagation over one cluster
 * @param leastTermWeight                expected objects below which a weak new object goes to the grid at once
 * @param gatedPairs                     bound on pairs of a scan's observations with components, and with terms
 */
public record FilterSettings(
        double accelerationNoise,
        double speedSigma,
        double lifetimeSeconds,
        double birthsPerSquareMetrePerSecond,
        double outsidePerSquareMetre,
        double initialPerSquareMetre,
        double confirming,
        double ending,
        double recyclingBelow,
        double gateSigmas,
        double unseenCellMetres,
        int components,
        int unseenTerms,
        long exactAssociationSteps,
        int propagationSweeps,
        double leastTermWeight,
        int gatedPairs) {

    /** Existence below which a component is better kept as part of the unseen; common practice, no source. */
    public static final double RECYCLING_BELOW = 0.1;
}
