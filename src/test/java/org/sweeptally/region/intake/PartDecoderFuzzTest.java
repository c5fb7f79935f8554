package org.sweeptally.region.intake;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Arrays;
import java.util.BitSet;
import java.util.Optional;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.Detection;
import org.sweeptally.event.Part;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.ReasonCount;
import org.sweeptally.event.Reject;
import org.sweeptally.region.text.RecordJson;
import org.sweeptally.region.wire.Wire;

class PartDecoderFuzzTest {

    private final PartDecoder decoder = new PartDecoder(IntakeFixture.site());

    @Test
    void everyValidPartPassesWithoutAReject() {
        long seed = 11;
        Random random = new Random(seed);
        for (int i = 0; i < 2_000; i++) {
            Part part = IntakeFixture.random(random);
            Intake intake = decoder.decode(Wire.encode(part), Optional.empty());
            assertThat(intake.reject()).as("seed %d, case %d", seed, i).isEmpty();
            assertThat(intake.body().orElseThrow().getPart()).isEqualTo(part);
        }
    }

    @Test
    void noBytesMakeItFailAndNothingIsLost() {
        long seed = 12;
        Random random = new Random(seed);
        int passed = 0;
        for (int i = 0; i < 30_000; i++) {
            byte[] bytes = mutated(Wire.encode(IntakeFixture.random(random)), random);
            String name = "seed " + seed + ", case " + i;
            Intake intake = decoder.decode(bytes, Optional.empty());
            nothingIsLost(intake, name);
            passed += intake.body().isPresent() ? 1 : 0;
            intake.reject().ifPresent(reject -> {
                assertThat(reject.getOriginal().array()).as(name).isEqualTo(bytes);
                assertThat(RecordJson.line(reject)).as(name).contains("\"sentence\"");
                assertThat(Wire.decode(Wire.encode(reject), Reject.class)).as(name).isEqualTo(reject);
            });
        }
        assertThat(passed).isBetween(1_000, 29_000);
    }

    /** Every detection that was sent is either used, or named in the reject, or went with its whole part. */
    public static void nothingIsLost(Intake intake, String name) {
        if (intake.body().isEmpty()) {
            assertThat(intake.reject().orElseThrow().getWhole()).as(name).isTrue();
            return;
        }
        PartBody body = intake.body().get();
        BitSet accounted = new BitSet();
        for (Detection detection : body.getPart().getDetections()) {
            assertThat(accounted.get(detection.getIndex())).as(name).isFalse();
            accounted.set(detection.getIndex());
        }
        if (intake.reject().isEmpty()) {
            assertThat(body.getUnusable()).as(name).isFalse();
        } else {
            Reject reject = intake.reject().get();
            assertThat(body.getUnusable()).as(name).isEqualTo(reject.getWhole());
            for (ReasonCount reason : reject.getReasons()) {
                assertThat(reason.getSentence()).as(name).isNotBlank();
                for (int index : reason.getIndexes()) {
                    assertThat(body.getPart().getDetections()).as(name).noneMatch(d -> d.getIndex() == index);
                    accounted.set(index);
                }
            }
            if (reject.getWhole()) {
                accounted.set(0, body.getDetectionsSent());
            }
        }
        assertThat(accounted.cardinality()).as(name).isEqualTo(body.getDetectionsSent());
        assertThat(accounted.length()).as(name).isEqualTo(body.getDetectionsSent());
    }

    private static byte[] mutated(byte[] bytes, Random random) {
        byte[] out = random.nextInt(8) == 0 ? Arrays.copyOf(bytes, random.nextInt(bytes.length + 20)) : bytes;
        for (int changes = random.nextInt(4); changes > 0 && out.length > 0; changes--) {
            int at = random.nextInt(10) == 0 ? random.nextInt(out.length) : Math.min(out.length - 1,
                    Wire.HEADER_BYTES + random.nextInt(out.length));
            out[at] = random.nextBoolean() ? (byte) random.nextInt() : (byte) (out[at] ^ 1 << random.nextInt(8));
        }
        return out;
    }
}
