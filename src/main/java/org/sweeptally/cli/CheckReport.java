package org.sweeptally.cli;

import java.io.PrintStream;
import java.util.Comparator;
import java.util.List;
import java.util.Locale;
import java.util.Optional;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.site.RegionSettings;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/** What a site will do, for a person. */
final class CheckReport {

    private final Site site;

    CheckReport(Site site) {
        this.site = site;
    }

    void print(PrintStream out) {
        out.printf("%s, revision %d: no faults%n%n", site.name(), site.revision());
        sensors(out);
        for (RegionSettings region : site.regions()) {
            out.println();
            region(new SiteScene(site, region), out);
        }
    }

    private void sensors(PrintStream out) {
        TextTable table = new TextTable("sensor", "stands", "reach m", "every s", "sweep s", "clutter", "passed over after s");
        for (SensorSettings sensor : site.sensors()) {
            table.row(
                    sensor.name(),
                    sensor.position().isPresent() ? "still" : "moves",
                    number(sensor.reachMetres()),
                    number(sensor.intervalSeconds()),
                    number(sensor.sweepSeconds()),
                    number(sensor.clutterPerScan()),
                    number(sensor.silentSeconds()));
        }
        table.print(out);
    }

    private void region(SiteScene scene, PrintStream out) {
        RegionSettings region = scene.region();
        out.printf(Locale.ROOT, "region %s: %.2f square kilometres, apron %s m%n", region.name(),
                scene.core().areaSquareMetres() / 1e6, number(region.apronMetres()));
        List<SensorSettings> sensors = scene.sensors();
        if (sensors.isEmpty()) {
            out.println("  no sensor reaches its core: it will have no picture");
            return;
        }
        for (SensorSettings sensor : sensors) {
            out.printf(Locale.ROOT, "  %s reaches %.0f %% of it%s%n", sensor.name(), 100 * scene.shareWithinReach(sensor),
                    sensor.position().isPresent() ? "" : " from its middle");
        }
        waiting(sensors, out);
        forecast(scene, out);
    }

    /** A scan takes effect when every other sensor has promised nothing earlier: at the latest with its own next scan. */
    private void waiting(List<SensorSettings> sensors, PrintStream out) {
        SensorSettings slowest = sensors.stream().max(Comparator.comparingDouble(CheckReport::waitSeconds)).orElseThrow();
        if (sensors.size() == 1) {
            out.println("  the picture waits for nobody: there is one sensor");
        } else {
            out.printf("  the picture waits up to %s s for %s, and %s s if it falls silent%n", number(waitSeconds(slowest)),
                    slowest.name(), number(slowest.silentSeconds()));
        }
    }

    private static double waitSeconds(SensorSettings sensor) {
        double promised = sensor.leastIntervalSeconds() - sensor.disorderSeconds();
        return Math.max(0, sensor.intervalSeconds() + sensor.sweepSeconds() - promised);
    }

    private void forecast(SiteScene scene, PrintStream out) {
        CheckForecast forecast = new CheckForecast(scene);
        CheckForecast.FalseBirths births = forecast.falseBirths();
        double hours = births.hours();
        if (births.births() == 0) {
            // Rule of three: Hanley and Lippman-Hand 1983, JAMA 249(13).
            out.printf(Locale.ROOT, "  false births: fewer than %s an hour (none in %,d simulated scans, %.2f hours, of clutter"
                    + " alone; 95 %%)%n", rate(3 / hours), births.scans(), hours);
        } else {
            out.printf(Locale.ROOT, "  false births: about %s an hour (%d in %,d simulated scans, %.2f hours, of clutter"
                    + " alone)%n", rate(births.births() / hours), births.births(), births.scans(), hours);
        }
        Optional<PlanePoint> place = scene.typicalPlace();
        place.map(forecast::scansToConfirm).ifPresent(scans -> confirmation(scans, out));
    }

    private static void confirmation(CheckForecast.ScansToConfirm scans, PrintStream out) {
        if (scans.confirmed() < scans.trials() / 2) {
            out.printf("  an object in the middle is seldom confirmed: %d of %d simulated ones were; see thresholds,"
                    + " clutterPerScan and unseen%n", scans.confirmed(), scans.trials());
            return;
        }
        out.printf("  an object in the middle is confirmed with scan %d from its first detection on, 90 %% of them by scan %d"
                + " (%d of %d simulated)%n", scans.median(), scans.ninetieth(), scans.confirmed(), scans.trials());
    }

    private static String rate(double perHour) {
        return String.format(Locale.ROOT, perHour < 10 ? "%.1f" : "%.0f", perHour);
    }

    private static String number(double value) {
        return value == Math.rint(value) ? String.format(Locale.ROOT, "%.0f", value) : Double.toString(value);
    }
}
