package org.sweeptally.demo;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.charset.StandardCharsets;
import org.junit.jupiter.api.Test;

class RecordDigestTest {

    @Test
    void howTopicsAndKeysInterleaveMakesNoDifference() {
        RecordDigest one = new RecordDigest();
        one.add("a", "k", bytes("1"));
        one.add("b", "k", bytes("2"));
        one.add("a", "l", null);
        one.add("a", "k", bytes("3"));
        one.addToSet("c", bytes("4"));
        one.addToSet("c", bytes("5"));
        RecordDigest other = new RecordDigest();
        other.addToSet("c", bytes("5"));
        other.add("a", "l", null);
        other.add("a", "k", bytes("1"));
        other.add("a", "k", bytes("3"));
        other.addToSet("c", bytes("4"));
        other.add("b", "k", bytes("2"));
        assertThat(one.text()).isEqualTo(other.text()).matches("[0-9a-f]{64}");
    }

    @Test
    void theOrderWithinAKeyMatters() {
        assertThat(of("1", "2")).isNotEqualTo(of("2", "1"));
    }

    @Test
    void whereOneRecordEndsAndTheNextBeginsMatters() {
        assertThat(of("12", "3")).isNotEqualTo(of("1", "23"));
        assertThat(of("12")).isNotEqualTo(of("12", ""));
    }

    @Test
    void aTombstoneIsNoEmptyRecordAndARecordCountsAsOftenAsItComes() {
        RecordDigest tombstone = new RecordDigest();
        tombstone.add("a", "k", null);
        assertThat(tombstone.text()).isNotEqualTo(of(""));
        RecordDigest once = new RecordDigest();
        once.addToSet("c", bytes("1"));
        String before = once.text();
        once.addToSet("c", bytes("1"));
        assertThat(once.text()).isNotEqualTo(before);
    }

    private static String of(String... values) {
        RecordDigest digest = new RecordDigest();
        for (String value : values) {
            digest.add("a", "k", bytes(value));
        }
        return digest.text();
    }

    private static byte[] bytes(String text) {
        return text.getBytes(StandardCharsets.UTF_8);
    }
}
