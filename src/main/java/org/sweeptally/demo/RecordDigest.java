package org.sweeptally.demo;

import java.nio.ByteBuffer;
import java.nio.charset.StandardCharsets;
import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.ArrayList;
import java.util.HexFormat;
import java.util.List;
import java.util.NavigableMap;
import java.util.TreeMap;

/**
 * One SHA-256 for all records that must reproduce: by topic, then by key, each key's records in their order. Records of
 * a topic without an order of its own (rejects, which come from several places at once) count as a set. Which topic or
 * partition is read first makes no difference.
 */
final class RecordDigest {

    private static final HexFormat HEX = HexFormat.of();

    private final NavigableMap<String, NavigableMap<String, MessageDigest>> ordered = new TreeMap<>();
    private final NavigableMap<String, List<String>> sets = new TreeMap<>();

    /** The next record of a key; a null value is a tombstone. */
    void add(String topic, String key, byte[] valueOrNull) {
        MessageDigest digest = ordered.computeIfAbsent(topic, name -> new TreeMap<>())
                .computeIfAbsent(key, name -> sha256());
        update(digest, valueOrNull);
    }

    /** A record of a topic whose records are a set. */
    void addToSet(String topic, byte[] value) {
        MessageDigest digest = sha256();
        update(digest, value);
        sets.computeIfAbsent(topic, name -> new ArrayList<>()).add(HEX.formatHex(digest.digest()));
    }

    /** The digest of what was added so far, as 64 hexadecimal digits; more may be added. */
    String text() {
        MessageDigest all = sha256();
        ordered.forEach((topic, keys) -> keys.forEach((key, digest) -> {
            update(all, topic.getBytes(StandardCharsets.UTF_8));
            update(all, key.getBytes(StandardCharsets.UTF_8));
            update(all, copy(digest).digest());
        }));
        sets.forEach((topic, records) -> {
            update(all, topic.getBytes(StandardCharsets.UTF_8));
            records.stream().sorted().forEach(record -> update(all, record.getBytes(StandardCharsets.UTF_8)));
        });
        return HEX.formatHex(all.digest());
    }

    /** With its length before it, so that no two rows of values run together to the same bytes. */
    private static void update(MessageDigest digest, byte[] valueOrNull) {
        digest.update(ByteBuffer.allocate(Integer.BYTES).putInt(valueOrNull == null ? -1 : valueOrNull.length).array());
        if (valueOrNull != null) {
            digest.update(valueOrNull);
        }
    }

    private static MessageDigest copy(MessageDigest digest) {
        try {
            return (MessageDigest) digest.clone();
        } catch (CloneNotSupportedException e) {
            throw new IllegalStateException("the JDK's SHA-256 can be copied", e);
        }
    }

    private static MessageDigest sha256() {
        try {
            return MessageDigest.getInstance("SHA-256");
        } catch (NoSuchAlgorithmException e) {
            throw new IllegalStateException("every JDK has SHA-256", e);
        }
    }
}
