package org.sweeptally.region.text;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.ByteArrayInputStream;
import java.io.IOException;
import java.io.InputStream;
import java.io.SequenceInputStream;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Collections;
import java.util.List;
import java.util.Optional;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.Part;
import org.sweeptally.event.Reject;
import org.sweeptally.event.RejectReason;
import org.sweeptally.region.intake.Intake;
import org.sweeptally.region.intake.IntakeFixture;
import org.sweeptally.region.wire.Digests;

class PartLinesTest {

    private static final String LINE = PartJson.write(IntakeFixture.part(2));

    @Test
    void everyLineIsReadTheLastWithoutItsEndToo() throws IOException {
        List<Part> parts = new ArrayList<>();
        StringBuilder text = new StringBuilder();
        for (int i = 0; i < 3_000; i++) {
            Part part = IntakeFixture.part(i % 4);
            part.setScan((long) i);
            parts.add(part);
            text.append(i == 0 ? "" : i % 2 == 0 ? "\n" : "\r\n").append(PartJson.write(part));
        }
        byte[] bytes = bytes(text.toString());
        PartLines lines = lines(new ByteArrayInputStream(bytes));
        for (Part part : parts) {
            Intake intake = lines.next().orElseThrow();
            assertThat(intake.reject()).isEmpty();
            assertThat(intake.body().orElseThrow().getPart()).isEqualTo(part);
        }
        assertThat(lines.next()).isEmpty();
        assertThat(lines.next()).isEmpty();
        assertThat(lines.linesRead()).isEqualTo(3_000);
        assertThat(lines.bytesRead()).isEqualTo(bytes.length);
    }

    @Test
    void emptyLinesArePassedOverAndCounted() throws IOException {
        PartLines lines = lines(stream("\n \t\r\n" + LINE + "\n\n"));
        assertThat(lines.next().orElseThrow().body()).isPresent();
        assertThat(lines.linesRead()).isEqualTo(3);
        assertThat(lines.next()).isEmpty();
        assertThat(lines.linesRead()).isEqualTo(4);
    }

    @Test
    void aByteOrderMarkIsNoFault() throws IOException {
        assertThat(lines(stream("\uFEFF" + LINE)).next().orElseThrow().reject()).isEmpty();
        assertThat(lines(stream("\uFEFF\n" + LINE)).next().orElseThrow().reject()).isEmpty();
        PartLines second = lines(stream(LINE + "\n\uFEFF" + LINE));
        second.next();
        assertThat(second.next().orElseThrow().reject()).isPresent();
    }

    @Test
    void aMalformedLineIsRejectedAndTheNextIsUsed() throws IOException {
        PartLines lines = lines(stream("{oops\n" + LINE));
        Reject reject = lines.next().orElseThrow().reject().orElseThrow();
        assertThat(reject.getReasons().get(0).getReason()).isEqualTo(RejectReason.NOT_A_PART);
        assertThat(new String(reject.getOriginal().array(), StandardCharsets.UTF_8)).isEqualTo("{oops");
        assertThat(lines.next().orElseThrow().body()).isPresent();
    }

    @Test
    void aLineBeyondTheBoundIsRejectedByLengthDigestAndBeginning() throws IOException {
        byte[] head = bytes("{\"sensor\":\"north-shore\","
                + "\"scanTime\":\"2031-05-01T04:00:42.5Z\",\"part\":5,\"detections\":[");
        byte[] longLine = Arrays.copyOf(head, PartLines.LONGEST_LINE_BYTES + 1);
        Arrays.fill(longLine, head.length, longLine.length, (byte) ' ');
        PartLines lines = lines(new SequenceInputStream(Collections.enumeration(List.of(
                new ByteArrayInputStream(longLine), stream("\n" + LINE)))));
        Intake intake = lines.next().orElseThrow();
        assertThat(intake.body()).isEmpty();
        Reject reject = intake.reject().orElseThrow();
        assertThat(reject.getReasons().get(0).getReason()).isEqualTo(RejectReason.TOO_LARGE);
        assertThat(reject.getSentence()).contains("the line has 16777217 bytes: at most 16777216 are read");
        assertThat(reject.getLengthBytes()).isEqualTo(longLine.length);
        assertThat(reject.getSha256()).isEqualTo(Digests.sha256(longLine));
        assertThat(reject.getOriginal().array()).isEqualTo(Arrays.copyOf(longLine, 4096));
        assertThat(reject.getSourceOffset()).isZero();
        assertThat(reject.getSensor()).isEqualTo("north-shore");
        assertThat(reject.getPart()).isEqualTo(5);
        assertThat(lines.next().orElseThrow().body()).isPresent();
        assertThat(lines.next()).isEmpty();
        assertThat(lines.bytesRead()).isEqualTo(longLine.length + 1 + LINE.length());
    }

    @Test
    void aLineAtTheBoundIsRead() throws IOException {
        byte[] line = Arrays.copyOf(bytes(LINE), PartLines.LONGEST_LINE_BYTES);
        Arrays.fill(line, LINE.length(), line.length, (byte) ' ');
        Intake intake = lines(new ByteArrayInputStream(line)).next().orElseThrow();
        assertThat(intake.reject()).isEmpty();
    }

    /** Far more than the memory of the tests: 3 GiB in one line. */
    @Test
    void aLineLongerThanAllMemoryIsRejected() throws IOException {
        long length = 3L << 30;
        PartLines lines = lines(new Spaces(length));
        Reject reject = lines.next().orElseThrow().reject().orElseThrow();
        assertThat(reject.getLengthBytes()).isEqualTo(length);
        assertThat(reject.getReasons().get(0).getReason()).isEqualTo(RejectReason.TOO_LARGE);
    }

    @Test
    void aStreamThatCannotBeReadIsTheCallersMatter() {
        InputStream broken = new InputStream() {
            @Override
            public int read() throws IOException {
                throw new IOException("the disk is gone");
            }
        };
        assertThatThrownBy(() -> lines(broken).next()).isInstanceOf(IOException.class).hasMessage("the disk is gone");
    }

    @Test
    void theOffsetOfALineIsItsNumberFromZero() throws IOException {
        String longLine = "{\"x\":\"" + "y".repeat(300_000) + "\"}";
        PartLines lines = lines(stream(LINE + "\n\n" + longLine));
        lines.next();
        Optional<Reject> reject = lines.next().orElseThrow().reject();
        assertThat(reject.orElseThrow().getSourcePartition()).isZero();
        assertThat(reject.orElseThrow().getSourceOffset()).isEqualTo(2L);
    }

    private static PartLines lines(InputStream in) {
        return new PartLines(in, IntakeFixture.site());
    }

    private static InputStream stream(String text) {
        return new ByteArrayInputStream(bytes(text));
    }

    private static byte[] bytes(String text) {
        return text.getBytes(StandardCharsets.UTF_8);
    }

    /** A stream of very many spaces. */
    private static final class Spaces extends InputStream {
        private long left;

        Spaces(long left) {
            this.left = left;
        }

        @Override
        public int read() {
            return left-- > 0 ? ' ' : -1;
        }

        @Override
        public int read(byte[] into, int from, int length) {
            if (left == 0) {
                return -1;
            }
            int count = (int) Math.min(left, length);
            Arrays.fill(into, from, from + count, (byte) ' ');
            left -= count;
            return count;
        }
    }
}
