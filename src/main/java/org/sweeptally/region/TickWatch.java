package org.sweeptally.region;

import org.sweeptally.event.LogEntry;
import org.sweeptally.event.PassedOverWhy;
import org.sweeptally.event.SilentBody;

/** What ticks and bounds lead to: entries that pass a sensor over are asked for, and clocks that run ahead are told. */
final class TickWatch {

    private final RegionState state;
    private final Findings findings;

    TickWatch(RegionState state, Findings findings) {
        this.state = state;
        this.findings = findings;
    }

    /** A tick of the operator's clock; a clock that goes back is taken to stand still. */
    void tick(long wallMicros, MachineOutputs out) {
        state.wallMicros = Math.max(state.wallMicros, wallMicros);
        for (SensorOrder sensor : state.heard()) {
            silence(sensor, out);
            clockAhead(sensor, out);
        }
    }

    /**
     * Asks to pass a sensor over that has been quiet for its time, if by then every partition of the detections had
     * been read to its end: what has not been read may hold its word.
     */
    private void silence(SensorOrder sensor, MachineOutputs out) {
        long quietSince = sensor.watch().quietSince(state.wallMicros);
        double silentSeconds = state.rules().sensor(sensor.sensor()).silentSeconds();
        long silentAt = Micros.plus(quietSince, Micros.ofSeconds(silentSeconds));
        if (state.wallMicros >= silentAt && sensor.isHolding() && state.marks.allReadAt(silentAt)) {
            ask(sensor, PassedOverWhy.SILENT, out);
        }
    }

    private void clockAhead(SensorOrder sensor, MachineOutputs out) {
        String waitsFor = state.horizon().waitsFor();
        boolean known = state.horizonMicros != Micros.BEFORE_ALL && state.horizonMicros != Micros.AFTER_ALL
                && sensor.latestScanMicros() != Micros.BEFORE_ALL;
        long limit = Micros.plus(state.horizonMicros, Micros.ofSeconds(state.rules().bounds().clockAheadSeconds()));
        long latest = Micros.plus(
                sensor.latestScanMicros(), state.rules().sensor(sensor.sensor()).timeOffsetMicros());
        boolean ahead = known && waitsFor != null && !waitsFor.equals(sensor.sensor()) && latest > limit;
        if (sensor.watch().clockAheadBegins(ahead)) {
            out.finding(findings.clockAhead(sensor.sensor(), latest, state.horizonMicros, waitsFor));
        }
    }

    /** Asks to pass over the sensor that the region waits for, where more waits than may. */
    void waitingBound(MachineOutputs out) {
        long bytes = state.waitingBytes();
        long bound = state.rules().bounds().waitingBytes();
        String laggard = bytes > bound ? state.horizon().waitsFor() : null;
        if (laggard != null && !state.sensors.get(laggard).watch().isAsked()) {
            state.counters.add(RegionCounters.Name.WAITING_BOUND);
            out.finding(findings.waitingBound(laggard, state.horizonMicros, bytes, bound));
            ask(state.sensors.get(laggard), PassedOverWhy.WAITING_BOUND, out);
        }
    }

    /** The entry acts when it comes back from the log, whatever the sensor says meanwhile. */
    private void ask(SensorOrder sensor, PassedOverWhy why, MachineOutputs out) {
        if (!sensor.watch().isAsked()) {
            sensor.watch().ask();
            out.append(LogEntry.newBuilder()
                    .setSender(state.region)
                    .setBody(new SilentBody(sensor.sensor(), why))
                    .build());
        }
    }
}
