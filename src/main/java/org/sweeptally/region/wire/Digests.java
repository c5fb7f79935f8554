package org.sweeptally.region.wire;

import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import org.sweeptally.event.Digest;

/** SHA-256 (FIPS 180-4). */
public final class Digests {

    private Digests() {}

    /** The SHA-256 of some bytes. */
    public static Digest sha256(byte[] bytes) {
        return sha256(bytes, 0, bytes.length);
    }

    /** The SHA-256 of {@code length} bytes from {@code offset} on. */
    public static Digest sha256(byte[] bytes, int offset, int length) {
        MessageDigest digest = newSha256();
        digest.update(bytes, offset, length);
        return new Digest(digest.digest());
    }

    /** A digest to be fed piece by piece. */
    public static MessageDigest newSha256() {
        try {
            return MessageDigest.getInstance("SHA-256");
        } catch (NoSuchAlgorithmException e) {
            throw new IllegalStateException("every Java platform has SHA-256", e);
        }
    }
}
