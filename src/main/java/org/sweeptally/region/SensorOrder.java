package org.sweeptally.region;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.NavigableMap;
import java.util.TreeMap;
import org.sweeptally.event.Digest;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Part;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.RejectReason;
import org.sweeptally.event.SensorPromise;
import org.sweeptally.site.SensorSettings;

/**
 * One sensor's own order: what it has sent, what it has promised, and whether its next part fits. Nothing here depends
 * on other sensors, so that it does not matter how the log interleaves them; the one exception, {@link #comeBack},
 * needs an entry in the log that passed the sensor over.
 */
final class SensorOrder {

    /** So many scans of a sensor are remembered by their parts, to tell repeats and conflicts. */
    static final int REMEMBERED_SCANS = 64;

    /** What is to be done with a part. */
    sealed interface Verdict {}

    record Accepted(boolean restart) implements Verdict {}

    record Repeat() implements Verdict {}

    record Refused(RejectReason reason, String sentence) implements Verdict {}

    /** A scan to which nothing can be added any more. */
    record Closed(ScanParts scan, Closing how) {}

    private final String sensor;
    private final NavigableMap<Long, ScanParts> open = new TreeMap<>();
    private final NavigableMap<Long, Remembered> remembered = new TreeMap<>();
    private final SensorWatch watch = new SensorWatch();
    private long promiseMicros = Micros.BEFORE_ALL;
    private long latestScanMicros = Micros.BEFORE_ALL;
    private Long latestNumber;
    private Long latestNumberInEffect;
    private boolean passedOver;
    private long passedUntilMicros;

    /** @param horizonMicros the picture has got so far without the sensor */
    SensorOrder(String sensor, long horizonMicros) {
        this.sensor = sensor;
        this.passedUntilMicros = horizonMicros;
    }

    String sensor() {
        return sensor;
    }

    SensorWatch watch() {
        return watch;
    }

    /** Nothing with an earlier log time will come from the sensor. */
    long promiseMicros() {
        return promiseMicros;
    }

    boolean isFinished() {
        return promiseMicros == Micros.AFTER_ALL;
    }

    boolean isPassedOver() {
        return passedOver;
    }

    /** Whether the region's horizon waits for it. */
    boolean isHolding() {
        return !passedOver && !isFinished();
    }

    /** Time of its latest scan, {@link Micros#BEFORE_ALL} before the first. */
    long latestScanMicros() {
        return latestScanMicros;
    }

    NavigableMap<Long, ScanParts> open() {
        return open;
    }

    /** While the sensor is passed over, what the picture has passed meanwhile stays passed. */
    void passed(long horizonMicros) {
        if (passedOver) {
            passedUntilMicros = Math.max(passedUntilMicros, horizonMicros);
        }
    }

    /**
     * Ends the sensor's being passed over, if it is: from here on the region waits for it again. A part that could not
     * be used does not do that, or a sensor whose times are of no use would hold the region for ever.
     *
     * @return whether it was passed over
     */
    boolean comeBack() {
        boolean was = passedOver;
        passedOver = false;
        return was;
    }

    /** Judges a part that has just come and whose scan would take effect at a log time. */
    Verdict judge(PartBody body, long logTimeMicros) {
        Part part = body.getPart();
        Remembered scan = remembered.get(part.getScanTimeMicros());
        if (scan != null && scan.digests.containsKey(part.getPart())) {
            return scan.digests.get(part.getPart()).equals(body.getWholeDigest())
                    ? new Repeat()
                    : new Refused(RejectReason.REPEAT_CONFLICT, "came before with other content, and the first stands");
        }
        if (scan != null && scan.closing != null) {
            return new Refused(RejectReason.SCAN_CLOSED, "comes after its scan was closed: " + scan.closing.words());
        }
        if (logTimeMicros < promiseMicros) {
            return new Refused(RejectReason.LATE, lateSentence(logTimeMicros));
        }
        if (logTimeMicros < passedUntilMicros) {
            return new Refused(RejectReason.PASSED, passedSentence(logTimeMicros));
        }
        return new Accepted(isRestart(part));
    }

    private String lateSentence(long logTimeMicros) {
        if (isFinished()) {
            return "is late: the sensor had promised that nothing would ever come again, or the input had ended";
        }
        return "is late: it takes effect at " + Micros.text(logTimeMicros) + ", which is "
                + Micros.secondsText(promiseMicros - logTimeMicros) + " before " + Micros.text(promiseMicros)
                + ", and the sensor had promised nothing more before that; disorderSeconds allows more disorder";
    }

    private String passedSentence(long logTimeMicros) {
        return "comes after the picture had gone on without its sensor, which was passed over or not known: it takes"
                + " effect at " + Micros.text(logTimeMicros) + ", and the picture had come to "
                + Micros.text(passedUntilMicros);
    }

    private boolean isRestart(Part part) {
        return part.getScan() != null
                && latestNumber != null
                && part.getScan() < latestNumber
                && part.getScanTimeMicros() > latestScanMicros;
    }

    /**
     * Takes in a part that was judged acceptable.
     *
     * @param settings those that hold at its scan time
     * @return the scans that it closes, earliest first
     */
    List<Closed> accept(LogEntry entry, long entryBytes, SensorSettings settings, boolean restart) {
        List<Closed> closed = new ArrayList<>();
        if (restart) {
            closeAll(Closing.BY_RESTART, closed);
        }
        Part part = ScanParts.partOf(entry);
        long time = part.getScanTimeMicros();
        ScanParts scan = open.computeIfAbsent(time, t -> ScanParts.begin(t, settings));
        scan.add(entry, entryBytes);
        remembered.computeIfAbsent(time, t -> new Remembered(scan.logTimeMicros()))
                .digests.put(part.getPart(), ScanParts.bodyOf(entry).getWholeDigest());
        if (time > latestScanMicros) {
            latestScanMicros = time;
            latestNumber = null;
        }
        if (time == latestScanMicros && part.getScan() != null) {
            latestNumber = part.getScan();
        }
        long disorder = Micros.ofSeconds(settings.disorderSeconds());
        promiseAtLeast(Micros.plus(scan.logTimeMicros(), -disorder));
        closeEarlier(time, disorder, closed);
        if (part.getClosesScan()) {
            close(scan, Closing.BY_PART, closed);
        }
        promise(part.getPromise(), settings);
        closePromised(closed);
        forgetOldest();
        closePromised(closed);
        return closed;
    }

    /** The sensor has gone on, so scans that are earlier by more than its disorder are whole. */
    private void closeEarlier(long time, long disorderMicros, List<Closed> closed) {
        long until = Micros.plus(time, -disorderMicros);
        for (ScanParts scan : List.copyOf(open.headMap(until, true).values())) {
            if (scan.scanTimeMicros() != time) {
                close(scan, Closing.BY_NEXT, closed);
            }
        }
    }

    /**
     * Takes note of a part that cannot be used, since the settings of its time no longer know the sensor: the sensor
     * has gone on to it all the same, or the region would wait for ever for what it sent before.
     */
    List<Closed> goneOn(long scanTimeMicros, SensorSettings settings) {
        List<Closed> closed = new ArrayList<>();
        long disorderMicros = Micros.ofSeconds(settings.disorderSeconds());
        closeEarlier(scanTimeMicros, disorderMicros, closed);
        promiseAtLeast(Micros.plus(ScanParts.logTimeMicros(scanTimeMicros, settings), -disorderMicros));
        closePromised(closed);
        return closed;
    }

    private void closePromised(List<Closed> closed) {
        for (ScanParts scan : List.copyOf(open.values())) {
            if (scan.logTimeMicros() < promiseMicros) {
                close(scan, Closing.BY_PROMISE, closed);
            }
        }
    }

    private void close(ScanParts scan, Closing how, List<Closed> closed) {
        open.remove(scan.scanTimeMicros());
        remembered.get(scan.scanTimeMicros()).closing = how;
        closed.add(new Closed(scan, how));
        if (how.isWhole()) {
            promiseAtLeast(scan.promiseMicros());
        }
    }

    /** What the sensor promised by its own clock. */
    private void promise(SensorPromise promise, SensorSettings settings) {
        if (promise != null) {
            Long nothingBefore = promise.getNothingBeforeMicros();
            promiseAtLeast(nothingBefore == null ? Micros.AFTER_ALL : Micros.plus(nothingBefore, settings.timeOffsetMicros()));
        }
    }

    private void promiseAtLeast(long micros) {
        promiseMicros = Math.max(promiseMicros, micros);
    }

    /** A scan that is forgotten must not come a second time, so the sensor's promise goes beyond it. */
    private void forgetOldest() {
        while (remembered.size() - open.size() > REMEMBERED_SCANS) {
            for (Map.Entry<Long, Remembered> entry : remembered.entrySet()) {
                if (entry.getValue().closing != null) {
                    remembered.remove(entry.getKey());
                    promiseAtLeast(Micros.plus(entry.getValue().logTimeMicros, 1));
                    break;
                }
            }
        }
    }

    /** The region no longer waits for the sensor; what is open of it stays unfinished. */
    List<Closed> passOver() {
        passedOver = true;
        watch.answered();
        List<Closed> closed = new ArrayList<>();
        closeAll(Closing.BY_SILENCE, closed);
        return closed;
    }

    /** An open scan that can never take effect, by the settings. */
    void drop(ScanParts scan) {
        close(scan, Closing.BY_SETTINGS, new ArrayList<>());
    }

    /** From now on the region waits for the sensor; what the picture has passed before stays passed. */
    void join(long horizonMicros) {
        passedUntilMicros = Math.max(passedUntilMicros, horizonMicros);
        watch.heard();
    }

    /** The input has ended: what is open is whole, and nothing more will come. */
    List<Closed> end() {
        List<Closed> closed = new ArrayList<>();
        closeAll(Closing.BY_END, closed);
        promiseAtLeast(Micros.AFTER_ALL);
        return closed;
    }

    private void closeAll(Closing how, List<Closed> closed) {
        for (ScanParts scan : List.copyOf(open.values())) {
            close(scan, how, closed);
        }
    }

    /** How many scan numbers lie between the last scan in effect and this one, which takes effect now. */
    long missingBefore(Long number) {
        if (number == null) {
            return 0;
        }
        long missing = latestNumberInEffect == null ? 0 : Math.max(0, number - latestNumberInEffect - 1);
        latestNumberInEffect = number;
        return missing;
    }

    /** Throws where the state contradicts itself. */
    void check() {
        for (ScanParts scan : open.values()) {
            Invariant.holds(scan.logTimeMicros() >= promiseMicros,
                    "an open scan of sensor %s takes effect at %s, before"
                    + " its promise %s", sensor, scan.logTimeMicros(), promiseMicros);
            Remembered known = remembered.get(scan.scanTimeMicros());
            Invariant.holds(known != null && known.closing == null, "the open scan %s of sensor %s is not remembered as"
                    + " open", scan.scanTimeMicros(), sensor);
        }
        Invariant.holds(remembered.size() - open.size() <= REMEMBERED_SCANS, "sensor %s remembers %s scans, of which %s"
                + " are open", sensor, remembered.size(), open.size());
    }

    void write(StateWriter out) {
        out.text(sensor).time(passedUntilMicros).flag(passedOver);
        out.time(promiseMicros).time(latestScanMicros).maybe(latestNumber).maybe(latestNumberInEffect);
        watch.write(out);
        out.number(open.size());
        open.values().forEach(scan -> scan.write(out));
        out.number(remembered.size());
        remembered.forEach((time, scan) -> {
            out.time(time);
            scan.write(out);
        });
    }

    static SensorOrder read(StateReader in) {
        SensorOrder order = new SensorOrder(in.text(), in.time());
        order.passedOver = in.flag();
        order.promiseMicros = in.time();
        order.latestScanMicros = in.time();
        order.latestNumber = in.maybe();
        order.latestNumberInEffect = in.maybe();
        order.watch.read(in);
        for (int left = in.number(); left > 0; left--) {
            ScanParts scan = ScanParts.read(in);
            order.open.put(scan.scanTimeMicros(), scan);
        }
        for (int left = in.number(); left > 0; left--) {
            order.remembered.put(in.time(), Remembered.read(in));
        }
        return order;
    }

    /** What is remembered of a scan: digests of its parts by their numbers, and how it was closed, null while open. */
    private static final class Remembered {
        private final long logTimeMicros;
        private final NavigableMap<Integer, Digest> digests = new TreeMap<>();
        private Closing closing;

        Remembered(long logTimeMicros) {
            this.logTimeMicros = logTimeMicros;
        }

        void write(StateWriter out) {
            out.time(logTimeMicros).number(closing == null ? -1 : closing.ordinal()).number(digests.size());
            digests.forEach((part, digest) -> out.number(part).bytes(digest.bytes()));
        }

        static Remembered read(StateReader in) {
            Remembered scan = new Remembered(in.time());
            int closing = in.number();
            scan.closing = closing < 0 ? null : Closing.values()[closing];
            for (int left = in.number(); left > 0; left--) {
                scan.digests.put(in.number(), new Digest(in.bytes()));
            }
            return scan;
        }
    }
}
