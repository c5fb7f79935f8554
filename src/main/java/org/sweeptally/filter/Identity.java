package org.sweeptally.filter;

import java.time.Instant;
import java.time.LocalDateTime;
import java.time.ZoneOffset;
import java.time.format.DateTimeFormatter;
import java.time.format.DateTimeFormatterBuilder;
import java.time.format.DateTimeParseException;
import java.time.temporal.ChronoField;

/**
 * Who an object is: the detection with which it began, named so that any region, any replay and any other cut into
 * regions gives the same name. Ordered by time of the beginning, then by sensor, part and index.
 *
 * @param sensor         the sensor's name
 * @param scanTimeMicros scan time, microseconds since 1970-01-01T00:00:00Z
 * @param part           number of the part within its scan
 * @param index          place in the part as it was sent
 */
public record Identity(String sensor, long scanTimeMicros, int part, int index) implements Comparable<Identity> {

    private static final DateTimeFormatter TIME = new DateTimeFormatterBuilder()
            .appendPattern("yyyyMMdd'T'HHmmss")
            .appendFraction(ChronoField.NANO_OF_SECOND, 6, 6, true)
            .appendLiteral('Z')
            .toFormatter()
            .withZone(ZoneOffset.UTC);

    /** As published: sensor, time, part and index, such as {@code north-shore-20310501T040042.500000Z-0-3}. */
    public String text() {
        LocalDateTime time = LocalDateTime.ofEpochSecond(Math.floorDiv(scanTimeMicros, 1_000_000L), 0, ZoneOffset.UTC);
        if (time.getYear() < 1 || time.getYear() > 9999) {
            int nanos = (int) Math.floorMod(scanTimeMicros, 1_000_000L) * 1000;
            return sensor + "-" + TIME.format(time.withNano(nanos).atOffset(ZoneOffset.UTC)) + "-" + part + "-" + index;
        }
        // Digit by digit, since every track names its object anew, and a formatter is slow.
        StringBuilder text = new StringBuilder(sensor.length() + 32).append(sensor).append('-');
        digits(text, time.getYear(), 1000);
        digits(text, time.getMonthValue(), 10);
        digits(text, time.getDayOfMonth(), 10);
        text.append('T');
        digits(text, time.getHour(), 10);
        digits(text, time.getMinute(), 10);
        digits(text, time.getSecond(), 10);
        text.append('.');
        digits(text, (int) Math.floorMod(scanTimeMicros, 1_000_000L), 100_000);
        return text.append("Z-").append(part).append('-').append(index).toString();
    }

    /** @param first value of the first digit */
    private static void digits(StringBuilder text, int number, int first) {
        for (int value = first; value > 0; value /= 10) {
            text.append((char) ('0' + number / value % 10));
        }
    }

    /**
     * Reads what {@link #text} wrote.
     *
     * @throws IllegalArgumentException if the text is not an identity
     */
    public static Identity parse(String text) {
        int index = text.lastIndexOf('-');
        int part = text.lastIndexOf('-', index - 1);
        int time = text.lastIndexOf('-', part - 1);
        if (time < 1) {
            throw new IllegalArgumentException("\"" + text + "\" is no identity: sensor-time-part-index");
        }
        try {
            Instant instant = Instant.from(TIME.parse(text.substring(time + 1, part)));
            return new Identity(
                    text.substring(0, time),
                    instant.getEpochSecond() * 1_000_000L + instant.getNano() / 1000,
                    Integer.parseInt(text.substring(part + 1, index)),
                    Integer.parseInt(text.substring(index + 1)));
        } catch (DateTimeParseException | NumberFormatException e) {
            throw new IllegalArgumentException("\"" + text + "\" is no identity: sensor-time-part-index", e);
        }
    }

    @Override
    public int compareTo(Identity other) {
        int order = Long.compare(scanTimeMicros, other.scanTimeMicros);
        if (order == 0) {
            order = sensor.compareTo(other.sensor);
        }
        if (order == 0) {
            order = Integer.compare(part, other.part);
        }
        return order == 0 ? Integer.compare(index, other.index) : order;
    }
}
