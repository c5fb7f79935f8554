package org.sweeptally.region.wire;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.HexFormat;
import java.util.List;
import java.util.Random;
import java.util.stream.Stream;
import org.apache.avro.Schema;
import org.apache.avro.specific.SpecificData;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Part;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.TickBody;
import org.sweeptally.region.intake.IntakeFixture;

class WireTest {

    @Test
    void aMessageIsByteForByteWhatAvrosOwnSingleObjectEncoderWrites() throws IOException {
        Random random = new Random(1);
        for (int i = 0; i < 200; i++) {
            Part part = IntakeFixture.random(random);
            ByteBuffer theirs = Part.getEncoder().encode(part);
            byte[] expected = new byte[theirs.remaining()];
            theirs.get(expected);
            assertThat(Wire.encode(part)).as("seed 1, part %d", i).isEqualTo(expected);
        }
    }

    @Test
    void aMessageBeginsWithTheMarkAndTheFingerprintLowestByteFirst() {
        byte[] bytes = Wire.encode(IntakeFixture.part(1));
        long fingerprint = KnownSchemas.fingerprint(Part.getClassSchema());
        assertThat(bytes[0]).isEqualTo((byte) 0xC3);
        assertThat(bytes[1]).isEqualTo((byte) 0x01);
        for (int i = 0; i < 8; i++) {
            assertThat(bytes[2 + i]).isEqualTo((byte) (fingerprint >>> 8 * i));
        }
    }

    /** Apache Avro, share/test/data/schema-tests.txt: fingerprint of "int" (number from memory). */
    @Test
    void theFingerprintIsTheOneOfTheAvroSpecification() {
        assertThat(KnownSchemas.fingerprint(Schema.create(Schema.Type.INT))).isEqualTo(8247732601305521295L);
    }

    /** FIPS 180-4, example SHA-256 of "abc". */
    @Test
    void theDigestIsSha256() {
        byte[] abc = "abc".getBytes(StandardCharsets.US_ASCII);
        assertThat(HexFormat.of().formatHex(Digests.sha256(abc).bytes()))
                .isEqualTo("ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
        assertThat(Digests.sha256("xabcx".getBytes(StandardCharsets.US_ASCII), 1, 3)).isEqualTo(Digests.sha256(abc));
    }

    @Test
    void theDigestOfARecordIsOverItsBodyWithoutHeader() {
        Part part = IntakeFixture.part(2);
        byte[] message = Wire.encode(part);
        assertThat(Wire.digest(part))
                .isEqualTo(Digests.sha256(message, Wire.HEADER_BYTES, message.length - Wire.HEADER_BYTES));
        Part other = IntakeFixture.part(2);
        other.getDetections().get(1).setStrength(1.0);
        assertThat(Wire.digest(other)).isNotEqualTo(Wire.digest(part));
    }

    @Test
    void whatWasEncodedIsDecodedAgain() {
        Random random = new Random(2);
        for (int i = 0; i < 200; i++) {
            Part part = IntakeFixture.random(random);
            assertThat(Wire.decode(Wire.encode(part), Part.class)).as("seed 2, part %d", i).isEqualTo(part);
            LogEntry entry = LogEntry.newBuilder().setSender("north-shore")
                    .setBody(new PartBody(part, 7, false, Wire.digest(part))).build();
            assertThat(Wire.decode(Wire.encode(entry), LogEntry.class)).isEqualTo(entry);
        }
    }

    @Test
    void everyRecordOfTheContractIsKnown() throws IOException {
        List<String> known = KnownSchemas.ours().all().stream().map(Schema::getName).toList();
        try (Stream<Path> files = Files.list(Path.of("schemas"))) {
            List<Path> records = files.filter(WireTest::isRecord).toList();
            assertThat(records).isNotEmpty();
            assertThat(records).allSatisfy(file -> assertThat(known).contains(nameIn(file)));
            assertThat(known).hasSameSizeAs(records).doesNotHaveDuplicates();
        }
    }

    @Test
    void aSchemaIsFoundByItsFingerprint() {
        for (Schema schema : KnownSchemas.ours().all()) {
            assertThat(KnownSchemas.ours().find(KnownSchemas.fingerprint(schema))).contains(schema);
            assertThat(OurClasses.DATA.getClass(schema).getName()).isEqualTo(schema.getFullName());
        }
        assertThat(KnownSchemas.ours().find(42)).isEmpty();
        assertThat(KnownSchemas.ours().findByFingerprint(42)).isNull();
    }

    @Test
    void decodingAnotherTypeOrBrokenBytesIsRefusedWithASentence() {
        byte[] tick = Wire.encode(new TickBody(5L));
        assertThatThrownBy(() -> Wire.decode(tick, Part.class))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessage("the message is a TickBody: a Part is expected");
        assertThatThrownBy(() -> Wire.decode(Arrays.copyOf(tick, tick.length + 1), TickBody.class))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("the TickBody is broken: 1 bytes are left over");
        assertThatThrownBy(() -> Wire.decode(new byte[0], Part.class))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("it is empty");
    }

    private static boolean isRecord(Path file) {
        return read(file).getType() == Schema.Type.RECORD;
    }

    private static String nameIn(Path file) {
        return read(file).getName();
    }

    /** The generated class of a file, whose name is the file's in camel case. */
    private static Schema read(Path file) {
        StringBuilder name = new StringBuilder("org.sweeptally.event.");
        for (String word : file.getFileName().toString().replace(".avsc", "").split("-")) {
            name.append(Character.toUpperCase(word.charAt(0))).append(word.substring(1));
        }
        try {
            return SpecificData.get().getSchema(Class.forName(name.toString()));
        } catch (ClassNotFoundException e) {
            throw new IllegalStateException(file + " has no class " + name, e);
        }
    }
}
