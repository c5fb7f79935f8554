package org.sweeptally.region;

import java.util.Collection;

/**
 * How far the picture may go: everything with an earlier log time has come.
 *
 * @param micros   exclusive
 * @param waitsFor the sensor whose promise it is, or null where the region waits for none
 */
record Horizon(long micros, String waitsFor) {

    /**
     * The least promise of the sensors that hold the region. Sensors that are finished or passed over hold nothing. If
     * all are finished nothing more will come. If none holds, and some are only passed over, the picture goes to the
     * end of what has come and no further: any of them may come back.
     *
     * @param heard             sensors that the settings in force know and the region hears, by name
     * @param latestWholeMicros greatest log time of all scans that were closed whole
     */
    static Horizon of(Collection<SensorOrder> heard, long latestWholeMicros) {
        long least = Micros.AFTER_ALL;
        String waitsFor = null;
        boolean anyPassedOver = false;
        for (SensorOrder sensor : heard) {
            if (sensor.isHolding() && (waitsFor == null || sensor.promiseMicros() < least)) {
                least = sensor.promiseMicros();
                waitsFor = sensor.sensor();
            }
            anyPassedOver |= sensor.isPassedOver() && !sensor.isFinished();
        }
        if (waitsFor != null) {
            return new Horizon(least, waitsFor);
        }
        boolean allFinished = !heard.isEmpty() && !anyPassedOver;
        return new Horizon(allFinished ? Micros.AFTER_ALL : Micros.plus(latestWholeMicros, 1), null);
    }
}
