package org.sweeptally.region;

import java.util.List;
import org.sweeptally.event.Heartbeat;
import org.sweeptally.event.SensorPulse;

/** Makes heartbeats. Times at either end of time, before a first word and after the last, are null in them. */
final class Heartbeats {

    private Heartbeats() {}

    static Heartbeat of(RegionState state, long wallMicros) {
        boolean begun = state.timeline != null;
        List<SensorPulse> pulses = state.heard().stream().map(Heartbeats::pulse).toList();
        return Heartbeat.newBuilder()
                .setRegion(state.region)
                .setWallMicros(wallMicros)
                .setPictureMicros(begun ? Micros.finite(state.effect.lastEffectMicros()) : null)
                .setHorizonMicros(Micros.finite(state.horizonMicros))
                .setWaitsFor(begun ? state.horizon().waitsFor() : null)
                .setSequence(begun ? state.effect.sequence() : 0)
                .setWaitingEntries(state.waitingEntries())
                .setWaitingBytes(state.waitingBytes())
                .setSensors(pulses)
                .build();
    }

    private static SensorPulse pulse(SensorOrder sensor) {
        return new SensorPulse(
                sensor.sensor(), Micros.finite(sensor.promiseMicros()), sensor.isPassedOver(), sensor.isFinished());
    }
}
