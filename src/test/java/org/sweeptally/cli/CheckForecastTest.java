package org.sweeptally.cli;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.site.Site;

class CheckForecastTest {

    @TempDir
    private Path folder;

    @Test
    void theSameSiteGivesTheSameForecast() throws IOException {
        assertThat(forecast(0.9, 20, 0.9).falseBirths()).isEqualTo(forecast(0.9, 20, 0.9).falseBirths());
        assertThat(confirm(0.9, 20, 0.9)).isEqualTo(confirm(0.9, 20, 0.9));
    }

    @Test
    void anObjectThatIsSeenAtEveryScanIsConfirmedSoonerThanOneThatIsSeldomSeen() throws IOException {
        CheckForecast.ScansToConfirm often = confirm(0.99, 20, 0.9);
        CheckForecast.ScansToConfirm seldom = confirm(0.4, 20, 0.9);
        assertThat(often.confirmed()).isEqualTo(often.trials());
        assertThat(often.median()).isLessThan(seldom.median());
        assertThat(often.median()).isLessThanOrEqualTo(often.ninetieth());
        assertThat(often.ninetieth()).isLessThanOrEqualTo(seldom.ninetieth());
    }

    @Test
    void moreClutterMakesConfirmationSlower() throws IOException {
        assertThat(confirm(0.9, 2, 0.9).median()).isLessThan(confirm(0.9, 400, 0.9).median());
    }

    @Test
    void aLowerThresholdConfirmsSoonerAndFalselyMoreOften() throws IOException {
        assertThat(confirm(0.9, 100, 0.2).median()).isLessThan(confirm(0.9, 100, 0.999).median());
        long low = forecast(0.9, 100, 0.2).falseBirths().births();
        long high = forecast(0.9, 100, 0.999).falseBirths().births();
        assertThat(low).isGreaterThan(high);
    }

    @Test
    void theSimulatedHoursAreThoseOfItsScans() throws IOException {
        CheckForecast.FalseBirths births = forecast(0.9, 20, 0.9).falseBirths();
        assertThat(births.scans()).isEqualTo(3000);
        assertThat(births.hours()).isEqualTo(3000 * 2.5 / 3600);
    }

    @Test
    void heavyClutterBoundsTheWorkInDetectionsRatherThanScans() throws IOException {
        CheckForecast.FalseBirths births = forecast(0.9, 3000, 0.9).falseBirths();
        assertThat(births.scans()).isLessThan(3000).isGreaterThan(10);
    }

    private CheckForecast.ScansToConfirm confirm(double detection, double clutter, double confirming)
            throws IOException {
        SiteScene scene = scene(detection, clutter, confirming);
        return new CheckForecast(scene).scansToConfirm(scene.typicalPlace().orElseThrow());
    }

    private CheckForecast forecast(double detection, double clutter, double confirming) throws IOException {
        return new CheckForecast(scene(detection, clutter, confirming));
    }

    /** One radar in the middle of a region of some 4 km by 4 km. */
    private SiteScene scene(double detection, double clutter, double confirming) throws IOException {
        Path file = Files.writeString(folder.resolve("site.yaml"), """
                site: test
                revision: 1
                regions:
                  square: {polygon: [[[-33.525, 43.982], [-33.475, 43.982], [-33.475, 44.018], [-33.525, 44.018],
                      [-33.525, 43.982]]]}
                sensors:
                  radar:
                    position: {latitude: 44.0, longitude: -33.5}
                    reachMetres: 4000
                    sigmaMetres: 15
                    detectionProbability: %s
                    clutterPerScan: %s
                    intervalSeconds: 2.5
                motion: {accelerationNoise: 0.05, speedSigmaMetresPerSecond: 5}
                lifetimeSeconds: 900
                unseen: {birthsPerSquareKilometrePerHour: 4}
                thresholds: {confirming: %s, ending: 0.15}
                """.formatted(detection, clutter, confirming));
        Site site = CliRun.site(file);
        return new SiteScene(site, site.regions().get(0));
    }
}
