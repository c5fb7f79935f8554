package org.sweeptally.region.intake;

import org.sweeptally.event.Digest;
import org.sweeptally.event.Part;

/**
 * A part as far as it could be read, before anybody judged its values.
 *
 * @param part           the part, whose detections are those that could be read, each with the place in the part as
 *                       it was sent for an index. Of the part's own fields that could not be read the sensor is null,
 *                       the scan time {@link #UNREAD_MICROS}, the part number {@link #UNREAD_PART}, others absent
 * @param detectionsSent how many detections were sent
 * @param wholeDigest    digest of the part as it was sent
 * @param faults         what could not be read
 * @param names          how the sender knows the fields
 */
public record PartReading(
        Part part, int detectionsSent, Digest wholeDigest, Faults faults, FieldNames names) {

    /** Stands for a scan time that could not be read; no part may name it. */
    public static final long UNREAD_MICROS = Long.MIN_VALUE;

    /** Stands for a part number that could not be read; no part may have it. */
    public static final int UNREAD_PART = -1;
}
