package org.sweeptally.site;

import java.util.ArrayList;
import java.util.List;

/**
 * Shares of a whole, as a site file gives them: they must sum to 1. What the given ones leave goes to those that give
 * none, in equal parts.
 */
final class Shares {

    private static final Allowed SHARE = Allowed.from(0, 1);

    /** Decimals of thirds do not sum to 1 to the last bit. */
    private static final double TOLERANCE = 1e-9;

    private Shares() {}

    /** The share of each of the mappings, in their order. */
    static List<Double> read(Node.Position whole, List<Fields> parts, Faults faults) {
        List<Double> shares = new ArrayList<>();
        double sum = 0;
        int open = 0;
        for (Fields part : parts) {
            double share = part.optionalNumber("share", SHARE).orElse(-1);
            shares.add(share);
            open += share == -1 ? 1 : 0;
            sum += share == -1 ? 0 : share;
        }
        if (open == 0 ? Math.abs(sum - 1) > TOLERANCE : sum >= 1) {
            faults.add(
                    whole,
                    "",
                    "has shares that sum to " + Numbers.shortest(sum) + ", they must sum to 1"
                            + (open == 0 ? "" : " and leave something for those that are not given"));
        }
        double each = (1 - sum) / open;
        shares.replaceAll(share -> share == -1 ? each : share);
        return shares;
    }
}
