package org.sweeptally.world;

/**
 * An object as it really is at the time of a scan.
 *
 * @param id            its number, never used twice
 * @param east          metres
 * @param north         metres
 * @param eastVelocity  metres a second
 * @param northVelocity metres a second
 * @param inside        whether it is in the square
 * @param seen          whether the sensor could see it
 */
public record TrueObject(
        int id, double east, double north, double eastVelocity, double northVelocity, boolean inside, boolean seen) {}
