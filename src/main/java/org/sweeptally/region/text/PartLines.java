package org.sweeptally.region.text;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.InputStream;
import java.security.MessageDigest;
import java.util.Arrays;
import java.util.Optional;
import org.sweeptally.event.Digest;
import org.sweeptally.region.intake.Intake;
import org.sweeptally.region.intake.Original;
import org.sweeptally.region.intake.SourcePosition;
import org.sweeptally.region.wire.Digests;
import org.sweeptally.site.Site;

/**
 * Parts from newline-delimited JSON, one line after the other. A line longer than {@link #LONGEST_LINE_BYTES} is
 * rejected without being held: its first bytes, its length and its digest are kept. Lines of nothing but white space
 * are passed over. Not for several threads.
 */
public final class PartLines {

    /** The longest line that is read. */
    public static final int LONGEST_LINE_BYTES = 16 * 1024 * 1024;

    private static final byte[] BYTE_ORDER_MARK = {(byte) 0xEF, (byte) 0xBB, (byte) 0xBF};

    private final InputStream in;
    private final PartJson json;
    private final byte[] buffer = new byte[64 * 1024];
    private int next;
    private int filled;
    private long linesRead;
    private long bytesRead;

    /** @param in bytes of UTF-8; it is read, not closed */
    public PartLines(InputStream in, Site site) {
        this.in = in;
        this.json = new PartJson(site);
    }

    /** How many lines were read, empty ones included: the number of the last line, counted from 1. */
    public long linesRead() {
        return linesRead;
    }

    /** How many bytes were read, up to the end of the last line. */
    public long bytesRead() {
        return bytesRead;
    }

    /**
     * What became of the next line that is not empty; empty at the end.
     *
     * @throws IOException if the stream cannot be read
     */
    public Optional<Intake> next() throws IOException {
        while (fill()) {
            Line line = line();
            Optional<SourcePosition> source = Optional.of(new SourcePosition(0, linesRead));
            linesRead++;
            if (line.tooLong()) {
                return Optional.of(json.tooLong(
                        new Original(line.bytes(), line.lengthBytes(), Optional.of(line.digest()), source)));
            }
            byte[] bytes = linesRead == 1 ? withoutMark(line.bytes()) : line.bytes();
            if (!blank(bytes)) {
                return Optional.of(json.read(bytes, source));
            }
        }
        return Optional.empty();
    }

    /**
     * @param bytes  the line, or the beginning of one that is too long
     * @param digest of one that is too long, else null
     */
    private record Line(byte[] bytes, long lengthBytes, Digest digest) {
        boolean tooLong() {
            return digest != null;
        }
    }

    /** Reads up to the next newline or the end, and past it. */
    private Line line() throws IOException {
        ByteArrayOutputStream held = new ByteArrayOutputStream(1024);
        MessageDigest digest = null;
        byte[] head = null;
        long length = 0;
        boolean ended = false;
        while (!ended && fill()) {
            int end = endOfLine();
            ended = end < filled;
            length += end - next;
            if (digest == null && length > LONGEST_LINE_BYTES) {
                digest = Digests.newSha256();
                byte[] before = held.toByteArray();
                digest.update(before);
                head = Arrays.copyOf(before, Original.HEAD_BYTES);
                held = null;
            }
            if (digest != null) {
                digest.update(buffer, next, end - next);
            } else {
                held.write(buffer, next, end - next);
            }
            bytesRead += end - next + (ended ? 1 : 0);
            next = end + (ended ? 1 : 0);
        }
        return digest == null
                ? new Line(held.toByteArray(), length, null)
                : new Line(head, length, new Digest(digest.digest()));
    }

    private int endOfLine() {
        int end = next;
        while (end < filled && buffer[end] != '\n') {
            end++;
        }
        return end;
    }

    /** Whether a byte is left. */
    private boolean fill() throws IOException {
        if (next == filled) {
            next = 0;
            filled = Math.max(0, in.read(buffer));
        }
        return filled > 0;
    }

    private static byte[] withoutMark(byte[] line) {
        return Arrays.mismatch(line, BYTE_ORDER_MARK) >= BYTE_ORDER_MARK.length || Arrays.equals(line, BYTE_ORDER_MARK)
                ? Arrays.copyOfRange(line, BYTE_ORDER_MARK.length, line.length)
                : line;
    }

    private static boolean blank(byte[] line) {
        for (byte b : line) {
            if (b != ' ' && b != '\t' && b != '\r') {
                return false;
            }
        }
        return true;
    }
}
