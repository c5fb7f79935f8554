package org.sweeptally.cli;

import java.io.PrintStream;
import java.util.List;
import java.util.Locale;
import java.util.Optional;
import org.sweeptally.region.intake.Times;
import org.sweeptally.replay.RegionReport;
import org.sweeptally.replay.WhatIfReport;

/** What would have been other under other settings, for a person. */
record WhatIfSummary(List<String> changes, List<RegionReport> reports) {

    void print(PrintStream out) {
        out.println();
        out.println("With " + String.join(", ", changes) + " from where each region's replay begins:");
        reports.forEach(report -> report.whatIf().ifPresent(whatIf -> region(whatIf, out)));
    }

    private static void region(WhatIfReport report, PrintStream out) {
        if (report.isSame()) {
            out.println(report.region() + ": nothing would have been other, in " + number(report.scans()) + " scans");
            return;
        }
        out.println(String.format(Locale.ROOT, "%s: %s of %s scans would have been other; existence of an object shown"
                        + " by up to %.3f, the expected number by up to %.2f, %.2f on average",
                report.region(), number(report.differing()), number(report.scans()), report.existenceDifference(),
                report.countDifference(), report.meanCountDifference()));
        if (report.alone() > 0) {
            out.println("  " + number(report.alone()) + " more scans took effect under one of the two only");
        }
        List<WhatIfReport.Row> others = report.rows().stream().filter(row -> !row.isSame()).toList();
        out.println("  " + (report.rows().size() - others.size()) + " objects would have been shown just so, "
                + others.size() + " otherwise" + (others.isEmpty() ? "" : ":"));
        if (!others.isEmpty()) {
            table(others, out);
        }
    }

    private static void table(List<WhatIfReport.Row> rows, PrintStream out) {
        TextTable table = new TextTable("object", "shown from", "scans", "would be from", "scans", "so");
        for (WhatIfReport.Row row : rows) {
            table.row(
                    row.recorded().or(row::changed).orElseThrow().object(),
                    from(row.recorded()), scans(row.recorded()), from(row.changed()), scans(row.changed()), so(row));
        }
        table.print(out);
    }

    private static String from(Optional<WhatIfReport.Shown> shown) {
        return shown.map(s -> Times.text(s.firstMicros())).orElse("-");
    }

    private static String scans(Optional<WhatIfReport.Shown> shown) {
        return shown.map(s -> number(s.shown())).orElse("0");
    }

    private static String so(WhatIfReport.Row row) {
        if (row.changed().isEmpty()) {
            return "never";
        }
        if (row.recorded().isEmpty()) {
            return "only with the change";
        }
        long later = row.scansLater();
        if (later == 0) {
            return row.changed().get().shown() < row.recorded().get().shown() ? "shorter" : "longer";
        }
        return Math.abs(later) + (Math.abs(later) == 1 ? " scan " : " scans ") + (later > 0 ? "later" : "earlier");
    }

    private static String number(long number) {
        return ReplaySummary.number(number);
    }
}
