package org.sweeptally.cli;

import java.io.PrintStream;
import java.util.Locale;
import org.sweeptally.demo.DemoReport;
import org.sweeptally.demo.RegionRow;

/** What a demo tells a person at its end. */
final class DemoSummary {

    private final DemoReport report;

    DemoSummary(DemoReport report) {
        this.report = report;
    }

    void print(PrintStream out) {
        out.println();
        out.printf(Locale.ROOT, "The invented estuary, seed %d, %.0f seconds of it:%n", report.seed(),
                report.worldSeconds());
        out.println();
        table(out);
        out.println();
        score(out);
        long before = report.rejects() - report.regions().stream().mapToLong(RegionRow::rejects).sum();
        if (before > 0) {
            out.println(before + " more rejects were made before any region heard of the part.");
        }
        out.println(report.silences() == 0
                ? "No silence was logged: the picture never went on without a sensor."
                : report.silences() + " silences were logged: the picture went on without a sensor.");
        out.println("Digest of all output records: " + report.digest());
    }

    private void table(PrintStream out) {
        TextTable table = new TextTable("region", "scans", "detections", "rejects", "births", "ends", "objects now",
                "expected number", "90 % interval", "true number", "off by m", "face value m");
        for (RegionRow row : report.regions()) {
            table.row(
                    row.region(),
                    whole(row.scans()),
                    whole(row.detections()),
                    whole(row.rejects()),
                    whole(row.births()),
                    whole(row.ends()),
                    whole(row.objectsNow()),
                    String.format(Locale.ROOT, "%.2f", row.expectedNumber()),
                    row.least() + " to " + row.most(),
                    whole(row.trueNumber()),
                    metres(row.ospaMetres()),
                    metres(row.ospaAtFaceValueMetres()));
        }
        table.print(out);
    }

    private void score(PrintStream out) {
        out.println("The picture is off by " + metres(report.meanOspaMetres()) + " m on average, detections at face"
                + " value by " + metres(report.meanOspaAtFaceValueMetres()) + " m: mean OSPA distance");
        out.println("(Schuhmacher, Vo and Vo 2008; order 1, cut at 100 m) at every scan of a radar that covers the"
                + " whole region.");
    }

    private static String whole(long number) {
        return String.format(Locale.ROOT, "%,d", number);
    }

    private static String metres(double metres) {
        return String.format(Locale.ROOT, "%.1f", metres);
    }
}
