package org.sweeptally.region.text;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.charset.StandardCharsets;
import java.util.Arrays;
import java.util.List;
import java.util.Optional;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.Reject;
import org.sweeptally.region.intake.Accounting;
import org.sweeptally.region.intake.Intake;
import org.sweeptally.region.intake.IntakeFixture;
import org.sweeptally.region.wire.Wire;

class PartJsonFuzzTest {

    private static final List<String> SNIPPETS = List.of(
            "NaN", "Infinity", "-Infinity", "null", "true", "\"\"", "{}", "[]", "1e999", "-1", "99999999999999999999",
            ",", ":", "{", "}", "[", "]", "\"", "\\u0000", "\\ud800", "\"latitude\":1,", "\"sensor\":1,", "INF", "-0.0",
            "0x10", "1e-400", "\"time\":\"2031-05-01T04:00:42.5Z\",");

    private final PartJson json = new PartJson(IntakeFixture.site());

    @Test
    void noLineMakesItFailAndNothingIsLost() {
        long seed = 41;
        Random random = new Random(seed);
        int passed = 0;
        for (int i = 0; i < 30_000; i++) {
            byte[] line = mutated(PartJson.write(IntakeFixture.random(random)).getBytes(StandardCharsets.UTF_8),
                    random);
            String name = "seed " + seed + ", case " + i;
            Intake intake = json.read(line, Optional.empty());
            Accounting.nothingIsLost(intake, name);
            passed += intake.body().isPresent() ? 1 : 0;
            intake.reject().ifPresent(reject -> {
                assertThat(reject.getOriginal().array()).as(name).isEqualTo(line);
                assertThat(RecordJson.line(reject)).as(name).contains("\"original");
                assertThat(Wire.decode(Wire.encode(reject), Reject.class)).as(name).isEqualTo(reject);
            });
        }
        assertThat(passed).isBetween(1_000, 29_000);
    }

    private static byte[] mutated(byte[] line, Random random) {
        byte[] out = line;
        for (int changes = 1 + random.nextInt(3); changes > 0 && out.length > 0; changes--) {
            int at = random.nextInt(out.length);
            switch (random.nextInt(5)) {
                case 0 -> out[at] = (byte) random.nextInt();
                case 1 -> out[at] = (byte) ('0' + random.nextInt(10));
                case 2 -> out = Arrays.copyOf(out, at);
                default -> out = spliced(out, at, SNIPPETS.get(random.nextInt(SNIPPETS.size())), random.nextInt(4));
            }
        }
        return out;
    }

    /** The line with a snippet in place of some bytes. */
    private static byte[] spliced(byte[] line, int at, String snippet, int replaced) {
        byte[] middle = snippet.getBytes(StandardCharsets.UTF_8);
        int after = Math.min(line.length, at + replaced);
        byte[] out = Arrays.copyOf(line, at + middle.length + line.length - after);
        System.arraycopy(middle, 0, out, at, middle.length);
        System.arraycopy(line, after, out, at + middle.length, line.length - after);
        return out;
    }
}
