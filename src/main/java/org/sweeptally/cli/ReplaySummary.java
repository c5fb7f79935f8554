package org.sweeptally.cli;

import java.io.PrintStream;
import java.util.List;
import java.util.Locale;
import java.util.Set;
import java.util.TreeSet;
import java.util.stream.Collectors;
import java.util.stream.Stream;
import org.sweeptally.event.SnapshotHead;
import org.sweeptally.region.RegionMachine;
import org.sweeptally.region.intake.Times;
import org.sweeptally.replay.RecordKind;
import org.sweeptally.replay.RegionReport;
import org.sweeptally.replay.Span;

/** What a replay found, for a person. */
record ReplaySummary(List<RegionReport> reports, Span span) {

    /** Prints it; says whether every record was reproduced. */
    boolean print(PrintStream out) {
        reports.forEach(report -> region(report, out));
        long records = reports.stream().mapToLong(RegionReport::records).sum();
        long same = reports.stream().mapToLong(RegionReport::same).sum();
        boolean all = reports.stream().allMatch(report -> report.difference().isEmpty());
        out.println();
        out.println(all
                ? "reproduced " + number(same) + " of " + number(records) + " records bit for bit"
                : "reproduced " + number(same) + " of " + number(records) + " records bit for bit up to the first"
                        + " difference of each region; what was published is not what the log makes");
        return all;
    }

    private void region(RegionReport report, PrintStream out) {
        out.println(report.region() + ": " + beginning(report) + ", " + number(report.entries())
                + " entries of the log applied");
        String kinds = Stream.of(RecordKind.values())
                .map(kind -> number(report.made().get(kind)) + " " + kind.plural())
                .collect(Collectors.joining(", "));
        out.println("  " + kinds + (report.lastMicros() == Long.MIN_VALUE
                ? "; no scan took effect in this span"
                : ", the last of " + Times.text(report.lastMicros())));
        if (!report.cameToEnd() && span.toMicros() != Long.MAX_VALUE) {
            out.println("  the record ends there, before --to " + Times.text(span.toMicros()));
        }
        report.stretches().forEach(stretch -> out.println("  " + number(stretch.scans()) + " scans from "
                + Times.text(stretch.fromMicros()) + " to " + Times.text(stretch.untilMicros())
                + ": settings revision " + stretch.settingsRevision() + ", machine version "
                + stretch.machineVersion()));
        report.difference().ifPresent(difference -> out.println("  first difference: " + difference.sentence()));
        otherVersions(report, out);
    }

    private static void otherVersions(RegionReport report, PrintStream out) {
        Set<Integer> others = new TreeSet<>();
        report.stretches().forEach(stretch -> others.add(stretch.machineVersion()));
        others.remove(RegionMachine.MACHINE_VERSION);
        if (!others.isEmpty()) {
            out.println("  machine version " + others + " made some of it, and this program has version "
                    + RegionMachine.MACHINE_VERSION + ": replay such a stretch with the program that made it");
        }
    }

    private static String beginning(RegionReport report) {
        if (report.beginning().isEmpty()) {
            return "from the beginning of its log";
        }
        SnapshotHead head = report.beginning().get();
        return "from snapshot " + head.getSnapshot() + " (" + (head.getPictureMicros() == null
                ? "before the first scan"
                : "picture of " + Times.text(head.getPictureMicros())) + ", log offset " + head.getLogOffset() + ")";
    }

    static String number(long number) {
        return String.format(Locale.ROOT, "%,d", number);
    }
}
