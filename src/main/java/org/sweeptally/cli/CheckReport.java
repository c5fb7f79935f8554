package org.sweeptally.cli;

import java.io.PrintStream;
import java.math.BigDecimal;
import java.math.RoundingMode;
import java.util.List;
import java.util.Locale;
import java.util.Optional;
import org.sweeptally.geo.PlanePoint;
import org.sweeptally.site.PolarSettings;
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
        TextTable table = new TextTable("sensor", "stands", "reach m", "every s", "sweep s", "clutter a scan");
        for (SensorSettings sensor : site.sensors()) {
            table.row(
                    sensor.name(),
                    sensor.position().isPresent() ? "still" : "moves",
                    number(sensor.reachMetres()),
                    number(sensor.intervalSeconds()),
                    number(sensor.sweepSeconds()),
                    number(sensor.clutterPerScan()));
        }
        table.print(out);
        for (SensorSettings sensor : site.sensors()) {
            sensor.polar().ifPresent(polar -> measures(sensor, polar, out));
            if (sensor.timeOffsetSeconds() != 0) {
                out.printf("%s: %s s are added to its times%n", sensor.name(), number(sensor.timeOffsetSeconds()));
            }
        }
    }

    private static void measures(SensorSettings sensor, PolarSettings polar, PrintStream out) {
        String rate = polar.rangeRateSigmaMetresPerSecond().isEmpty()
                ? "; range rates are not used"
                : "; range rate within " + number(polar.rangeRateSigmaMetresPerSecond().getAsDouble())
                        + " m/s, false ones up to " + number(polar.largestRangeRateMetresPerSecond()) + " m/s";
        out.printf(
                "%s: measures range within %s m and azimuth within %s degrees, across at the end of its reach %s m%s%n",
                sensor.name(),
                number(polar.rangeSigmaMetres()),
                number(polar.azimuthSigmaDegrees()),
                number(sensor.noise().acrossSigmaMetres()),
                rate);
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
        covering(scene, sensors, out);
        forecast(scene, out);
    }

    private static void covering(SiteScene scene, List<SensorSettings> sensors, PrintStream out) {
        TextTable table = new TextTable(
                "  sensor", "reaches %", "in shadow %", "sees %", "picture waits for it s", "or if it is silent s");
        for (SensorSettings sensor : sensors) {
            SiteScene.Shares shares = scene.shares(sensor);
            table.row(
                    "  " + sensor.name(),
                    percent(shares.reached()),
                    percent(shares.hidden()),
                    percent(shares.seen()) + (sensor.position().isPresent() ? "" : " from the middle"),
                    waiting(sensor, sensors.size() == 1),
                    number(sensor.silentSeconds()));
        }
        table.print(out);
        out.printf("  seen by no sensor: %s %%%n", percent(scene.shareUnseen()));
    }

    private static String percent(double share) {
        return share > 0 && share < 0.01 ? "< 1" : String.format(Locale.ROOT, "%.0f", 100 * share);
    }

    private static String waiting(SensorSettings sensor, boolean alone) {
        double seconds = alone ? ownWaitSeconds(sensor) : Math.max(othersWaitSeconds(sensor), ownWaitSeconds(sensor));
        return seconds == 0 ? "0" : "up to " + number(seconds);
    }

    /**
     * How long after its end another sensor's scan waits at most for this one to promise that nothing earlier will
     * come: a scan of this one that ends as long before as its promise reaches just fails to.
     */
    static double othersWaitSeconds(SensorSettings sensor) {
        return sensor.intervalSeconds() + sensor.disorderSeconds() - sensor.leastIntervalSeconds();
    }

    /** How long a scan of a sensor waits for later ones of the same, which may be out of order with itself. */
    static double ownWaitSeconds(SensorSettings sensor) {
        double owed = sensor.disorderSeconds() - sensor.leastIntervalSeconds();
        return sensor.disorderSeconds() == 0 || owed < 0
                ? 0
                : (Math.floor(owed / sensor.intervalSeconds()) + 1) * sensor.intervalSeconds();
    }

    private void forecast(SiteScene scene, PrintStream out) {
        CheckForecast forecast = new CheckForecast(scene);
        CheckForecast.FalseBirths births = forecast.falseBirths();
        double hours = births.hours();
        if (births.births() == 0) {
            // Rule of three: Hanley and Lippman-Hand 1983, JAMA 249(13).
            out.printf(Locale.ROOT, "  false births: fewer than %s an hour, with 95 %% certainty (none in %,d simulated"
                    + " scans of clutter alone, %.2f hours)%n", rate(3 / hours), births.scans(), hours);
        } else {
            out.printf(Locale.ROOT, "  false births: about %s an hour (%d in %,d simulated scans of clutter alone,"
                    + " %.2f hours)%n", rate(births.births() / hours), births.births(), births.scans(), hours);
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
        out.printf("  an object in the middle is confirmed by scan %d, counted from its first detection, in 90 %% of"
                + " cases by scan %d (%d of %d simulated objects)%n",
                scans.median(), scans.ninetieth(), scans.confirmed(), scans.trials());
    }

    private static String rate(double perHour) {
        return String.format(Locale.ROOT, perHour < 10 ? "%.1f" : "%.0f", perHour);
    }

    /** To a thousandth, without zeros at the end. */
    private static String number(double value) {
        BigDecimal rounded = BigDecimal.valueOf(value).setScale(3, RoundingMode.HALF_UP).stripTrailingZeros();
        return rounded.toPlainString();
    }
}
