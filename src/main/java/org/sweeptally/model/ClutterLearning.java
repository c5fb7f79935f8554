package org.sweeptally.model;

/**
 * How the density of a sensor's false detections by area is learned.
 *
 * @param seconds    how long what was learned is remembered: after so long e-fold less counts; infinite: nothing
 *                   is learned
 * @param cellMetres side of the cells that are told apart
 */
public record ClutterLearning(double seconds, double cellMetres) {

    /** What is configured stands. */
    public static final ClutterLearning OFF = new ClutterLearning(Double.POSITIVE_INFINITY, 0);

    public boolean isOn() {
        return seconds < Double.POSITIVE_INFINITY;
    }
}
