package org.sweeptally.region.wire;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatCode;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.util.Arrays;
import java.util.Random;
import org.apache.avro.Schema;
import org.apache.avro.io.BlockingBinaryEncoder;
import org.apache.avro.io.EncoderFactory;
import org.apache.avro.specific.SpecificDatumWriter;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.Count;
import org.sweeptally.event.NumberDistribution;
import org.sweeptally.event.Part;
import org.sweeptally.region.intake.IntakeFixture;

class BodyWalkTest {

    private static final Schema PART = Part.getClassSchema();
    private static final int DETECTIONS = PART.getField("detections").pos();

    @Test
    void aBodyThatAvroWroteIsSound() {
        Random random = new Random(3);
        for (int i = 0; i < 500; i++) {
            Part part = IntakeFixture.random(random);
            BodyWalk.Found found = BodyWalk.over(PART, Wire.body(part), 0);
            assertThat(found.fault()).as("seed 3, part %d", i).isNull();
            assertThat(found.items()[DETECTIONS]).isEqualTo(part.getDetections().size());
        }
    }

    @Test
    void everyTruncationIsBroken() {
        byte[] body = Wire.body(IntakeFixture.part(3));
        for (int length = 0; length < body.length; length++) {
            assertThat(BodyWalk.over(PART, Arrays.copyOf(body, length), 0).sound()).as("%d bytes", length).isFalse();
        }
    }

    @Test
    void bytesLeftOverAreNamed() {
        byte[] body = Wire.body(IntakeFixture.part(1));
        BodyWalk.Found found = BodyWalk.over(PART, Arrays.copyOf(body, body.length + 3), 0);
        assertThat(found.fault())
                .isEqualTo("3 bytes are left over after the record's end at byte " + body.length + " of its body");
    }

    @Test
    void arraysInSeveralBlocksWithTheirLengthsAreSound() throws IOException {
        Part part = IntakeFixture.part(40);
        ByteArrayOutputStream out = new ByteArrayOutputStream();
        BlockingBinaryEncoder encoder = (BlockingBinaryEncoder)
                new EncoderFactory().configureBlockSize(100).blockingBinaryEncoder(out, null);
        new SpecificDatumWriter<Part>(PART, OurClasses.DATA).write(part, encoder);
        encoder.flush();
        byte[] blocks = out.toByteArray();
        assertThat(blocks).isNotEqualTo(Wire.body(part));
        BodyWalk.Found found = BodyWalk.over(PART, blocks, 0);
        assertThat(found.fault()).isNull();
        assertThat(found.items()[DETECTIONS]).isEqualTo(40);
        assertThat(Wire.decodeBody(PART, blocks, 0, blocks.length, Part.class)).isEqualTo(part);
    }

    /** Whatever passes the walk Avro's decoder reads, and what was read is written and read again as the same. */
    @Test
    void whatIsSoundCanBeDecodedWhateverBytesWereChanged() {
        long seed = 4;
        Random random = new Random(seed);
        int sound = 0;
        for (int i = 0; i < 20_000; i++) {
            byte[] body = Wire.body(IntakeFixture.random(random));
            for (int changes = 1 + random.nextInt(3); changes > 0; changes--) {
                body[random.nextInt(body.length)] = (byte) random.nextInt();
            }
            if (BodyWalk.over(PART, body, 0).sound()) {
                sound++;
                assertThatCode(() -> {
                    Part part = Wire.decodeBody(PART, body, 0, body.length, Part.class);
                    byte[] again = Wire.body(part);
                    assertThat(Wire.body(Wire.decodeBody(PART, again, 0, again.length, Part.class))).isEqualTo(again);
                }).as("seed %d, case %d", seed, i).doesNotThrowAnyException();
            }
        }
        assertThat(sound).isBetween(1_000, 19_000);
    }

    @Test
    void lengthsAndCountsBeyondTheEndAreBroken() {
        byte[] text = {(byte) 0xFE, (byte) 0xFF, (byte) 0xFF, (byte) 0xFF, 0x0F};
        assertThat(BodyWalk.over(PART, text, 0).fault())
                .isEqualTo("in field sensor, at byte 5 of the body: a text has 2147483647 bytes, but only 0 follow");
        Count count = new Count("outer", 1L, "north-shore", 1L, null, 1L,
                new NumberDistribution(1.0, 1.0, 0, java.util.List.of(), 0.0, 0.0, 0, 1, 1.0), null, 0.0, 0, 0, 0, 1,
                        1);
        byte[] body = Wire.body(count);
        assertThat(BodyWalk.over(Count.getClassSchema(), body, 0).fault()).isNull();
        int band = 1 + "outer".length() + 1 + 1 + "north-shore".length() + 1 + 1 + 1 + 16 + 1;
        assertThat(body[band]).isZero();
        byte[] hostile = Arrays.copyOf(body, band + 11);
        Arrays.fill(hostile, band, band + 9, (byte) 0xFF);
        hostile[band + 9] = 1;
        hostile[band + 10] = 0;
        assertThat(BodyWalk.over(Count.getClassSchema(), hostile, 0).fault())
                .contains("field all", "an array says that 9223372036854775808 items follow, but only 0 bytes do");
        hostile[band] = (byte) 0xFE;
        assertThat(BodyWalk.over(Count.getClassSchema(), hostile, 0).fault())
                .contains("an array says that 9223372036854775807 items follow, but only 1 bytes do");
    }
}
