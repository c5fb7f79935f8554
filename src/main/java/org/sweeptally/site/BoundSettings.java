package org.sweeptally.site;

/**
 * The bounds of what a region may cost. Each is counted when it bites.
 *
 * @param gateSigmas           half-width of the association gate
 * @param components           live components of a region
 * @param unseenTerms          Gaussian terms of the unseen part of a region
 * @param exactAssociationSteps table entries that the exact association of one cluster may touch; beyond it belief
 *                              propagation takes over
 * @param propagationSweeps    sweeps of belief propagation over one cluster
 * @param detectionsPerPart    detections in one part
 * @param waitingBytes         what may wait in a region for its horizon
 * @param clockAheadSeconds    how far ahead of the horizon a sensor's clock may run before it is a finding
 * @param snapshotScans        scans between two snapshots of a region
 * @param snapshotSeconds      time by the ticks of a region between two snapshots, where scans are fewer or wait
 * @param leastTermWeight      expected objects below which a weak new object goes to the grid at once
 * @param gatedPairs           pairs of a scan's detections with the components, and with the unseen terms, in whose
 *                             gates
 *                             they lie
 */
public record BoundSettings(
        double gateSigmas,
        int components,
        int unseenTerms,
        long exactAssociationSteps,
        int propagationSweeps,
        int detectionsPerPart,
        long waitingBytes,
        double clockAheadSeconds,
        int snapshotScans,
        double snapshotSeconds,
        double leastTermWeight,
        int gatedPairs) {}
