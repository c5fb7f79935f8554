package org.sweeptally.cli;

import java.io.PrintStream;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import org.sweeptally.event.Count;
import org.sweeptally.region.RegionCounters;
import org.sweeptally.region.RegionMachine;
import org.sweeptally.region.intake.Times;

/** What a dry run tells a person at its end. */
final class DryRunSummary {

    private final DryRun run;
    private final Path folder;

    DryRunSummary(DryRun run, Path folder) {
        this.run = run;
        this.folder = folder;
    }

    void print(PrintStream out) {
        out.printf("%s: %,d lines read, %,d usable parts%n%n", run.site().name(), run.lines(), run.usableParts());
        regions(out);
        asides(out);
        rejects(out);
        findings(out);
        out.println();
        out.println("Records are in " + folder + ".");
        out.println("The picture is an estimate; local rules and licensed practice come first.");
    }

    private void regions(PrintStream out) {
        TextTable table = new TextTable(
                "region", "scans", "detections", "rejects", "births", "ends", "shown now", "expected number",
                "90 % interval", "expected unseen");
        for (RegionMachine machine : run.local().machines()) {
            RegionTally tally = run.tallies().get(machine.region());
            RegionCounters counters = machine.counters();
            Count last = tally.last();
            table.row(
                    machine.region(),
                    whole(counters.get(RegionCounters.Name.SCANS_IN_EFFECT)),
                    whole(counters.get(RegionCounters.Name.DETECTIONS_IN_EFFECT)),
                    whole(tally.rejects()),
                    whole(tally.births()),
                    whole(tally.ends()),
                    last == null ? "-" : whole(last.getTracks()),
                    last == null ? "-" : number(last.getAll().getMean()),
                    last == null ? "-" : interval(last),
                    last == null ? "-" : number(last.getExpectedUnseen()));
        }
        table.print(out);
        for (RegionTally tally : run.tallies().values()) {
            if (tally.last() != null) {
                out.printf("%s: from %s to %s%n", tally.region(), Times.text(tally.first().getTimeMicros()),
                        Times.text(tally.last().getTimeMicros()));
            } else {
                out.printf("%s: no scan took effect, so there is no picture%n", tally.region());
            }
        }
    }

    private static String interval(Count count) {
        return String.format(Locale.ROOT, "%d to %d (%.0f %%)", count.getAll().getLeast(), count.getAll().getMost(),
                100 * count.getAll().getHeld());
    }

    /** What is normal and yet worth a line. */
    private void asides(PrintStream out) {
        List<String> lines = new ArrayList<>();
        say(lines, run.local().beyondReach(), "detection", "beyond the reach of the sensor");
        say(lines, run.local().outside(), "detection", "outside every region and its apron");
        for (RegionMachine machine : run.local().machines()) {
            long repeats = machine.counters().get(RegionCounters.Name.REPEATS);
            say(lines, repeats, "part", "that had come before, in " + machine.region());
        }
        if (!lines.isEmpty()) {
            out.println();
            out.println("Passed over, as is normal:");
            lines.forEach(out::println);
        }
    }

    private static void say(List<String> lines, long times, String what, String which) {
        if (times > 0) {
            lines.add("  " + whole(times) + " " + what + (times == 1 ? " " : "s ") + which);
        }
    }

    private void rejects(PrintStream out) {
        if (run.reasons().isEmpty()) {
            return;
        }
        out.println();
        if (run.usableParts() == 0) {
            out.println("NOTHING COULD BE USED. Rejected, by reason (whole in rejects.ndjson):");
        } else {
            out.println("Rejected, in a region or before it reached one, by reason (whole in rejects.ndjson):");
        }
        TextTable table = new TextTable("reason", "records", "detections", "for example");
        run.reasons().forEach((reason, tally) -> table.row(
                reason.name(), whole(tally.records()), whole(tally.detections()), tally.example()));
        table.print(out);
    }

    private void findings(PrintStream out) {
        boolean none = run.tallies().values().stream().allMatch(tally -> tally.findings().isEmpty());
        if (none) {
            return;
        }
        out.println();
        out.println("Found, and not as the site file says:");
        TextTable table = new TextTable("region", "finding", "times", "the last one");
        run.tallies().values().forEach(tally -> tally.findings().forEach(found ->
                table.row(tally.region(), found.kind().name(), whole(found.times()), found.sentence())));
        table.print(out);
    }

    private static String whole(long number) {
        return String.format(Locale.ROOT, "%,d", number);
    }

    private static String number(double number) {
        return String.format(Locale.ROOT, "%.2f", number);
    }
}
