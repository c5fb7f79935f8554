package org.sweeptally.region;

/**
 * What ticks see of a sensor. A sensor is quiet from the first tick after its last part on, not from the tick before
 * that part: so that ticks which stood still for a while do not make it look silent.
 */
final class SensorWatch {

    private static final long NOT_YET = Micros.BEFORE_ALL;

    private long quietSinceWallMicros = NOT_YET;
    private boolean asked;
    private boolean clockAhead;

    void heard() {
        quietSinceWallMicros = NOT_YET;
    }

    /** Takes in a tick and says since which one the sensor has been quiet. */
    long quietSince(long wallMicros) {
        if (quietSinceWallMicros == NOT_YET) {
            quietSinceWallMicros = wallMicros;
        }
        return quietSinceWallMicros;
    }

    /** Whether an entry that passes the sensor over was asked for and has not come yet. */
    boolean isAsked() {
        return asked;
    }

    void ask() {
        asked = true;
    }

    void answered() {
        asked = false;
    }

    /** Notes whether the sensor's clock runs ahead, and says whether that has just begun. */
    boolean clockAheadBegins(boolean ahead) {
        boolean begins = ahead && !clockAhead;
        clockAhead = ahead;
        return begins;
    }

    void write(StateWriter out) {
        out.time(quietSinceWallMicros).flag(asked).flag(clockAhead);
    }

    void read(StateReader in) {
        quietSinceWallMicros = in.time();
        asked = in.flag();
        clockAhead = in.flag();
    }
}
