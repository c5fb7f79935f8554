package org.sweeptally.region;

import java.util.List;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Part;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.RejectReason;
import org.sweeptally.site.SensorSettings;

/** What becomes of a part when it arrives: it joins its scan, is a repeat, or is rejected. */
final class PartArrivals {

    private final RegionState state;
    private final Findings findings;

    PartArrivals(RegionState state, Findings findings) {
        this.state = state;
        this.findings = findings;
    }

    void part(LogEntry entry, PartBody body, MachineOutputs out) {
        state.counters.add(RegionCounters.Name.PARTS);
        Part part = body.getPart();
        SensorSettings settings = state.timeline.at(part.getScanTimeMicros()).sensor(part.getSensor());
        if (settings == null) {
            takenAway(entry, part.getScanTimeMicros(), out);
            return;
        }
        long logTime = ScanParts.logTimeMicros(part.getScanTimeMicros(), settings);
        if (state.timeline.at(logTime).sensor(part.getSensor()) == null) {
            takenAway(entry, logTime, out);
            return;
        }
        SensorOrder order = state.sensors.computeIfAbsent(
                part.getSensor(), name -> new SensorOrder(name, state.horizonMicros));
        order.watch().heard();
        order.passed(state.horizonMicros);
        judge(entry, body, logTime, order, settings, out);
    }

    private void judge(
            LogEntry entry,
            PartBody body,
            long logTimeMicros,
            SensorOrder order,
            SensorSettings settings,
            MachineOutputs out) {
        SensorOrder.Verdict verdict = order.judge(body, logTimeMicros);
        if (verdict instanceof SensorOrder.Repeat) {
            state.counters.add(RegionCounters.Name.REPEATS);
            state.counters.add(RegionCounters.Name.DETECTIONS_REPEATED, body.getPart().getDetections().size());
        } else if (verdict instanceof SensorOrder.Refused refused) {
            state.counters.add(counterOf(refused.reason()));
            out.reject(Rejects.whole(state.region, entry, refused.reason(), refused.sentence()));
        } else if (verdict instanceof SensorOrder.Accepted accepted) {
            if (order.comeBack()) {
                state.counters.add(RegionCounters.Name.SENSORS_BACK);
                out.finding(findings.back(order.sensor(), state.horizonMicros, order.promiseMicros()));
            }
            if (accepted.restart()) {
                state.counters.add(RegionCounters.Name.RESTARTS);
                Part part = body.getPart();
                out.finding(findings.restart(part.getSensor(), part.getScanTimeMicros(), part.getScan()));
            }
            closed(order.accept(entry, EntryBytes.of(entry), settings, accepted.restart()), out);
        }
    }

    private static RegionCounters.Name counterOf(RejectReason reason) {
        return switch (reason) {
            case REPEAT_CONFLICT -> RegionCounters.Name.CONFLICTS;
            case SCAN_CLOSED -> RegionCounters.Name.SCAN_CLOSED;
            case LATE -> RegionCounters.Name.LATE;
            case PASSED -> RegionCounters.Name.PASSED;
            default -> throw new IllegalArgumentException("a sensor's order does not refuse with " + reason);
        };
    }

    /** A part of a sensor that the settings of its time do not know; if earlier ones did, the sensor has gone on. */
    private void takenAway(LogEntry entry, long whenMicros, MachineOutputs out) {
        unknownSensor(entry, whenMicros, out);
        Part part = ScanParts.partOf(entry);
        SensorSettings before = state.timeline.lastBefore(part.getScanTimeMicros(), part.getSensor());
        SensorOrder order = state.sensors.get(part.getSensor());
        if (before != null && order != null) {
            order.watch().heard();
            closed(order.goneOn(part.getScanTimeMicros(), before), out);
        }
    }

    /** A part of a sensor that the region does not hear at a time, by the settings that hold then. */
    void unknownSensor(LogEntry entry, long whenMicros, MachineOutputs out) {
        state.counters.add(RegionCounters.Name.UNKNOWN_SENSOR);
        out.reject(Rejects.whole(state.region, entry, RejectReason.UNKNOWN_SENSOR, "is of a sensor that region "
                + state.region + " does not hear by the settings that hold at " + Micros.text(whenMicros)));
    }

    /** Scans to which nothing can be added any more: whole ones wait for the horizon, of others nothing is used. */
    void closed(List<SensorOrder.Closed> scans, MachineOutputs out) {
        for (SensorOrder.Closed closed : scans) {
            ScanParts scan = closed.scan();
            if (closed.how() == Closing.BY_NEXT) {
                state.counters.add(RegionCounters.Name.SCANS_CLOSED_BY_NEXT);
            }
            if (!closed.how().isWhole()) {
                unfinished(scan, closed.how().words(), out);
                continue;
            }
            state.latestWholeMicros = Math.max(state.latestWholeMicros, scan.logTimeMicros());
            if (scan.isUnusable()) {
                unfinished(scan, "a part of the scan could not be used", out);
            } else if (!state.waiting.add(WaitingRoom.Place.of(scan), WaitingRoom.Waiting.of(scan))) {
                rejectAll(scan, RejectReason.SCAN_CLOSED, "belongs to a scan that came before and still waits", out);
            }
        }
    }

    private void unfinished(ScanParts scan, String why, MachineOutputs out) {
        state.counters.add(RegionCounters.Name.SCANS_UNFINISHED);
        state.counters.add(RegionCounters.Name.DETECTIONS_UNFINISHED, scan.detections());
        rejectAll(scan, RejectReason.UNFINISHED, "belongs to an unfinished scan: " + why, out);
    }

    /** Rejects every part of a scan that has detections. */
    void rejectAll(ScanParts scan, RejectReason reason, String sentence, MachineOutputs out) {
        for (LogEntry entry : scan.entries()) {
            if (!ScanParts.partOf(entry).getDetections().isEmpty()) {
                out.reject(Rejects.whole(state.region, entry, reason, sentence));
            }
        }
    }

    /**
     * The settings in force have changed: what is open of sensors that they no longer know cannot take effect. Their
     * order stays, since what it says of parts that come too late must not depend on when they come.
     */
    void dropUnknownSensors(MachineOutputs out) {
        for (SensorOrder order : List.copyOf(state.sensors.values())) {
            if (state.rules().sensor(order.sensor()) != null) {
                continue;
            }
            for (ScanParts scan : List.copyOf(order.open().values())) {
                if (state.timeline.at(scan.logTimeMicros()).sensor(order.sensor()) == null) {
                    order.drop(scan);
                    scan.entries().forEach(entry -> unknownSensor(entry, scan.logTimeMicros(), out));
                }
            }
        }
    }
}
