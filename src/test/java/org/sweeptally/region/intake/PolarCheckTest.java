package org.sweeptally.region.intake;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.charset.StandardCharsets;
import java.util.List;
import java.util.Optional;
import java.util.OptionalDouble;
import java.util.function.Consumer;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.sweeptally.event.Detection;
import org.sweeptally.event.GeoPoint;
import org.sweeptally.event.Part;
import org.sweeptally.event.PolarFix;
import org.sweeptally.event.RejectReason;
import org.sweeptally.region.text.PartJson;
import org.sweeptally.site.PolarSettings;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/** What is wrong with a range and an azimuth costs the detection and is told with field, value and what is allowed. */
class PolarCheckTest {

    private static final PolarSettings RADAR =
            new PolarSettings(20, 0.5, OptionalDouble.of(0.3), OptionalDouble.of(110), 10, 30);

    /** The fixture's two sensors, both measuring range and azimuth. */
    private static Site polarSite() {
        Site s = IntakeFixture.site();
        List<SensorSettings> sensors = s.sensors().stream().map(sensor -> sensor.measuring(RADAR)).toList();
        return new Site(s.name(), s.revision(), s.fromMicros(), sensors, s.regions(), s.motion(), s.lifetimeSeconds(),
                s.unseen(), s.thresholds(), s.bounds(), s.rejectOutside());
    }

    private static Intake line(Site site, String detection) {
        String line = "{\"sensor\":\"north-shore\",\"scanTime\":\"2031-05-01T04:00:42.5Z\",\"closesScan\":true,"
                + "\"detections\":[{" + detection + "}]}";
        return new PartJson(site).read(line.getBytes(StandardCharsets.UTF_8), Optional.empty());
    }

    @ParameterizedTest
    @CsvSource(delimiter = '|', value = {
        "\"rangeMetres\":NaN,\"azimuthDegrees\":1 | rangeMetres is NaN: metres from the sensor from 0 to 1000000",
        "\"rangeMetres\":-1,\"azimuthDegrees\":1 | rangeMetres is -1.0: metres from the sensor from 0 to 1000000",
        "\"rangeMetres\":900,\"azimuthDegrees\":-1 | azimuthDegrees is -1.0: degrees clockwise from true north from 0 to 360",
        "\"rangeMetres\":900,\"azimuthDegrees\":361 | azimuthDegrees is 361.0: degrees clockwise",
        "\"rangeMetres\":900,\"azimuthDegrees\":Infinity | azimuthDegrees is Infinity: degrees clockwise",
        "\"rangeMetres\":900 | azimuthDegrees is missing",
        "\"azimuthDegrees\":9 | rangeMetres is missing",
        "\"rangeMetres\":900,\"azimuthDegrees\":1,\"eastMetres\":4 | it gives its place in 2 ways",
        "\"rangeMetres\":900,\"azimuthDegrees\":1,\"rangeRateMetresPerSecond\":20000 | rangeRateMetresPerSecond is 20000.0: metres a second from -10000 to 10000 are allowed",
        "\"rangeMetres\":900,\"azimuthDegrees\":1,\"rangeRateMetresPerSecond\":NaN | rangeRateMetresPerSecond is NaN",
        "\"rangeMetres\":900,\"azimuthDegrees\":1,\"sigmaMetres\":9 | sigmaMetres is given with a range and an azimuth",
        "\"rangeMetres\":900,\"azimuthDegrees\":1,\"noise\":{\"first\":4,\"second\":9000} | noise.second is 9000.0: square degrees from 0.000001 to 2025 are allowed",
        "\"rangeMetres\":900,\"azimuthDegrees\":1,\"noise\":{\"first\":0,\"second\":1} | noise.first is 0.0: square metres",
        "\"rangeMetres\":900,\"azimuthDegrees\":1,\"noise\":{\"first\":4,\"second\":1,\"cross\":3} | first times second must be more than the square of cross",
        "\"rangeMetres\":900,\"azimuthDegrees\":1,\"heightMetres\":Infinity | heightMetres is Infinity: a finite number",
        "\"rangeMetres\":900,\"azimuthDegrees\":1,\"heightMetres\":5000 | rangeMetres is 900.0: at least the difference in height from the sensor is expected, 4890.0 m"
    })
    void aBadRangeOrAzimuthIsToldWithWhatIsAllowed(String detection, String told) {
        Intake intake = line(polarSite(), detection);
        assertThat(intake.reject().orElseThrow().getReasons()).singleElement().satisfies(reason -> {
            assertThat(reason.getReason()).isEqualTo(RejectReason.BAD_FIELD);
            assertThat(reason.getSentence()).contains(told);
        });
        assertThat(intake.body().orElseThrow().getUnusable()).isTrue();
    }

    @ParameterizedTest
    @CsvSource(delimiter = '|', value = {
        "\"rangeMetres\":0,\"azimuthDegrees\":0,\"heightMetres\":110", "\"rangeMetres\":900,\"azimuthDegrees\":359.99",
        "\"rangeMetres\":30,\"azimuthDegrees\":5", "\"rangeMetres\":900,\"azimuthDegrees\":5,\"rangeRateMetresPerSecond\":-31",
        "\"rangeMetres\":900,\"azimuthDegrees\":1,\"noise\":{\"first\":4,\"second\":1,\"cross\":1}",
        "\"latitude\":53.9,\"longitude\":8.1", "\"eastMetres\":5,\"northMetres\":8"
    })
    void aSoundOneIsUsedAndSoIsAPlaceFromTheSameSensor(String detection) {
        Intake intake = line(polarSite(), detection);
        assertThat(intake.reject()).isEmpty();
        assertThat(intake.body().orElseThrow().getPart().getDetections()).hasSize(1);
    }

    /** Nobody says how exact its azimuths are, unless the detection itself does. */
    @Test
    void aPositionSensorMaySendRangesThatBringTheirNoise() {
        String polar = "\"rangeMetres\":900,\"azimuthDegrees\":1";
        Intake without = line(IntakeFixture.site(), polar);
        assertThat(without.reject().orElseThrow().getReasons().get(0).getReason())
                .isEqualTo(RejectReason.WRONG_MEASUREMENT);
        Intake with = line(IntakeFixture.site(), polar + ",\"noise\":{\"first\":4,\"second\":1}");
        assertThat(with.reject()).isEmpty();
        assertThat(with.body().orElseThrow().getPart().getDetections()).hasSize(1);
    }

    @Test
    void aSensorThatMovesMustSayHowFastWhereRangeRatesAreUsed() {
        Intake silent = ferry(part -> {});
        assertThat(silent.reject().orElseThrow().getReasons()).singleElement().satisfies(reason -> {
            assertThat(reason.getField()).isEqualTo("rangeRateMetresPerSecond");
            assertThat(reason.getSentence()).contains("rangeRateMetresPerSecond is -3.0, and the part does not say how"
                    + " fast sensor ferry, which moves, was: sensorEastMetresPerSecond and sensorNorthMetresPerSecond");
        });
        Intake told = ferry(part -> {
            part.setSensorEastMetresPerSecond(3.0);
            part.setSensorNorthMetresPerSecond(0.0);
        });
        assertThat(told.reject()).isEmpty();
    }

    private static Intake ferry(Consumer<Part> change) {
        Part part = IntakeFixture.part(0);
        part.setSensor("ferry");
        part.setSensorPosition(new GeoPoint(53.9, 8.1, null));
        part.setDetections(List.of(Detection.newBuilder()
                .setIndex(0)
                .setMeasurement(new PolarFix(500.0, 20.0, -3.0))
                .build()));
        change.accept(part);
        return new PartJson(polarSite()).read(PartJson.write(part).getBytes(StandardCharsets.UTF_8), Optional.empty());
    }

    @Test
    void aRangeShorterThanTheHeightByItsErrorIsUsed() {
        assertThat(line(polarSite(), "\"rangeMetres\":60,\"azimuthDegrees\":20,\"noise\":{\"first\":100,\"second\":1}")
                .reject()).isEmpty();
        assertThat(line(polarSite(), "\"rangeMetres\":40,\"azimuthDegrees\":20,\"noise\":{\"first\":100,\"second\":1}")
                .reject()).isPresent();
    }
}
