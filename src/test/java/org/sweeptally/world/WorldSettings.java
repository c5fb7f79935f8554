package org.sweeptally.world;

/**
 * A square, the sea around it, one sensor that watches the square and a margin, and what objects do.
 *
 * @param sideMetres             of the square, which lies around the plane's origin
 * @param marginMetres           how far beyond the square the sensor sees
 * @param objects                expected number in the square, at any time
 * @param lifetimeSeconds        mean lifetime of an object
 * @param accelerationNoise      spectral density of the acceleration, square metres a second cubed
 * @param speedSigma             standard deviation of the first velocity along each axis, metres a second
 * @param periodSeconds          time between scans
 * @param scans                  number of scans, the first at time 0
 * @param sigmaMetres            standard deviation of a measured place along each axis
 * @param probabilityOfDetection wherever the sensor sees
 * @param clutterPerScan         expected number of false detections in the square; as dense in the margin
 */
public record WorldSettings(
        double sideMetres,
        double marginMetres,
        double objects,
        double lifetimeSeconds,
        double accelerationNoise,
        double speedSigma,
        double periodSeconds,
        int scans,
        double sigmaMetres,
        double probabilityOfDetection,
        double clutterPerScan) {

    /** 20 objects on a square of 4 km, for 60 scans. */
    public static WorldSettings fourKilometres(double marginMetres, double clutterPerScan) {
        return new WorldSettings(4000, marginMetres, 20, 600, 0.05, 6, 2.5, 60, 15, 0.9, clutterPerScan);
    }

    /** The same density of everything on a square that holds so many objects. */
    public WorldSettings grownTo(double moreObjects) {
        double factor = moreObjects / objects;
        return new WorldSettings(
                sideMetres * Math.sqrt(factor), marginMetres, moreObjects, lifetimeSeconds, accelerationNoise,
                speedSigma, periodSeconds, scans, sigmaMetres, probabilityOfDetection, clutterPerScan * factor);
    }

    public WorldSettings withScans(int number) {
        return new WorldSettings(
                sideMetres, marginMetres, objects, lifetimeSeconds, accelerationNoise, speedSigma, periodSeconds,
                number, sigmaMetres, probabilityOfDetection, clutterPerScan);
    }

    public double areaSquareMetres() {
        return sideMetres * sideMetres;
    }

    public double objectsPerSquareMetre() {
        return objects / areaSquareMetres();
    }

    public double clutterPerSquareMetre() {
        return clutterPerScan / areaSquareMetres();
    }

    /** Whether a place is in the square. */
    boolean holds(double east, double north) {
        return beyond(east, north) == 0;
    }

    /** Whether the sensor sees a place. */
    boolean sees(double east, double north) {
        return beyond(east, north) <= marginMetres;
    }

    private double beyond(double east, double north) {
        double pastEast = Math.max(0, Math.abs(east) - sideMetres / 2);
        double pastNorth = Math.max(0, Math.abs(north) - sideMetres / 2);
        return Math.sqrt(pastEast * pastEast + pastNorth * pastNorth);
    }
}
