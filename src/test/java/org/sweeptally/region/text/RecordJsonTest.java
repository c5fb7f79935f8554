package org.sweeptally.region.text;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.sweeptally.region.intake.IntakeFixture.SCAN_TIME;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.util.Base64;
import java.util.List;
import java.util.Optional;
import java.util.Random;
import java.util.stream.IntStream;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.Birth;
import org.sweeptally.event.Count;
import org.sweeptally.event.DeclaredIdentity;
import org.sweeptally.event.DetectionRef;
import org.sweeptally.event.End;
import org.sweeptally.event.IdentityShare;
import org.sweeptally.event.EndWhy;
import org.sweeptally.event.NumberDistribution;
import org.sweeptally.event.Reject;
import org.sweeptally.event.RejectReason;
import org.sweeptally.event.Track;
import org.sweeptally.event.UsedDetection;
import org.sweeptally.region.intake.IntakeFixture;
import org.sweeptally.region.intake.Original;
import org.sweeptally.region.intake.PartDecoder;
import org.sweeptally.region.intake.Rejects;
import org.sweeptally.region.intake.SourcePosition;

class RecordJsonTest {

    private static final String OBJECT = "north-shore-20310501T040042.500000Z-0-3";

    @Test
    void aTrackIsOneLineWithTimesAsText() throws IOException {
        String line = RecordJson.line(track());
        assertThat(line).doesNotContain("\n").doesNotContain("Micros");
        JsonNode json = new ObjectMapper().readTree(line);
        assertThat(json.fieldNames()).toIterable().containsExactly(
                "object", "region", "sequence", "sensor", "scanTime", "scan", "time", "latitude", "longitude",
                        "eastMetres",
                "northMetres", "eastMetresPerSecond", "northMetresPerSecond", "covariance", "existence", "moving",
                "identityProbability", "mayBe", "firstSeen",
                "lastDetected", "used", "declaredIdentity");
        assertThat(json.get("object").asText()).isEqualTo(OBJECT);
        assertThat(json.get("scanTime").asText()).isEqualTo("2031-05-01T04:00:42.500000Z");
        assertThat(json.get("time").asText()).isEqualTo("2031-05-01T04:00:45.000000Z");
        assertThat(json.get("scan").asLong()).isEqualTo(17);
        assertThat(json.get("latitude").asDouble()).isEqualTo(53.91);
        assertThat(json.get("existence").asDouble()).isEqualTo(0.999);
        assertThat(json.get("moving").isNull()).isTrue();
        assertThat(json.get("covariance")).hasSize(16);
        JsonNode used = json.get("used").get(0);
        assertThat(used.get("ref").get("scanTime").asText()).isEqualTo("2031-05-01T04:00:42.500000Z");
        assertThat(used.get("ref").get("index").asInt()).isEqualTo(3);
        assertThat(used.get("id").asText()).isEqualTo("a3");
        assertThat(json.get("declaredIdentity").get("name").asText()).isEqualTo("gull");
    }

    @Test
    void aBirthAnEndAndACountReadAsTheyAreNamed() {
        assertThat(RecordJson.line(new Birth(OBJECT, "outer", 5L, "north-shore", SCAN_TIME, null, SCAN_TIME, 53.9, 8.0,
                0.5, SCAN_TIME, true))).isEqualTo("{\"object\":\"" + OBJECT + "\",\"region\":\"outer\",\"sequence\":5,"
                + "\"sensor\":\"north-shore\",\"scanTime\":\"2031-05-01T04:00:42.500000Z\",\"scan\":null,"
                + "\"time\":\"2031-05-01T04:00:42.500000Z\",\"latitude\":53.9,\"longitude\":8.0,\"existence\":0.5,"
                + "\"firstSeen\":\"2031-05-01T04:00:42.500000Z\",\"again\":true}");
        assertThat(RecordJson.line(new End(OBJECT, "outer", 5L, "north-shore", SCAN_TIME, 1L, SCAN_TIME, EndWhy.FADED,
                53.9, 8.0, 0.05, SCAN_TIME, SCAN_TIME))).contains("\"why\":\"FADED\"", "\"lastDetected\":\"2031-");
        assertThat(RecordJson.line(new Count("outer", 5L, "north-shore", SCAN_TIME, 1L, SCAN_TIME,
                new NumberDistribution(1.0, 0.46, 0, List.of(0.216, 0.582, 0.188, 0.014), 0.0, 1e-13, 0, 2, 0.986),
                        null,
                0.25, 1, 0, 0, 3, 1))).contains(
                        "\"all\":{\"mean\":1.0,\"variance\":0.46,\"bandOffset\":0,\"band\":[0.216,0.582,0.188,0.014],"
                                + "\"below\":0.0,\"above\":1.0E-13,\"least\":0,\"most\":2,"
                                + "\"held\":0.986},\"moving\":null,"
                                + "\"expectedUnseen\":0.25,\"tracks\":1,");
    }

    @Test
    void anOriginalIsTextWhereItIsUtf8AndBase64WhereNot() throws IOException {
        Reject text = new PartJson(IntakeFixture.site())
                .read("{\"sensor\":\"H\u00f6he\"}".getBytes(StandardCharsets.UTF_8),
                        Optional.empty()).reject().orElseThrow();
        JsonNode textJson = new ObjectMapper().readTree(RecordJson.line(text));
        assertThat(textJson.get("originalText").asText()).isEqualTo("{\"sensor\":\"H\u00f6he\"}");
        assertThat(textJson.has("originalBase64")).isFalse();
        assertThat(textJson.get("reasons").get(0).get("reason").asText()).isEqualTo("BAD_FIELD");
        byte[] bytes = {(byte) 0xC3, 1, 2, 3};
        Reject binary = new PartDecoder(IntakeFixture.site()).decode(bytes, Optional.empty()).reject().orElseThrow();
        JsonNode binaryJson = new ObjectMapper().readTree(RecordJson.line(binary));
        assertThat(Base64.getDecoder().decode(binaryJson.get("originalBase64").asText())).isEqualTo(bytes);
        assertThat(binaryJson.has("originalText")).isFalse();
        assertThat(binary.getOriginal().remaining()).as("writing does not use the bytes up").isEqualTo(4);
    }

    @Test
    void theDigestOfALongOriginalIsHexadecimal() throws IOException {
        byte[] bytes = new byte[300_000];
        Reject reject = Rejects.unreadable(RejectReason.NOT_A_PART, "it is nothing",
                Original.of(bytes, Optional.of(new SourcePosition(1, 2))));
        JsonNode json = new ObjectMapper().readTree(RecordJson.line(reject));
        assertThat(json.get("sha256").asText()).matches("[0-9a-f]{64}");
        assertThat(json.get("lengthBytes").asLong()).isEqualTo(300_000);
        assertThat(json.get("sourceOffset").asLong()).isEqualTo(2);
    }

    @Test
    void whatIsNotFiniteIsNeverWritten() {
        for (double bad : new double[] {Double.NaN, Double.POSITIVE_INFINITY, Double.NEGATIVE_INFINITY}) {
            Track existence = track();
            existence.setExistence(bad);
            assertThatThrownBy(() -> RecordJson.line(existence)).isInstanceOf(IllegalArgumentException.class)
                    .hasMessage("Track.existence is " + bad + ": only finite numbers are written");
            Track covariance = track();
            covariance.setCovariance(List.of(1.0, bad));
            assertThatThrownBy(() -> RecordJson.line(covariance)).hasMessageContaining("Track.covariance is " + bad);
        }
    }

    @Test
    void everyNumberIsReadBackToTheLastBit() throws IOException {
        Random random = new Random(51);
        for (int i = 0; i < 2_000; i++) {
            double value = Double.longBitsToDouble(random.nextLong());
            if (Double.isFinite(value)) {
                Track track = track();
                track.setEastMetres(value);
                JsonNode json = new ObjectMapper().readTree(RecordJson.line(track));
                assertThat(json.get("eastMetres").asDouble()).as("seed 51, case %d", i).isEqualTo(value);
            }
        }
    }

    /** Java before 19 writes 2E23 as 1.9999999999999998E23 (JDK-4511638, from memory; seen in Java 17). */
    @Test
    void numbersAreWrittenWithTheFewestDigitsThatNameThem() {
        Track track = track();
        track.setEastMetres(2e-3);
        track.setNorthMetres(2e23);
        assertThat(RecordJson.line(track)).contains("\"eastMetres\":0.002,\"northMetres\":2.0E23,");
    }

    @Test
    void textCannotBreakTheLine() throws IOException {
        Track track = track();
        String nasty = "a\"b\\c\nd\u0000e\u2028f\ud83d\udea2";
        track.setDeclaredIdentity(new DeclaredIdentity(nasty, 1.0));
        String line = RecordJson.line(track);
        assertThat(line).doesNotContain("\n");
        assertThat(new ObjectMapper().readTree(line).get("declaredIdentity").get("name").asText()).isEqualTo(nasty);
    }

    private static Track track() {
        List<Double> covariance = IntStream.range(0, 16).mapToObj(i -> i % 5 == 0 ? 4.0 : 0.0).toList();
        return new Track(OBJECT, "outer", 5L, "north-shore", SCAN_TIME, 17L, SCAN_TIME + 2_500_000, 53.91, 8.12,
                100.5, -20.0,
                3.0, -4.0, covariance, 0.999, null, 0.9, List.of(new IdentityShare("north-shore-x", 0.1)), SCAN_TIME,
                SCAN_TIME,
                List.of(new UsedDetection(new DetectionRef("north-shore", SCAN_TIME, 0, 3), "a3", 0.75)),
                new DeclaredIdentity("gull", 0.9));
    }
}
