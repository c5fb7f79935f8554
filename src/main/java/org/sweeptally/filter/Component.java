package org.sweeptally.filter;

import java.util.List;
import org.sweeptally.model.Gaussian;

/**
 * A Bernoulli component: one object that may exist, with its density. Changed by the filter alone, but for
 * {@link #markBorn}.
 */
public final class Component {

    /**
     * A detection of the last update, and the probability that the object, if it exists, caused it.
     *
     * @param part  number of the part that brought it
     * @param index its place in the part as sent
     * @param id    the sender's own name for it, or null
     */
    public record Use(int part, int index, String id, double probability) {}

    ObjectHistory history;
    Bank bank;
    Detectability detectability;
    double logOdds;
    boolean confirmed;

    /** Probability that it moves, and whether it counts as moving; of no account where nothing stands still. */
    double moving = 1;

    boolean movingShown = true;
    List<Use> used;

    /** Who it may really be; null where that is certain. */
    Lineage lineage;

    Component(
            ObjectHistory history,
            Bank bank,
            Detectability detectability,
            double logOdds,
            boolean confirmed,
            List<Use> used) {
        this.history = history;
        this.bank = bank;
        this.detectability = detectability;
        this.logOdds = logOdds;
        this.confirmed = confirmed;
        this.used = used;
    }

    public Identity identity() {
        return history.identity();
    }

    /** Over [east, north, east velocity, north velocity] in the region's plane; not to be changed. */
    public Gaussian density() {
        return bank.overall();
    }

    /** Probability that it moves, if it exists. */
    public double movingProbability() {
        return moving;
    }

    /** Whether it counts as moving: with hysteresis, so that it does not change to and fro. */
    public boolean isMoving() {
        return movingShown;
    }

    /**
     * Probability that it is the object that began under its identity: below 1 where it came so close to another that
     * detections could not tell the two apart.
     */
    public double identityProbability() {
        return lineage == null ? 1 : lineage.probabilityOf(identity());
    }

    /** Other identities that it may have, most probable first. */
    public List<Lineage.Share> otherIdentities() {
        return lineage == null
                ? List.of()
                : lineage.shares().stream().filter(share -> !share.identity().equals(identity())).toList();
    }

    /** Natural log-odds of existence. */
    public double existenceLogOdds() {
        return logOdds;
    }

    /** Probability of existence. */
    public double existence() {
        return LogOdds.probability(logOdds);
    }

    public long firstSeenMicros() {
        return history.firstSeenMicros();
    }

    public long lastDetectedMicros() {
        return history.lastDetectedMicros();
    }

    /** Whether existence has passed the upper threshold and not fallen below the lower one since. */
    public boolean confirmed() {
        return confirmed;
    }

    /** Whether a birth of this identity was ever published. */
    public boolean bornBefore() {
        return history.bornBefore();
    }

    /** Remembers that a birth was published. */
    public void markBorn() {
        history = history.born();
    }

    /** Detections of the last update that it used, most probable ones and in order of the scan. */
    public List<Use> used() {
        return used;
    }

    /** What it calls itself, or null. */
    public String declared() {
        return history.declared();
    }

    public double declaredProbability() {
        return history.declaredProbability();
    }
}
