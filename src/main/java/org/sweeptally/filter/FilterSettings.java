package org.sweeptally.filter;

import java.util.List;
import org.sweeptally.model.MotionProfile;

/**
 * What the recursion needs to know of a site.
 *
 * @param profiles                       kinds of objects, by how they move and how long they stay
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
        List<MotionProfile> profiles,
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

    public FilterSettings {
        profiles = List.copyOf(profiles);
    }

    /** Existence below which a component is better kept as part of the unseen; common practice, no source. */
    public static final double RECYCLING_BELOW = 0.1;
}
