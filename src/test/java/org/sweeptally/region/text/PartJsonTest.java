package org.sweeptally.region.text;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.sweeptally.region.intake.IntakeFixture.SCAN_TIME;

import java.nio.charset.StandardCharsets;
import java.util.List;
import java.util.Optional;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.Coverage;
import org.sweeptally.event.Detection;
import org.sweeptally.event.GeoPoint;
import org.sweeptally.event.GeodeticFix;
import org.sweeptally.event.Noise;
import org.sweeptally.event.OffsetFix;
import org.sweeptally.event.Part;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.PolarFix;
import org.sweeptally.event.ReasonCount;
import org.sweeptally.event.Reject;
import org.sweeptally.event.RejectReason;
import org.sweeptally.event.SensorPromise;
import org.sweeptally.region.intake.Intake;
import org.sweeptally.region.intake.IntakeFixture;
import org.sweeptally.region.intake.PartDecoder;
import org.sweeptally.region.wire.Digests;
import org.sweeptally.region.wire.Wire;

class PartJsonTest {

    private static final String HEAD = "\"sensor\":\"north-shore\",\"scanTime\":\"2031-05-01T04:00:42.5Z\"";

    private final PartJson json = new PartJson(IntakeFixture.site());

    @Test
    void aWholeLineIsRead() {
        Part part = good("{\"sensor\":\"north-shore\",\"scanTime\":\"2031-05-01T04:00:42.5Z\",\"scan\":17,\"part\":2,"
                + "\"closesScan\":true,\"sensorPosition\":{\"latitude\":53.9,\"longitude\":8.1,\"heightMetres\":30},"
                + "\"sensorHeadingDegrees\":90,\"sensorEastMetresPerSecond\":1.5,\"sensorNorthMetresPerSecond\":-2,"
                + "\"promises\":{\"nothingBefore\":\"2031-05-01T04:00:44Z\"},"
                + "\"coverage\":{\"fromMetres\":10,\"toMetres\":4000,\"fromAzimuthDegrees\":350,"
                + "\"toAzimuthDegrees\":20,"
                + "\"area\":[{\"latitude\":1,\"longitude\":1},{\"latitude\":1,\"longitude\":2},"
                + "{\"latitude\":2,\"longitude\":2}]},"
                + "\"detections\":[{\"id\":\"a1\",\"time\":\"2031-05-01T04:00:43Z\","
                + "\"latitude\":53.91,\"longitude\":8.12,"
                + "\"sigmaMetres\":3,\"heightMetres\":2.5,\"strength\":-40,\"declaredIdentity\":\"gull\"},"
                + "{\"eastMetres\":100,\"northMetres\":-200.5,\"noise\":{\"first\":4,\"cross\":1,\"second\":9}}]}");
        assertThat(part).isEqualTo(Part.newBuilder()
                .setSensor("north-shore").setScanTimeMicros(SCAN_TIME).setScan(17L).setPart(2).setClosesScan(true)
                .setSensorPosition(new GeoPoint(53.9, 8.1, 30.0)).setSensorHeadingDegrees(90.0)
                .setSensorEastMetresPerSecond(1.5).setSensorNorthMetresPerSecond(-2.0)
                .setPromise(new SensorPromise(SCAN_TIME + 1_500_000))
                .setCoverage(new Coverage(10.0, 4000.0, 350.0, 20.0, List.of(new GeoPoint(1.0, 1.0, null),
                        new GeoPoint(1.0, 2.0, null), new GeoPoint(2.0, 2.0, null))))
                .setDetections(List.of(
                        new Detection(0, "a1", SCAN_TIME + 500_000, new GeodeticFix(53.91, 8.12),
                                new Noise(9.0, 0.0, 9.0), 2.5, -40.0, "gull"),
                        new Detection(1, null, null, new OffsetFix(100.0, -200.5),
                                new Noise(4.0, 1.0, 9.0), null, null, null)))
                .build());
    }

    @Test
    void whatIsAbsentOrNullHasItsDefault() {
        Part part = good("{" + HEAD + "}");
        assertThat(part.getPart()).isZero();
        assertThat(part.getClosesScan()).isFalse();
        assertThat(part.getDetections()).isEmpty();
        assertThat(good("{" + HEAD + ",\"scan\":null,\"part\":null,\"closesScan\":null,"
                + "\"promises\":null,\"coverage\":null,"
                + "\"sensorPosition\":null,\"sensorHeadingDegrees\":null,\"detections\":null}")).isEqualTo(part);
        assertThat(good("{" + HEAD + ",\"promises\":{\"nothingEver\":true}}").getPromise())
                .isEqualTo(new SensorPromise(null));
    }

    @Test
    void aLineAndItsBinaryTwinGiveTheSame() {
        long seed = 31;
        Random random = new Random(seed);
        PartDecoder decoder = new PartDecoder(IntakeFixture.site());
        for (int i = 0; i < 2_000; i++) {
            Part part = IntakeFixture.random(random);
            Intake line = read(PartJson.write(part));
            assertThat(line).as("seed %d, case %d", seed, i).isEqualTo(decoder.decode(Wire.encode(part),
                    Optional.empty()));
            assertThat(line.body().orElseThrow().getPart()).isEqualTo(part);
        }
    }

    @Test
    void whatIsWrittenIsTheFormThatIsDocumented() {
        Part part = IntakeFixture.part(1);
        part.setPromise(new SensorPromise(null));
        part.getDetections().get(0).setMeasurement(new PolarFix(5.0, 6.0, 7.0));
        assertThat(PartJson.write(part)).isEqualTo("{\"sensor\":\"north-shore\","
                + "\"scanTime\":\"2031-05-01T04:00:42.500000Z\","
                + "\"scan\":17,\"part\":3,\"closesScan\":true,\"promises\":{\"nothingEver\":true},"
                + "\"detections\":[{\"id\":\"a0\","
                + "\"rangeMetres\":5.0,\"azimuthDegrees\":6.0,\"rangeRateMetresPerSecond\":7.0}]}");
    }

    @Test
    void aPartWithDetectionsTakenOutOrWithoutNumbersIsNotWritten() {
        Part gaps = IntakeFixture.part(3);
        gaps.getDetections().remove(1);
        assertThatThrownBy(() -> PartJson.write(gaps))
                .isInstanceOf(IllegalArgumentException.class).hasMessageContaining("detection 1 has the index 2");
        Part nan = IntakeFixture.part(1);
        nan.getDetections().get(0).setStrength(Double.NaN);
        assertThatThrownBy(() -> PartJson.write(nan))
                .isInstanceOf(IllegalArgumentException.class).hasMessage("strength is NaN: only finite numbers"
                        + " are written");
        Part left = IntakeFixture.part(2);
        left.getDetections().get(1).setIndex(0);
        assertThat(PartJson.write(left)).isEqualTo(PartJson.write(IntakeFixture.part(2)));
    }

    @Test
    void aBrokenLineIsNotAPartAndTheColumnIsNamed() {
        notAPart("{" + HEAD + ",}", "the line is not JSON, at column " + (HEAD.length() + 3) + ": ");
        notAPart("{" + HEAD, "at column");
        notAPart("{\"sensor\":'x'}", "at column 11");
        notAPart("{" + HEAD + "} {}", "at column " + (HEAD.length() + 4)
                + ": something follows the part: a line is one part");
        notAPart("", "the line is empty: a part is an object, in braces");
        notAPart("[1]", "the line is not a JSON object");
        notAPart("17", "the line is not a JSON object");
        notAPart("[".repeat(5000), "the line is not a JSON object");
        notAPart("{\"coverage\":" + "[".repeat(5000), "the line is not JSON");
    }

    @Test
    void aLineThatBreaksOffTellsWhoseItWas() {
        Reject reject = notAPart("{" + HEAD + ",\"part\":4,\"detections\":[{\"lat", "at column");
        assertThat(reject.getSensor()).isEqualTo("north-shore");
        assertThat(reject.getScanTimeMicros()).isEqualTo(SCAN_TIME);
        assertThat(reject.getPart()).isEqualTo(4);
    }

    @Test
    void bytesThatAreNotUtf8AreNotAPart() {
        byte[] line = ("{" + HEAD + ",\"detections\":[{\"id\":\"x\",\"latitude\":1,\"longitude\":1}]}")
                .getBytes(StandardCharsets.UTF_8);
        line[new String(line, StandardCharsets.UTF_8).indexOf("\"x\"") + 1] = (byte) 0xFF;
        Intake intake = json.read(line, Optional.empty());
        assertThat(intake.body()).isEmpty();
        assertThat(reason(intake).getReason()).isEqualTo(RejectReason.NOT_A_PART);
        assertThat(reason(intake).getSentence()).contains("column").contains("UTF-8");
    }

    @Test
    void anUnknownFieldIsAFaultThatNamesTheNearestKnown() {
        badPart("{" + HEAD + ",\"closeScan\":true,\"closesScan\":true}", "closeScan",
                "closeScan is no field known here: the nearest that is known is closesScan");
        badPart("{" + HEAD + ",\"sensorPosition\":{\"lat\":1,\"latitude\":1,\"longitude\":1}}", "sensorPosition.lat",
                "sensorPosition.lat is no field known here: the nearest that is known is sensorPosition.latitude");
        badDetection("\"latitude\":1,\"longitude\":1,\"Strenght\":4", "Strenght", "is strength");
        badDetection("\"latitude\":1,\"longitude\":1,\"noise\":{\"frist\":4,\"first\":1,\"second\":1}", "noise.frist",
                "the nearest that is known is noise.first");
    }

    @Test
    void aFieldGivenTwiceIsAFault() {
        badPart("{" + HEAD + ",\"scan\":1,\"scan\":1}", "scan", "scan is given more than once: once is allowed");
        badPart("{" + HEAD + ",\"detections\":[],\"detections\":[]}", "detections", "more than once");
        badDetection("\"latitude\":1,\"latitude\":1,\"longitude\":1", "latitude", "latitude is given more than once");
    }

    @Test
    void ofDetectionsGivenTwiceTheFirstAreCounted() {
        String one = "{\"latitude\":1,\"longitude\":1}";
        Intake intake = read("{" + HEAD + ",\"detections\":[" + one + "],\"detections\":[" + one + "," + one + "]}");
        assertThat(intake.body().orElseThrow().getDetectionsSent()).isEqualTo(1);
        assertThat(intake.reject().orElseThrow().getWhole()).isTrue();
    }

    @Test
    void aPartNeedsItsSensorAndItsTime() {
        Intake noSensor = read("{\"scanTime\":\"2031-05-01T04:00:42.5Z\"}");
        assertThat(noSensor.body()).isEmpty();
        assertThat(reason(noSensor).getSentence())
                .isEqualTo("sensor is missing: the name of a sensor of the site file is expected");
        Intake noTime = read("{\"sensor\":\"north-shore\"}");
        assertThat(noTime.body()).isEmpty();
        assertThat(reason(noTime).getSentence()).isEqualTo("scanTime is missing: the time at which the look"
                + " began is expected");
        assertThat(noTime.reject().orElseThrow().getReasons()).hasSize(1);
        assertThat(noTime.reject().orElseThrow().getSentence())
                .startsWith("Part 0 from sensor \"north-shore\": nothing was used: ");
        for (String time : List.of("\"yesterday\"", "17", "\"2031-05-01T04:00:42.5\"")) {
            Intake badTime = read("{\"sensor\":\"north-shore\",\"scanTime\":" + time + "}");
            assertThat(badTime.body()).isEmpty();
            assertThat(reason(badTime).getField()).isEqualTo("scanTime");
            assertThat(reason(badTime).getSentence()).startsWith("scanTime is " + time + ": a time with its offset");
        }
        Intake early = read("{\"sensor\":\"north-shore\",\"scanTime\":\"1969-12-31T23:59:59Z\"}");
        assertThat(reason(early).getSentence())
                .isEqualTo("scanTime is \"1969-12-31T23:59:59Z\": a time from 1970 to 2199 is allowed");
    }

    @Test
    void wrongTypesOfThePartAreFaultsAndTheScanStillCloses() {
        badPart("{" + HEAD + ",\"closesScan\":true,\"scan\":\"x\"}", "scan",
                "scan is \"x\": a whole number from 0 to 9223372036854775807 is expected");
        badPart("{" + HEAD + ",\"scan\":-1}", "scan", "scan is -1: a whole number");
        badPart("{" + HEAD + ",\"scan\":1.5}", "scan", "scan is 1.5: a whole number");
        badPart("{" + HEAD + ",\"scan\":1e400}", "scan", "scan is 1e400: a whole number");
        badPart("{" + HEAD + ",\"scan\":99999999999999999999}", "scan", "a whole number");
        badPart("{" + HEAD + ",\"part\":2147483648}", "part", "part is 2147483648: a whole number from 0 to"
                + " 2147483647");
        badPart("{" + HEAD + ",\"closesScan\":\"yes\"}", "closesScan",
                "closesScan is \"yes\": true or false is expected");
        badPart("{" + HEAD + ",\"detections\":{}}", "detections",
                "detections is an object: a list of objects is expected");
        badPart("{" + HEAD + ",\"sensorPosition\":[1,2]}", "sensorPosition",
                "sensorPosition is a list: an object with latitude");
        badPart("{" + HEAD + ",\"sensorPosition\":{\"latitude\":1}}", "sensorPosition.longitude", "is missing");
        badPart("{" + HEAD + ",\"sensorPosition\":{\"latitude\":NaN,\"longitude\":1}}", "sensorPosition.latitude",
                "sensorPosition.latitude is NaN: degrees north from -90 to 90 are allowed");
        badPart("{" + HEAD + ",\"promises\":{}}", "promises", "promises gives nothing: either");
        badPart("{" + HEAD + ",\"promises\":{\"nothingEver\":true,\"nothingBefore\":\"2031-05-01T04:00:44Z\"}}",
                "promises",
                "promises gives both");
        badPart("{" + HEAD + ",\"coverage\":{\"area\":[5]}}", "coverage.area[0]",
                "coverage.area[0] is 5: an object with");
        badPart("{" + HEAD + ",\"coverage\":{\"toMetres\":-Infinity}}", "coverage.toMetres",
                "coverage.toMetres is -Infinity");
        Intake closing = read("{" + HEAD + ",\"closesScan\":true,\"part\":\"x\"}");
        assertThat(closing.body().orElseThrow().getPart().getClosesScan()).isTrue();
        assertThat(closing.reject().orElseThrow().getPart()).isNull();
        assertThat(good("{" + HEAD + ",\"scan\":17.0}").getScan()).isEqualTo(17L);
    }

    @Test
    void badDetectionsAreTakenOutAndNamedAsTheLineNamesThem() {
        badDetection("\"latitude\":91,\"longitude\":1", "latitude", "latitude is 91.0: degrees north from -90 to 90");
        badDetection("\"latitude\":NaN,\"longitude\":1", "latitude", "latitude is NaN: degrees north");
        badDetection("\"latitude\":1,\"longitude\":Infinity", "longitude", "longitude is Infinity: degrees east");
        badDetection("\"latitude\":1,\"longitude\":1e999", "longitude", "longitude is Infinity");
        badDetection("\"latitude\":\"1\",\"longitude\":1", "latitude", "latitude is \"1\": a number is expected");
        badDetection("\"latitude\":1", "longitude", "longitude is missing: a detection gives latitude and"
                + " longitude, or");
        badDetection("\"northMetres\":1", "eastMetres", "eastMetres is missing");
        badDetection("\"id\":\"a\"", "measurement", "it gives no place: a detection gives");
        badDetection("\"latitude\":1,\"longitude\":1,\"eastMetres\":1,\"northMetres\":1", "measurement",
                "it gives its place in 2 ways");
        badDetection("\"latitude\":1,\"longitude\":1,\"sigmaMetres\":0", "sigmaMetres",
                "sigmaMetres is 0.0: metres from 0.001 to 1000000 are allowed");
        badDetection("\"latitude\":1,\"longitude\":1,\"sigmaMetres\":NaN", "sigmaMetres", "sigmaMetres is NaN");
        badDetection("\"latitude\":1,\"longitude\":1,\"sigmaMetres\":1,\"noise\":{\"first\":1,\"second\":1}", "noise",
                "both");
        badDetection("\"latitude\":1,\"longitude\":1,\"noise\":{\"first\":1}", "noise.second",
                "noise.second is missing");
        badDetection("\"latitude\":1,\"longitude\":1,\"noise\":{\"first\":1,\"cross\":2,\"second\":1}", "noise",
                "the square");
        badDetection("\"latitude\":1,\"longitude\":1,\"time\":\"2031-05-01T04:01:00Z\"", "time",
                "time is 2031-05-01T04:01:00.000000Z: the look lasts from");
        badDetection("\"latitude\":1,\"longitude\":1,\"time\":5", "time", "time is 5: a time with its offset");
        badDetection("\"latitude\":1,\"longitude\":1,\"id\":5", "id", "id is 5: a text is expected");
        badDetection("\"latitude\":1,\"longitude\":1,\"id\":\"\\ud800\"", "id", "text in UTF-8 is expected");
        badDetection("\"rangeMetres\":1,\"azimuthDegrees\":2,\"sigmaMetres\":2", "sigmaMetres", "noise with first");
    }

    @Test
    void aDetectionThatIsNoObjectKeepsItsPlace() {
        Intake intake = read("{" + HEAD + ",\"detections\":[7,{\"latitude\":1,\"longitude\":1},null]}");
        assertThat(intake.body().orElseThrow().getPart().getDetections())
                .extracting(Detection::getIndex).containsExactly(1);
        assertThat(intake.body().orElseThrow().getDetectionsSent()).isEqualTo(3);
        assertThat(reason(intake).getSentence())
                .isEqualTo("detection 0: it is 7: an object is expected (and 1 more detection likewise)");
    }

    @Test
    void rangeAndBearingAreReadAndAreThenTheWrongMeasurement() {
        Intake intake = read("{" + HEAD + ",\"closesScan\":true,\"detections\":[{\"rangeMetres\":100,"
                + "\"azimuthDegrees\":20,"
                + "\"rangeRateMetresPerSecond\":-3},{\"rangeMetres\":100,\"azimuthDegrees\":20}]}");
        assertThat(intake.reject().orElseThrow().getReasons()).hasSize(1);
        assertThat(reason(intake).getReason()).isEqualTo(RejectReason.WRONG_MEASUREMENT);
        assertThat(reason(intake).getCount()).isEqualTo(2);
        assertThat(intake.body().orElseThrow().getUnusable()).isTrue();
    }

    @Test
    void tooManyDetectionsAreCountedAndTheScanStillCloses() {
        String one = "{\"latitude\":1,\"longitude\":1}";
        String line = "{" + HEAD + ",\"closesScan\":true,\"detections\":[" + (one + ",").repeat(200_000) + one + "]}";
        Intake intake = read(line);
        PartBody body = intake.body().orElseThrow();
        assertThat(body.getUnusable()).isTrue();
        assertThat(body.getDetectionsSent()).isEqualTo(200_001);
        assertThat(body.getPart().getDetections()).isEmpty();
        assertThat(body.getPart().getClosesScan()).isTrue();
        assertThat(body.getWholeDigest()).isEqualTo(Digests.sha256(line.getBytes(StandardCharsets.UTF_8)));
        assertThat(reason(intake).getReason()).isEqualTo(RejectReason.TOO_LARGE);
        assertThat(reason(intake).getSentence()).startsWith("detections has 200001 entries: at most 50 are allowed");
    }

    @Test
    void valuesWithoutEndAreRefusedWithoutBeingHeld() {
        String zeros = "[" + "0,".repeat(100_000) + "0]";
        badPart("{" + HEAD + ",\"coverage\":{\"area\":" + zeros + "}}", "coverage",
                "coverage is something with more than 20000 values inside: an object with limits is expected");
        badPart("{" + HEAD + ",\"zeros\":" + zeros + "}", "zeros", "zeros is no field known here");
        StringBuilder names = new StringBuilder("{" + HEAD);
        for (int i = 0; i < 30_000; i++) {
            names.append(",\"x").append(i).append("\":0");
        }
        Intake intake = read(names.append("}").toString());
        assertThat(intake.reject().orElseThrow().getReasons()).hasSizeLessThan(60);
        assertThat(intake.body().orElseThrow().getUnusable()).isTrue();
    }

    @Test
    void faultsOfALineThatAPartCannotHoldAreInItsDigest() {
        String first = "{" + HEAD + ",\"detections\":[{\"latitude\":\"x\"}]}";
        String second = "{" + HEAD + ",\"detections\":[{\"latitude\":\"y\"}]}";
        assertThat(read(first).body().orElseThrow().getWholeDigest())
                .isEqualTo(read(first).body().orElseThrow().getWholeDigest())
                .isNotEqualTo(read(second).body().orElseThrow().getWholeDigest());
        assertThat(read(first).body().orElseThrow().getWholeDigest())
                .isEqualTo(Digests.sha256(first.getBytes(StandardCharsets.UTF_8)));
    }

    @Test
    void theOriginalOfALineIsItsText() {
        String line = "{" + HEAD + ",\"nam\u00fc\":1}";
        assertThat(new String(read(line).reject().orElseThrow().getOriginal().array(), StandardCharsets.UTF_8))
                .isEqualTo(line);
    }

    private Intake read(String line) {
        return json.read(line.getBytes(StandardCharsets.UTF_8), Optional.empty());
    }

    private Part good(String line) {
        Intake intake = read(line);
        assertThat(intake.reject()).isEmpty();
        assertThat(intake.body().orElseThrow().getUnusable()).isFalse();
        return intake.body().orElseThrow().getPart();
    }

    private Reject notAPart(String line, String sentence) {
        Intake intake = read(line);
        assertThat(intake.body()).isEmpty();
        assertThat(reason(intake).getReason()).isEqualTo(RejectReason.NOT_A_PART);
        assertThat(reason(intake).getSentence()).contains(sentence);
        return intake.reject().orElseThrow();
    }

    private void badPart(String line, String field, String sentence) {
        Intake intake = read(line);
        assertThat(intake.body().orElseThrow().getUnusable()).isTrue();
        assertThat(intake.reject().orElseThrow().getWhole()).isTrue();
        assertThat(reason(intake).getReason()).isEqualTo(RejectReason.BAD_FIELD);
        assertThat(reason(intake).getField()).isEqualTo(field);
        assertThat(reason(intake).getCount()).isZero();
        assertThat(reason(intake).getSentence()).contains(sentence);
    }

    /** A part with a good detection and a bad one after it: the good one is used. */
    private void badDetection(String fields, String field, String sentence) {
        Intake intake = read("{" + HEAD + ",\"detections\":[{\"latitude\":1,\"longitude\":1},{" + fields + "}]}");
        assertThat(intake.body().orElseThrow().getPart().getDetections())
                .extracting(Detection::getIndex).containsExactly(0);
        assertThat(intake.body().orElseThrow().getUnusable()).isFalse();
        ReasonCount reason = reason(intake);
        assertThat(reason.getReason()).isEqualTo(RejectReason.BAD_FIELD);
        assertThat(reason.getField()).isEqualTo(field);
        assertThat(reason.getIndexes()).containsExactly(1);
        assertThat(reason.getSentence()).startsWith("detection 1: ").contains(sentence);
    }

    private static ReasonCount reason(Intake intake) {
        return intake.reject().orElseThrow().getReasons().get(0);
    }
}
