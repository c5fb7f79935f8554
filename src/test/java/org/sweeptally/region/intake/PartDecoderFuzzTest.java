package org.sweeptally.region.intake;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Arrays;
import java.util.Optional;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.Part;
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
            Accounting.nothingIsLost(intake, name);
            passed += intake.body().isPresent() ? 1 : 0;
            intake.reject().ifPresent(reject -> {
                assertThat(reject.getOriginal().array()).as(name).isEqualTo(bytes);
                assertThat(RecordJson.line(reject)).as(name).contains("\"sentence\"");
                assertThat(Wire.decode(Wire.encode(reject), Reject.class)).as(name).isEqualTo(reject);
            });
        }
        assertThat(passed).isBetween(1_000, 29_000);
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
