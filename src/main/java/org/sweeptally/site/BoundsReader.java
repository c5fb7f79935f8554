package org.sweeptally.site;

/** Reads bounds, all of which have defaults. */
final class BoundsReader {

    private BoundsReader() {}

    static BoundSettings read(Fields fields) {
        BoundSettings bounds = new BoundSettings(
                fields.number("gateSigmas", Allowed.from(1, 20), 5),
                (int) fields.whole("components", 1, 10_000_000, 20_000),
                (int) fields.whole("unseenTerms", 1, 10_000_000, 50_000),
                fields.whole("exactAssociationSteps", 1, 1_000_000_000_000L, 1_000_000),
                (int) fields.whole("propagationSweeps", 1, 1_000_000, 1000),
                (int) fields.whole("detectionsPerPart", 1, 10_000_000, 20_000),
                fields.whole("waitingBytes", 1 << 20, 1L << 40, 64L << 20),
                fields.number("clockAheadSeconds", Allowed.moreThanZero(31_536_000), 60),
                (int) fields.whole("snapshotScans", 1, 1_000_000, 200),
                fields.number("snapshotSeconds", Allowed.from(1, 600), 30),
                fields.number("leastTermWeight", Allowed.from(1e-12, 0.05), 1e-5),
                (int) fields.whole("gatedPairs", 1000, 100_000_000, 2_000_000));
        fields.end();
        return bounds;
    }
}
