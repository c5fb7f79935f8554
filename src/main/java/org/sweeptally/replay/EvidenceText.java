package org.sweeptally.replay;

import java.util.Locale;
import java.util.stream.Collectors;
import org.sweeptally.filter.LogOdds;
import org.sweeptally.filter.ObjectEvidence;
import org.sweeptally.filter.ObjectEvidence.Gated;
import org.sweeptally.filter.ObjectEvidence.Step;
import org.sweeptally.filter.ScanEvidence;
import org.sweeptally.region.intake.Times;

/** The evidence of one scan for one object, in sentences for somebody who has to testify. */
final class EvidenceText {

    /** How to read what follows; stands at the head of an explanation. */
    static final String READING = """
            How to read this. For each look of a sensor, in order: how probable it was before the look that the object
            exists, what the look said, and how probable it was after. Each line that begins with a sign is one step;
            its number is a change of the natural logarithm of the odds, exists against does not. The steps sum to the
            whole change. 0.69 doubles the odds, -0.69 halves them, 2.3 makes them ten times as great.
            """;

    private EvidenceText() {}

    static String of(String region, ScanEvidence scan, ObjectEvidence object) {
        StringBuilder out = new StringBuilder();
        out.append('\n').append(Times.text(scan.logTimeMicros())).append("  look of ").append(scan.sensor())
                .append(", region ").append(region).append('\n');
        if (object.beginning() == null) {
            out.append("  before  ").append(existence(object.before())).append('\n');
        }
        for (Step step : object.steps()) {
            out.append(String.format(Locale.ROOT, "  %+7.3f  ", step.change())).append(sentence(step, object))
                    .append('\n');
            if (step.kind() == ObjectEvidence.Kind.DETECTED) {
                object.gated().forEach(detection -> out.append(detection(detection)));
            }
        }
        if (object.beginning() == null && object.probabilityOfDetection() == 0) {
            out.append("           this look could not see it where it is expected, so it says nothing\n");
        }
        out.append("  after   ").append(existence(object.after())).append(shown(object)).append('\n');
        return out.append(fate(object)).toString();
    }

    private static String sentence(Step step, ObjectEvidence object) {
        return switch (step.kind()) {
            case SURVIVAL -> "time has passed, in which it may have gone";
            case MISSED -> "not seen; " + expected(object);
            case DETECTED -> object.gated().size() == 1
                    ? "one detection may be its; " + expected(object)
                    : object.gated().size() + " detections may be its; " + expected(object);
            case COMPETITION -> object.beginning() == null
                    ? "other objects may have caused the same detections"
                    : "a known object may have caused that detection, with probability "
                            + percent(1 - object.beginning().nobodys());
            case EXCHANGE -> "it is so close to others that detections cannot tell them apart; what is known of all of"
                    + " them was dealt out anew";
            case BEGAN -> "it begins here, with " + begun(object) + ", where a new object is "
                    + number(object.beginning().unseen() / object.beginning().clutter())
                    + " times as probable as a false detection";
            case RETURNED -> "it returns here, with " + begun(object) + ": it had been given up as too faint, and what"
                    + " was left of it explains the detection best; with new objects together that is "
                    + number(object.beginning().unseen() / object.beginning().clutter())
                    + " times as probable as a false detection";
        };
    }

    private static String expected(ObjectEvidence object) {
        String usual = "if it exists, this look would have detected it with probability "
                + percent(object.probabilityOfDetection());
        return Double.isNaN(object.detectable())
                ? usual
                : usual + " (detectable for this sensor with probability " + percent(object.detectable())
                        + ", and then detected with " + percent(object.whenDetectable()) + ")";
    }

    private static String begun(ObjectEvidence object) {
        return name(object.beginning().id(), object.beginning().part(), object.beginning().index());
    }

    private static String detection(Gated gated) {
        String others = gated.others().isEmpty()
                ? ""
                : "; or another's: " + gated.others().stream()
                        .map(other -> other.identity().text() + " with " + percent(other.probability()))
                        .collect(Collectors.joining(", "));
        return String.format(Locale.ROOT, "           %s, %.1f sigmas from where it was expected, %s times as probable"
                        + " from it as from nobody known; taken for its with probability %s%s%n",
                name(gated.id(), gated.part(), gated.index()), gated.distanceSigmas(),
                number(gated.likelihoodRatio()), percent(gated.probability()), others)
                .replace("\r\n", "\n");
    }

    private static String name(String id, int part, int index) {
        String place = "detection " + index + " of part " + part;
        return id == null ? place : place + " (\"" + id + "\")";
    }

    private static String shown(ObjectEvidence object) {
        return object.confirmed() ? "; shown where it is in the region" : "; not shown";
    }

    private static String fate(ObjectEvidence object) {
        return switch (object.fate()) {
            case KEPT -> "";
            case RECYCLED -> "  given up as too faint: it is counted among the unseen, under its name, and may return\n";
            case LEFT -> "  it has left the area in which the region hears, and is followed no longer\n";
        };
    }

    private static String existence(double logOdds) {
        return percent(LogOdds.probability(logOdds), LogOdds.complement(logOdds))
                + String.format(Locale.ROOT, " (log-odds %+.3f)", logOdds);
    }

    private static String percent(double probability) {
        return percent(probability, 1 - probability);
    }

    /** Near certainty the doubt says more than the digits do. */
    private static String percent(double probability, double complement) {
        if (complement > 0 && complement < 0.0005) {
            return "all but 1 in " + number(1 / complement);
        }
        if (probability > 0 && probability < 0.0005) {
            return "1 in " + number(1 / probability);
        }
        return String.format(Locale.ROOT, "%.1f %%", 100 * probability);
    }

    private static String number(double number) {
        return number >= 1e9 || number < 0.001
                ? String.format(Locale.ROOT, "%.2e", number)
                : number >= 100
                        ? String.format(Locale.ROOT, "%,.0f", number)
                        : String.format(Locale.ROOT, "%.3g", number);
    }
}
