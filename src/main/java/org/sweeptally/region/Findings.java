package org.sweeptally.region;

import org.sweeptally.event.Finding;
import org.sweeptally.event.FindingKind;
import org.sweeptally.event.PassedOverWhy;

/** Makes the records of what does not look as the site file says. */
final class Findings {

    private final String region;

    Findings(String region) {
        this.region = region;
    }

    Finding passedOver(String sensor, PassedOverWhy why, long horizonMicros, double silentSeconds) {
        String words = why == PassedOverWhy.SILENT
                ? " has said nothing for " + silentSeconds + " s (silentSeconds): the picture goes on without it"
                : " is the one that the region waits for, and what waits has reached its bound (waitingBytes):"
                        + " the picture goes on without it";
        return finding(FindingKind.SENSOR_SILENT, sensor, horizonMicros, silentSeconds, "sensor " + sensor + words);
    }

    Finding back(String sensor, long horizonMicros, long promiseMicros) {
        double behind = promiseMicros == Micros.BEFORE_ALL || horizonMicros == Micros.BEFORE_ALL
                ? 0
                : Micros.toSeconds(horizonMicros - promiseMicros);
        return finding(FindingKind.SENSOR_BACK, sensor, horizonMicros, Math.max(0, behind), "sensor " + sensor
                + " is back: the picture waits for it again, and has come to " + Micros.text(horizonMicros));
    }

    Finding restart(String sensor, long scanTimeMicros, long number) {
        return finding(FindingKind.SENSOR_RESTART, sensor, scanTimeMicros, 1, "sensor " + sensor
                + " has started again: its scan " + Micros.text(scanTimeMicros) + " has number " + number
                + ", lower than the scan before");
    }

    Finding missing(String sensor, long logTimeMicros, long number, long missing) {
        String scans = missing == 1 ? "1 scan" : missing + " scans";
        return finding(FindingKind.SCANS_MISSING, sensor, logTimeMicros, missing, scans + " of sensor " + sensor
                + " before number " + number + " never came whole, or could not be used");
    }

    Finding clockAhead(String sensor, long latestScanMicros, long horizonMicros, String waitsFor) {
        long ahead = latestScanMicros - horizonMicros;
        double seconds = Micros.toSeconds(ahead);
        return finding(FindingKind.CLOCK_AHEAD, sensor, latestScanMicros, seconds, "the clock of sensor " + sensor
                + " seems to run ahead: its latest scan is " + Micros.secondsText(ahead)
                + " ahead of the picture, which waits for sensor " + waitsFor);
    }

    Finding waitingBound(String sensor, long horizonMicros, long bytes, long bound) {
        return finding(FindingKind.WAITING_BOUND, sensor, horizonMicros, bytes, bytes
                + " bytes wait for sensor " + sensor
                + ", more than waitingBytes allows (" + bound + "): it is to be passed over");
    }

    Finding boundReached(String bound, long logTimeMicros, long times) {
        String often = times == 1 ? "1 time" : times + " times";
        return finding(FindingKind.BOUND_REACHED, bound, logTimeMicros, times, "the bound on " + bound
                + " was reached, " + often + " so far");
    }

    private Finding finding(FindingKind kind, String subject, long timeMicros, double amount, String sentence) {
        return Finding.newBuilder()
                .setRegion(region)
                .setKind(kind)
                .setSubject(subject)
                .setTimeMicros(Micros.finite(timeMicros))
                .setAmount(amount)
                .setSentence(sentence)
                .build();
    }
}
