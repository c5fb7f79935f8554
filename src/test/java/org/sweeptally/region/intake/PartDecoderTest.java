package org.sweeptally.region.intake;

import static org.assertj.core.api.Assertions.assertThat;
import static org.sweeptally.region.intake.IntakeFixture.SCAN_TIME;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Optional;
import java.util.function.Consumer;
import java.util.stream.IntStream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
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
import org.sweeptally.event.TickBody;
import org.sweeptally.region.wire.Digests;
import org.sweeptally.region.wire.Wire;

class PartDecoderTest {

    private final PartDecoder decoder = new PartDecoder(IntakeFixture.site());

    @Test
    void aGoodPartPassesWhole() {
        Part part = IntakeFixture.part(3);
        Intake intake = decode(part);
        assertThat(intake.reject()).isEmpty();
        PartBody body = intake.body().orElseThrow();
        assertThat(body.getPart()).isEqualTo(part);
        assertThat(body.getDetectionsSent()).isEqualTo(3);
        assertThat(body.getUnusable()).isFalse();
        assertThat(body.getWholeDigest()).isEqualTo(Wire.digest(part));
    }

    @Test
    void anEmptyClosingPartPassesAndIsUsable() {
        PartBody body = decode(IntakeFixture.part(0)).body().orElseThrow();
        assertThat(body.getUnusable()).isFalse();
        assertThat(body.getPart().getClosesScan()).isTrue();
    }

    @Test
    void bytesThatAreNoMessageAreNotAPart() {
        assertWholly(decode(new byte[0]), RejectReason.NOT_A_PART, "it begins with nothing, it is empty");
        assertWholly(decode("hello".getBytes()), RejectReason.NOT_A_PART, "it begins with 68 65 6C 6C");
        assertWholly(decode(new byte[] {(byte) 0xC3, 1, 5}), RejectReason.NOT_A_PART, "it has 3 bytes");
        assertWholly(decoder.decode(null, Optional.empty()), RejectReason.NOT_A_PART, "it is empty");
    }

    @Test
    void aSchemaThatNobodyKnowsIsNamedByItsFingerprint() {
        byte[] bytes = Wire.encode(IntakeFixture.part(1));
        Arrays.fill(bytes, 2, 10, (byte) 0x5A);
        assertWholly(decode(bytes), RejectReason.UNKNOWN_SCHEMA,
                "its schema has the fingerprint 5a5a5a5a5a5a5a5a: no schema known here has it");
    }

    @Test
    void anotherRecordOfOursIsNotAPart() {
        assertWholly(decode(Wire.encode(new TickBody(1L))), RejectReason.NOT_A_PART,
                "it is a record of the type TickBody: a Part is expected here");
    }

    @Test
    void aTruncatedPartIsRejectedAndStillTellsWhoseItWas() {
        byte[] bytes = Wire.encode(IntakeFixture.part(3));
        for (int length = Wire.HEADER_BYTES; length < bytes.length; length++) {
            Intake intake = decode(Arrays.copyOf(bytes, length));
            assertThat(intake.body()).isEmpty();
            assertThat(reason(intake).getReason()).isEqualTo(RejectReason.NOT_A_PART);
        }
        Reject reject = decode(Arrays.copyOf(bytes, bytes.length - 1)).reject().orElseThrow();
        assertThat(reject.getSensor()).isEqualTo("north-shore");
        assertThat(reject.getScanTimeMicros()).isEqualTo(SCAN_TIME);
        assertThat(reject.getPart()).isEqualTo(3);
        assertThat(reject.getSentence()).contains("in field detections, at byte");
    }

    @Test
    void bytesAfterThePartAreRejected() {
        byte[] bytes = Wire.encode(IntakeFixture.part(1));
        assertWholly(decode(Arrays.copyOf(bytes, bytes.length + 2)), RejectReason.NOT_A_PART, "2 bytes are left over");
    }

    @Test
    void aCountOfManyMillionsInFewBytesCostsNothing() {
        Part part = IntakeFixture.part(0);
        byte[] bytes = Wire.encode(part);
        byte[] hostile = Arrays.copyOf(bytes, bytes.length + 4);
        System.arraycopy(new byte[] {(byte) 0xFE, (byte) 0xFF, (byte) 0xFF, (byte) 0xFF, 0x0F}, 0, hostile,
                bytes.length - 1, 5);
        assertWholly(decode(hostile), RejectReason.NOT_A_PART,
                "an array says that 2147483647 items follow, but only 0 bytes do");
    }

    @Test
    void aMillionDetectionsCloseTheScanEmptiedAndUnusable() {
        int million = 1_000_000;
        byte[] bytes = Wire.encode(huge(million));
        Intake intake = decode(bytes);
        PartBody body = intake.body().orElseThrow();
        assertThat(body.getPart().getDetections()).isEmpty();
        assertThat(body.getPart().getClosesScan()).isTrue();
        assertThat(body.getPart().getScan()).isEqualTo(17L);
        assertThat(body.getUnusable()).isTrue();
        assertThat(body.getDetectionsSent()).isEqualTo(million);
        assertThat(body.getWholeDigest())
                .isEqualTo(Digests.sha256(bytes, Wire.HEADER_BYTES, bytes.length - Wire.HEADER_BYTES));
        Reject reject = intake.reject().orElseThrow();
        assertThat(reject.getWhole()).isTrue();
        ReasonCount reason = reason(intake);
        assertThat(reason.getReason()).isEqualTo(RejectReason.TOO_LARGE);
        assertThat(reason.getField()).isEqualTo("detections");
        assertThat(reason.getCount()).isZero();
        assertThat(reason.getSentence()).isEqualTo("detections has 1000000 entries: at most 50 are allowed in one part"
                + " (detectionsPerPart of the site file)");
        assertThat(reject.getOriginal().remaining()).isEqualTo(4096);
    }

    @Test
    void asManyDetectionsAsAreAllowedPass() {
        assertThat(decode(IntakeFixture.part(IntakeFixture.MOST_DETECTIONS)).reject()).isEmpty();
        assertThat(reason(decode(IntakeFixture.part(IntakeFixture.MOST_DETECTIONS + 1))).getReason())
                .isEqualTo(RejectReason.TOO_LARGE);
    }

    @Test
    void badDetectionsAreTakenOutAndTheOthersKeepTheirIndexes() {
        Part part = IntakeFixture.part(5);
        part.getDetections().get(1).setMeasurement(new GeodeticFix(91.0, 8.0));
        part.getDetections().get(3).setMeasurement(new GeodeticFix(-90.5, 8.0));
        Intake intake = decode(part);
        PartBody body = intake.body().orElseThrow();
        assertThat(body.getUnusable()).isFalse();
        assertThat(body.getDetectionsSent()).isEqualTo(5);
        assertThat(body.getPart().getDetections()).extracting(Detection::getIndex).containsExactly(0, 2, 4);
        assertThat(body.getPart().getDetections()).extracting(Detection::getId).containsExactly("a0", "a2", "a4");
        Reject reject = intake.reject().orElseThrow();
        assertThat(reject.getWhole()).isFalse();
        assertThat(reject.getRegion()).isNull();
        assertThat(reject.getReasons()).hasSize(1);
        assertThat(reason(intake)).isEqualTo(new ReasonCount(RejectReason.BAD_FIELD, "latitude", 2, List.of(1, 3),
                "detection 1: latitude is 91.0: degrees north from -90 to 90 are allowed (and 1 more detection"
                        + " likewise)"));
        assertThat(reject.getSentence()).isEqualTo("Part 3 of the scan of 2031-05-01T04:00:42.500000Z from sensor"
                + " \"north-shore\": 2 of 5 detections were not used: " + reason(intake).getSentence());
    }

    @Test
    void aPartWithoutAnyGoodDetectionClosesItsScanButIsUnusable() {
        Part part = IntakeFixture.part(2);
        part.getDetections().forEach(d -> d.setMeasurement(new GeodeticFix(Double.NaN, 8.0)));
        Intake intake = decode(part);
        assertThat(intake.body().orElseThrow().getUnusable()).isTrue();
        assertThat(intake.body().orElseThrow().getPart().getDetections()).isEmpty();
        assertThat(intake.reject().orElseThrow().getWhole()).isTrue();
        assertThat(reason(intake).getCount()).isEqualTo(2);
    }

    @Test
    void anIndexIsThePlaceInThePartWhateverWasSent() {
        Part sent = IntakeFixture.part(3);
        sent.getDetections().get(0).setIndex(7);
        sent.getDetections().get(1).setIndex(7);
        sent.getDetections().get(2).setIndex(-1);
        PartBody body = decode(sent).body().orElseThrow();
        assertThat(body.getPart().getDetections()).extracting(Detection::getIndex).containsExactly(0, 1, 2);
        assertThat(body.getWholeDigest()).isEqualTo(Wire.digest(IntakeFixture.part(3)));
    }

    @Test
    void theDigestIsOfThePartAsItWasSentNotAsItIsUsed() {
        Part part = IntakeFixture.part(2);
        part.getDetections().get(0).setStrength(Double.NaN);
        assertThat(decode(part).body().orElseThrow().getWholeDigest()).isEqualTo(Wire.digest(part));
    }

    @Test
    void anUnknownSensorIsRejectedWithTheOnesThatAreKnown() {
        Part part = IntakeFixture.part(1);
        part.setSensor("south-shore");
        Intake intake = decode(part);
        assertWholly(intake, RejectReason.UNKNOWN_SENSOR,
                "sensor is \"south-shore\": the site's sensors are ferry, north-shore");
        assertThat(intake.reject().orElseThrow().getSensor()).isEqualTo("south-shore");
        assertThat(reason(intake).getField()).isEqualTo("sensor");
    }

    @Test
    void aMovingSensorMustSayWhereItIs() {
        Part part = IntakeFixture.part(0);
        part.setSensor("ferry");
        Intake intake = decode(part);
        assertThat(reason(intake).getReason()).isEqualTo(RejectReason.NO_SENSOR_POSITION);
        assertThat(reason(intake).getSentence()).isEqualTo("sensorPosition is missing: sensor ferry has no fixed"
                + " position"
                + " in the site file, so every part says where it is");
        assertThat(intake.body().orElseThrow().getUnusable()).isTrue();
        part.setSensorPosition(new GeoPoint(53.9, 8.1, null));
        assertThat(decode(part).reject()).isEmpty();
    }

    @Test
    void aMerePromiseOfAMovingSensorNeedsNoPosition() {
        Part part = IntakeFixture.part(0);
        part.setSensor("ferry");
        part.setClosesScan(false);
        part.setPromise(new SensorPromise(null));
        assertThat(decode(part).reject()).isEmpty();
    }

    @Test
    void whateverIsNotANumberIsABadField() {
        double[] bad = {Double.NaN, Double.POSITIVE_INFINITY, Double.NEGATIVE_INFINITY};
        for (double x : bad) {
            assertDetection(d -> d.setMeasurement(new GeodeticFix(x, 8.0)), "latitude",
                    "latitude is " + Shown.number(x));
            assertDetection(d -> d.setMeasurement(new GeodeticFix(8.0, x)), "longitude", "longitude is ");
            assertDetection(d -> d.setMeasurement(new OffsetFix(x, 8.0)), "eastMetres", "eastMetres is ");
            assertDetection(d -> d.setMeasurement(new OffsetFix(8.0, x)), "northMetres", "northMetres is ");
            assertDetection(d -> d.setNoise(new Noise(x, 0.0, 1.0)), "noise.first", "noise.first is ");
            assertDetection(d -> d.setNoise(new Noise(1.0, x, 1.0)), "noise.cross", "noise.cross is ");
            assertDetection(d -> d.setNoise(new Noise(1.0, 0.0, x)), "noise.second", "noise.second is ");
            assertDetection(d -> d.setHeightMetres(x), "heightMetres", "heightMetres is ");
            assertDetection(d -> d.setStrength(x), "strength", "a finite number is expected");
            assertPart(p -> p.setSensorHeadingDegrees(x), "sensorHeadingDegrees", "sensorHeadingDegrees is ");
            assertPart(p -> p.setSensorEastMetresPerSecond(x), "sensorEastMetresPerSecond", "a finite number");
            assertPart(p -> p.setSensorNorthMetresPerSecond(x), "sensorNorthMetresPerSecond", "a finite number");
            assertPart(p -> p.setSensorPosition(new GeoPoint(x, 8.0, null)), "sensorPosition.latitude",
                    "from -90 to 90");
            assertPart(p -> p.setSensorPosition(new GeoPoint(8.0, x, null)), "sensorPosition.longitude", "from -180");
            assertPart(p -> p.setSensorPosition(new GeoPoint(8.0, 8.0, x)), "sensorPosition.heightMetres",
                    "a finite number");
            assertPart(p -> p.setCoverage(new Coverage(x, null, null, null, null)), "coverage.fromMetres", " is ");
            assertPart(p -> p.setCoverage(new Coverage(null, x, null, null, null)), "coverage.toMetres", " is ");
            assertPart(p -> p.setCoverage(new Coverage(null, null, x, 1.0, null)), "coverage.fromAzimuthDegrees",
                    " is ");
            assertPart(p -> p.setCoverage(new Coverage(null, null, 1.0, x, null)), "coverage.toAzimuthDegrees", " is ");
            assertPart(p -> p.setCoverage(area(new GeoPoint(1.0, 1.0, null), new GeoPoint(x, 2.0, null),
                    new GeoPoint(2.0, 1.0, null))),
                    "coverage.area[1].latitude", "coverage.area[1].latitude is ");
        }
    }

    @Test
    void placesOutsideTheGlobeAreBadFields() {
        assertDetection(d -> d.setMeasurement(new GeodeticFix(91.0, 8.0)), "latitude",
                "latitude is 91.0: degrees north from -90 to 90 are allowed");
        assertDetection(d -> d.setMeasurement(new GeodeticFix(9.0, -180.25)), "longitude",
                "longitude is -180.25: degrees east from -180 to 180 are allowed");
        assertDetection(d -> d.setMeasurement(new OffsetFix(2e6, 0.0)), "eastMetres", "from -1000000 to 1000000");
        assertThat(decode(with(d -> d.setMeasurement(new GeodeticFix(-90.0, 180.0)))).reject()).isEmpty();
    }

    @Test
    void noiseMustBePositiveDefinite() {
        assertDetection(d -> d.setNoise(new Noise(1.0, 1.0, 1.0)), "noise",
                "noise is first 1.0, cross 1.0, second 1.0: first times second must be more than the square of cross");
        assertDetection(d -> d.setNoise(new Noise(0.0, 0.0, 1.0)), "noise.first", "noise.first is 0.0");
        assertDetection(d -> d.setNoise(new Noise(1.0, 0.0, -4.0)), "noise.second", "noise.second is -4.0");
        assertThat(decode(with(d -> d.setNoise(new Noise(4.0, -1.9, 1.0)))).reject()).isEmpty();
    }

    @Test
    void aDetectionIsSeenWithinTheLook() {
        long end = SCAN_TIME + 2_500_000;
        assertThat(decode(with(d -> d.setTimeMicros(SCAN_TIME))).reject()).isEmpty();
        assertThat(decode(with(d -> d.setTimeMicros(end))).reject()).isEmpty();
        assertDetection(d -> d.setTimeMicros(SCAN_TIME - 1), "timeMicros", "timeMicros is 2031-05-01T04:00:42.499999Z");
        assertDetection(d -> d.setTimeMicros(end + 1), "timeMicros",
                "timeMicros is 2031-05-01T04:00:45.000001Z: the look"
                + " lasts from 2031-05-01T04:00:42.500000Z to 2031-05-01T04:00:45.000000Z (sweepSeconds of sensor"
                + " north-shore is 2.5)");
        assertDetection(d -> d.setTimeMicros(Long.MIN_VALUE), "timeMicros", Times.ALLOWED);
    }

    @Test
    void rangeAndBearingFromAPositionSensorIsTheWrongMeasurement() {
        Intake intake = decode(with(d -> d.setMeasurement(new PolarFix(100.0, 20.0, null))));
        assertThat(reason(intake)).isEqualTo(new ReasonCount(RejectReason.WRONG_MEASUREMENT, "measurement", 1,
                List.of(0),
                "detection 0: sensor north-shore measures positions: a detection gives latitude and longitude,"
                        + " or eastMetres and northMetres, or a range and an azimuth with a noise of their own"));
        assertThat(intake.body().orElseThrow().getPart().getDetections()).hasSize(1);
    }

    @Test
    void textsMustBeTextAndNotEndless() {
        assertDetection(d -> d.setId("x".repeat(1001)), "id", "(1001 characters): at most 1000 characters are allowed");
        assertDetection(d -> d.setDeclaredIdentity("a\uFFFDb"), "declaredIdentity", "text in UTF-8 is expected");
        byte[] bytes = Wire.encode(IntakeFixture.part(2));
        int id = indexOf(bytes, (byte) 'a', (byte) '1');
        bytes[id] = (byte) 0xFF;
        Intake intake = decode(bytes);
        assertThat(reason(intake).getField()).isEqualTo("id");
        assertThat(intake.body().orElseThrow().getPart().getDetections())
                .extracting(Detection::getIndex).containsExactly(0);
    }

    @Test
    void aBadFieldOfThePartCostsThePartButStillClosesTheScan() {
        assertPart(p -> p.setPart(-1), "part", "part is -1: a number 0 or more is allowed");
        assertPart(p -> p.setScan(-5L), "scan", "scan is -5: a number 0 or more is allowed");
        assertPart(p -> p.setPromise(new SensorPromise(-1L)), "promise.nothingBeforeMicros", Times.ALLOWED);
        assertPart(p -> p.setCoverage(new Coverage(5.0, 5.0, null, null, null)), "coverage.toMetres",
                "coverage.toMetres is 5.0: more than coverage.fromMetres is allowed, which is 5.0");
        assertPart(p -> p.setCoverage(new Coverage(-1.0, null, null, null, null)), "coverage.fromMetres", "is -1.0");
        assertPart(p -> p.setCoverage(new Coverage(null, null, 5.0, null, null)), "coverage.toAzimuthDegrees",
                "coverage.toAzimuthDegrees is missing: a sector is given by its start and its end");
        assertPart(p -> p.setCoverage(new Coverage(null, null, null, 5.0, null)), "coverage.fromAzimuthDegrees",
                "missing");
        assertPart(p -> p.setCoverage(new Coverage(null, null, 5.0, 5.0, null)), "coverage.toAzimuthDegrees",
                "a width");
        assertPart(p -> p.setCoverage(new Coverage(null, null, 5.0, 361.0, null)), "coverage.toAzimuthDegrees",
                "0 to 360");
        assertPart(p -> p.setCoverage(area(new GeoPoint(1.0, 1.0, null), new GeoPoint(2.0, 2.0, null))),
                "coverage.area",
                "coverage.area has 2 corners: 3 to 1000 are allowed");
        GeoPoint corner = new GeoPoint(1.0, 1.0, null);
        assertPart(p -> p.setCoverage(area(corner, new GeoPoint(1.0, 2.0, null), new GeoPoint(2.0, 2.0, null), corner)),
                "coverage.area", "the first corner is not repeated");
        assertPart(p -> p.setCoverage(area(corner, new GeoPoint(2.0, 2.0, null), new GeoPoint(2.0, 1.0, null),
                new GeoPoint(1.0, 2.0, null))), "coverage.area", "crosses or touches itself");
    }

    @Test
    void aSectorMayCrossNorth() {
        Part part = IntakeFixture.part(0);
        part.setCoverage(new Coverage(null, null, 350.0, 10.0, null));
        assertThat(decode(part).reject()).isEmpty();
    }

    @Test
    void whatIsGoodOfABadPartIsPassedOn() {
        Part part = IntakeFixture.part(2);
        part.setScan(-1L);
        part.setPromise(new SensorPromise(SCAN_TIME + 9));
        Part passed = decode(part).body().orElseThrow().getPart();
        assertThat(passed.getPromise()).isEqualTo(new SensorPromise(SCAN_TIME + 9));
        assertThat(passed.getScan()).isNull();
        assertThat(passed.getPart()).isEqualTo(3);
    }

    @ParameterizedTest
    @ValueSource(longs = {-1, Times.LATEST_MICROS, Long.MAX_VALUE, Long.MIN_VALUE})
    void aScanTimeBefore1970OrAfter2199IsNotPassedOn(long micros) {
        Part part = IntakeFixture.part(1);
        part.setScanTimeMicros(micros);
        Intake intake = decode(part);
        assertWholly(intake, RejectReason.BAD_FIELD, "scanTimeMicros is " + micros + " microseconds after 1970 began");
        assertThat(intake.reject().orElseThrow().getScanTimeMicros()).isNull();
    }

    @Test
    void severalFaultsAreSeveralReasons() {
        Part part = IntakeFixture.part(2);
        part.getDetections().get(0).setMeasurement(new GeodeticFix(95.0, 200.0));
        part.getDetections().get(0).setStrength(Double.NaN);
        part.getDetections().get(1).setTimeMicros(5L);
        Intake intake = decode(part);
        assertThat(intake.reject().orElseThrow().getReasons())
                .extracting(ReasonCount::getField).containsExactly("strength", "latitude", "longitude", "timeMicros");
        assertThat(intake.reject().orElseThrow().getSentence()).contains("nothing was used: detection 0: strength");
    }

    @Test
    void aFloodIsSummarisedByCount() {
        Faults faults = new Faults();
        for (int i = 0; i < 500; i++) {
            int index = i;
            faults.detection(i, RejectReason.BAD_FIELD, "latitude", () -> "latitude is " + (91 + index));
        }
        ReasonCount reason = faults.reasons().get(0);
        assertThat(reason.getCount()).isEqualTo(500);
        assertThat(reason.getIndexes()).isEqualTo(IntStream.range(0, 100).boxed().toList());
        assertThat(reason.getSentence()).isEqualTo("detection 0: latitude is 91 (and 499 more detections likewise)");
    }

    @Test
    void inventedFieldNamesDoNotMakeARejectEndless() {
        Faults faults = new Faults();
        for (int i = 0; i < 1000; i++) {
            faults.detection(i, RejectReason.BAD_FIELD, "x" + i, () -> "who knows");
        }
        assertThat(faults.reasons()).hasSize(Faults.FIELDS_TOLD_APART + 1);
        assertThat(faults.reasons().stream().mapToInt(ReasonCount::getCount).sum()).isEqualTo(1000);
    }

    @Test
    void theOriginalIsKeptWholeUpTo256KibAndBeyondByDigestPositionAndBeginning() {
        byte[] small = new byte[256 * 1024];
        Reject kept = decoder.decode(small, Optional.of(new SourcePosition(4, 99))).reject().orElseThrow();
        assertThat(kept.getOriginal().array()).isEqualTo(small);
        assertThat(kept.getLengthBytes()).isEqualTo(small.length);
        assertThat(kept.getSha256()).isNull();
        assertThat(kept.getSourceOffset()).isNull();
        byte[] large = new byte[256 * 1024 + 1];
        large[4095] = 7;
        Reject cut = decoder.decode(large, Optional.of(new SourcePosition(4, 99))).reject().orElseThrow();
        assertThat(cut.getOriginal().array()).isEqualTo(Arrays.copyOf(large, 4096));
        assertThat(cut.getLengthBytes()).isEqualTo(large.length);
        assertThat(cut.getSha256()).isEqualTo(Digests.sha256(large));
        assertThat(cut.getSourcePartition()).isEqualTo(4);
        assertThat(cut.getSourceOffset()).isEqualTo(99L);
    }

    @Test
    void theSameBytesGiveTheSameRejectBytes() {
        Part part = IntakeFixture.part(5);
        part.getDetections().get(2).setStrength(Double.NaN);
        byte[] bytes = Wire.encode(part);
        assertThat(Wire.encode(decode(bytes).reject().orElseThrow()))
                .isEqualTo(Wire.encode(new PartDecoder(IntakeFixture.site()).decode(bytes, Optional.empty())
                        .reject().orElseThrow()));
    }

    private Intake decode(Part part) {
        return decode(Wire.encode(part));
    }

    private Intake decode(byte[] bytes) {
        return decoder.decode(bytes, Optional.empty());
    }

    /** A part of two detections of which the first is changed. */
    private static Part with(Consumer<Detection> change) {
        Part part = IntakeFixture.part(2);
        change.accept(part.getDetections().get(0));
        return part;
    }

    private void assertDetection(Consumer<Detection> change, String field, String sentence) {
        Intake intake = decode(with(change));
        assertThat(intake.body().orElseThrow().getPart().getDetections())
                .extracting(Detection::getIndex).containsExactly(1);
        assertThat(intake.body().orElseThrow().getUnusable()).isFalse();
        assertThat(intake.reject().orElseThrow().getReasons()).hasSize(1);
        ReasonCount reason = reason(intake);
        assertThat(reason.getReason()).isEqualTo(RejectReason.BAD_FIELD);
        assertThat(reason.getField()).isEqualTo(field);
        assertThat(reason.getCount()).isEqualTo(1);
        assertThat(reason.getIndexes()).containsExactly(0);
        assertThat(reason.getSentence()).startsWith("detection 0: ").contains(sentence);
    }

    private void assertPart(Consumer<Part> change, String field, String sentence) {
        Part part = IntakeFixture.part(2);
        change.accept(part);
        Intake intake = decode(part);
        PartBody body = intake.body().orElseThrow();
        assertThat(body.getUnusable()).isTrue();
        assertThat(body.getPart().getClosesScan()).isTrue();
        assertThat(body.getPart().getDetections()).isEmpty();
        assertThat(body.getDetectionsSent()).isEqualTo(2);
        assertThat(intake.reject().orElseThrow().getWhole()).isTrue();
        ReasonCount reason = reason(intake);
        assertThat(reason.getReason()).isEqualTo(RejectReason.BAD_FIELD);
        assertThat(reason.getField()).isEqualTo(field);
        assertThat(reason.getCount()).isZero();
        assertThat(reason.getSentence()).contains(sentence);
    }

    private static void assertWholly(Intake intake, RejectReason reason, String sentence) {
        assertThat(intake.body()).isEmpty();
        Reject reject = intake.reject().orElseThrow();
        assertThat(reject.getWhole()).isTrue();
        assertThat(reject.getReasons()).hasSize(1);
        assertThat(reject.getReasons().get(0).getReason()).isEqualTo(reason);
        assertThat(reject.getReasons().get(0).getSentence()).contains(sentence);
        assertThat(reject.getSentence()).contains(sentence);
    }

    private static ReasonCount reason(Intake intake) {
        return intake.reject().orElseThrow().getReasons().get(0);
    }

    private static Coverage area(GeoPoint... corners) {
        return new Coverage(null, null, null, null, List.of(corners));
    }

    private static Part huge(int detections) {
        Part part = IntakeFixture.part(0);
        List<Detection> list = new ArrayList<>();
        Detection detection = IntakeFixture.at(0, 53.9, 8.1);
        for (int i = 0; i < detections; i++) {
            list.add(detection);
        }
        part.setDetections(list);
        return part;
    }

    private static int indexOf(byte[] bytes, byte first, byte second) {
        return IntStream.range(0, bytes.length - 1)
                .filter(i -> bytes[i] == first && bytes[i + 1] == second).findFirst().orElseThrow();
    }
}
