package org.sweeptally.region;

import java.util.Collections;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalInt;
import java.util.OptionalLong;
import java.util.function.Consumer;
import java.util.function.Function;
import org.sweeptally.event.EndOfInputBody;
import org.sweeptally.event.EndedBody;
import org.sweeptally.event.GaveUpBody;
import org.sweeptally.event.HandoverBody;
import org.sweeptally.event.IntroductionBody;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.NeighbourPromiseBody;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.PassedOverWhy;
import org.sweeptally.event.ProgressMarkBody;
import org.sweeptally.event.RejectReason;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.event.SilentBody;
import org.sweeptally.event.TickBody;
import org.sweeptally.filter.ScanEvidence;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;

/**
 * The machine of one region: a pure function from a state and an entry of the region's log to the next state and what
 * is to be published. Timed entries (scans, settings, what neighbours send) wait until the {@linkplain Horizon horizon}
 * has passed their log time and take effect in order of it; all others act on arrival and only move the horizon. So two
 * logs with the same events give the same published records, however the log interleaves its writers.
 *
 * <p>It is confined to one thread, and reads no clock, random source or hash order. An entry that the operator or the
 * program should never have written is an exception, after which the machine must not be used; whatever a sensor sends
 * is used, counted or rejected.
 *
 * <p>This version of the machine has no neighbours: what they send waits its turn, is counted, and changes nothing.
 */
public final class RegionMachine {

    /** Grows whenever the same log would give other output. */
    public static final int MACHINE_VERSION = 2;

    /** Layout of {@link #snapshot}; the first number in it. */
    public static final int FORMAT_VERSION = 2;

    private final RegionState state;
    private final Function<String, Site> settingsReader;
    private final Findings findings;
    private final PartArrivals arrivals;
    private final TickWatch watch;
    private Consumer<ScanEvidence> observer;

    /**
     * The machine at the beginning of its region's log.
     *
     * @param settingsReader reads the text of a settings entry
     */
    public RegionMachine(String region, Function<String, Site> settingsReader) {
        this(new RegionState(region), settingsReader);
    }

    private RegionMachine(RegionState state, Function<String, Site> settingsReader) {
        this.state = state;
        this.settingsReader = settingsReader;
        this.findings = new Findings(state.region);
        this.arrivals = new PartArrivals(state, findings);
        this.watch = new TickWatch(state, findings);
    }

    /**
     * From now on tells after every scan why the existence of its objects changed. Records, state and counters stay the
     * same to the last bit.
     */
    public void observe(Consumer<ScanEvidence> evidence) {
        observer = evidence;
        if (state.effect != null) {
            state.effect.filter().observe(evidence);
        }
    }

    /**
     * Takes in the next entry of the region's log.
     *
     * @throws NewerMachineVersionException if settings were written for a newer machine
     * @throws IllegalStateException        if settings contradict others, move the region, or do not come
     */
    public void apply(LogEntry entry, MachineOutputs out) {
        state.counters.add(RegionCounters.Name.ENTRIES);
        Object body = entry.getBody();
        if (body instanceof SettingsBody settings) {
            settings(entry, settings, out);
        } else if (body instanceof TickBody tick) {
            tick(tick, out);
        } else if (body instanceof ProgressMarkBody mark) {
            state.marks.mark(mark);
        } else if (state.timeline == null) {
            waitForSettings(entry);
        } else {
            take(entry, out);
        }
        if (state.timeline != null) {
            advance(out);
            watch.waitingBound(out);
        }
    }

    /** What needs settings to be understood. */
    private void take(LogEntry entry, MachineOutputs out) {
        Object body = entry.getBody();
        if (body instanceof PartBody part) {
            arrivals.part(entry, part, out);
        } else if (body instanceof SilentBody silent) {
            silent(silent, out);
        } else if (body instanceof EndOfInputBody) {
            end(out);
        } else if (body instanceof NeighbourPromiseBody promise) {
            state.counters.add(RegionCounters.Name.NEIGHBOUR_PROMISES);
            state.neighbourPromises.merge(entry.getSender(), promise.getNothingBeforeMicros(), Math::max);
        } else if (body instanceof GaveUpBody gaveUp) {
            state.counters.add(RegionCounters.Name.NEIGHBOURS_GIVEN_UP);
            state.neighbourPromises.remove(gaveUp.getNeighbour());
        } else {
            neighbourEntry(entry);
        }
    }

    // Settings.

    /** The entry stays in the log: once settings stand before it there, it can be taken in. */
    private void waitForSettings(LogEntry entry) {
        if (!state.raw.add(entry)) {
            throw new IllegalStateException("the log of region " + state.region + " holds no settings, and "
                    + state.raw.size() + " entries of " + state.raw.bytes() + " bytes wait for them, of at most "
                    + RawEntries.LARGEST_BYTES + " bytes that may: settings have to stand at the log's beginning");
        }
    }

    private void settings(LogEntry entry, SettingsBody body, MachineOutputs out) {
        if (body.getMachineVersion() > MACHINE_VERSION) {
            throw new NewerMachineVersionException(
                    state.region, body.getRevision(), body.getMachineVersion(), MACHINE_VERSION);
        }
        if (state.timeline == null) {
            begin(RegionRules.first(body, state.region, settingsReader), out);
        } else if (state.timeline.holds(body)) {
            state.counters.add(RegionCounters.Name.SETTINGS_REPEATED);
        } else {
            laterSettings(entry, body, out);
        }
    }

    /** The first settings hold from the beginning, and for all that came before them. */
    private void begin(RegionRules first, MachineOutputs out) {
        state.counters.add(RegionCounters.Name.SETTINGS);
        state.timeline = new SettingsTimeline(first);
        state.effect = new ScanEffect(first);
        state.effect.filter().observe(observer);
        state.meetSensors();
        for (LogEntry entry : state.raw.takeAll()) {
            take(entry, out);
            advance(out);
        }
    }

    /** Later settings wait for their log time; those without one, or that come after it, hold from the horizon on. */
    private void laterSettings(LogEntry entry, SettingsBody body, MachineOutputs out) {
        RegionRules latest = state.timeline.latest();
        if (body.getRevision() <= latest.revision()) {
            throw new IllegalStateException("the log of region " + state.region + " holds settings of revision "
                    + body.getRevision() + " after those of revision " + latest.revision()
                    + " and with other content: a change needs a higher revision");
        }
        Long logTime = entry.getLogTimeMicros();
        boolean waits = logTime != null && logTime > state.horizonMicros;
        long from = waits ? logTime : state.horizonMicros;
        for (long superseded : state.timeline.add(from, latest.next(body, settingsReader))) {
            state.waiting.remove(WaitingRoom.Place.ofSettings(superseded));
            state.counters.add(RegionCounters.Name.SETTINGS_SUPERSEDED);
        }
        if (waits) {
            state.waiting.add(WaitingRoom.Place.ofSettings(from), WaitingRoom.Waiting.of(entry));
        } else {
            settingsInForce(from, out);
        }
    }

    private void settingsInForce(long fromMicros, MachineOutputs out) {
        state.counters.add(RegionCounters.Name.SETTINGS);
        state.timeline.takeEffect(fromMicros);
        state.effect.settings(state.rules());
        arrivals.dropUnknownSensors(out);
        state.meetSensors();
    }

    // What acts on arrival.

    private void tick(TickBody tick, MachineOutputs out) {
        state.counters.add(RegionCounters.Name.TICKS);
        watch.tick(tick.getWallMicros(), out);
        out.heartbeat(Heartbeats.of(state, tick.getWallMicros()));
    }

    private void silent(SilentBody body, MachineOutputs out) {
        SensorOrder order = state.sensors.get(body.getSensor());
        SensorSettings settings = state.rules().sensor(body.getSensor());
        if (order != null) {
            order.watch().answered();
        }
        if (order == null || settings == null || !order.isHolding()) {
            state.counters.add(RegionCounters.Name.SILENT_ENTRIES_IGNORED);
            return;
        }
        state.counters.add(RegionCounters.Name.SENSORS_PASSED_OVER);
        double silentSeconds = body.getWhy() == PassedOverWhy.SILENT ? settings.silentSeconds() : 0;
        out.finding(findings.passedOver(body.getSensor(), body.getWhy(), state.horizonMicros, silentSeconds));
        arrivals.closed(order.passOver(), out);
    }

    private void end(MachineOutputs out) {
        for (SensorOrder order : state.sensors.values()) {
            arrivals.closed(order.end(), out);
        }
        state.ended = true;
    }

    // What waits.

    private void neighbourEntry(LogEntry entry) {
        Object body = entry.getBody();
        WaitingRoom.Place place;
        if (body instanceof IntroductionBody introduction) {
            place = place(entry, WaitingRoom.Kind.INTRODUCTION, introduction.getComponent().getObject());
        } else if (body instanceof HandoverBody handover) {
            place = place(entry, WaitingRoom.Kind.HANDOVER, handover.getComponent().getObject());
        } else if (body instanceof EndedBody ending) {
            place = place(entry, WaitingRoom.Kind.ENDED, ending.getComponent().getObject());
        } else {
            throw new IllegalArgumentException("the log of region " + state.region + " holds an entry that is none: "
                    + body);
        }
        if (!state.waiting.add(place, WaitingRoom.Waiting.of(entry))) {
            state.counters.add(RegionCounters.Name.NEIGHBOUR_ENTRIES_REPEATED);
        }
    }

    private WaitingRoom.Place place(LogEntry entry, WaitingRoom.Kind kind, String object) {
        if (entry.getLogTimeMicros() == null) {
            throw new IllegalArgumentException("the log of region " + state.region + " holds a neighbour's entry, "
                    + kind
                    + ", about " + object + " without a log time");
        }
        long when = Math.max(entry.getLogTimeMicros(), state.horizonMicros);
        return new WaitingRoom.Place(when, kind, entry.getSender(), object, 0);
    }

    /**
     * Lets all that the horizon has passed take effect. The horizon goes step by step, since settings may bring a
     * sensor that holds the region from there on; it never goes back.
     */
    private void advance(MachineOutputs out) {
        long limit = limit();
        while (!state.waiting.isEmpty() && isPassed(state.waiting.next().logTimeMicros(), limit)) {
            WaitingRoom.Place place = state.waiting.next();
            state.horizonMicros = Math.max(state.horizonMicros, place.logTimeMicros());
            takeEffect(place, state.waiting.poll(), out);
            limit = limit();
        }
        state.horizonMicros = limit;
        state.timeline.forgetBefore(limit);
    }

    private long limit() {
        return Math.max(state.horizonMicros, state.horizon().micros());
    }

    private static boolean isPassed(long logTimeMicros, long limit) {
        return logTimeMicros < limit || limit == Micros.AFTER_ALL;
    }

    private void takeEffect(WaitingRoom.Place place, WaitingRoom.Waiting what, MachineOutputs out) {
        switch (place.kind()) {
            case SETTINGS -> settingsInForce(place.logTimeMicros(), out);
            case SCAN -> scan(what.scan(), out);
            case INTRODUCTION, HANDOVER, ENDED -> state.counters.add(RegionCounters.Name.NEIGHBOUR_ENTRIES_PASSED);
        }
    }

    private void scan(ScanParts scan, MachineOutputs out) {
        if (state.rules().sensor(scan.sensor()) == null) {
            scan.entries().forEach(entry -> arrivals.unknownSensor(entry, scan.logTimeMicros(), out));
        } else if (!state.effect.apply(scan, state.rules(), findings, out)) {
            state.counters.add(RegionCounters.Name.SCANS_WITHOUT_POSITION);
            String sentence = "has no sensorPosition, and its sensor moves";
            arrivals.rejectAll(scan, RejectReason.NO_SENSOR_POSITION, sentence, out);
        } else {
            state.counters.add(RegionCounters.Name.SCANS_IN_EFFECT);
            state.counters.add(RegionCounters.Name.DETECTIONS_IN_EFFECT, scan.detections());
            missingBefore(scan, out);
        }
    }

    private void missingBefore(ScanParts scan, MachineOutputs out) {
        long missing = state.sensors.get(scan.sensor()).missingBefore(scan.number());
        if (missing > 0) {
            state.counters.add(RegionCounters.Name.SCANS_MISSING, missing);
            out.finding(findings.missing(scan.sensor(), scan.logTimeMicros(), scan.number(), missing));
        }
    }

    // Snapshots.

    /** The whole state, what waits included, exact to the bit: the restored machine goes on as this one would have. */
    public byte[] snapshot() {
        StateWriter out = new StateWriter();
        out.number(FORMAT_VERSION);
        state.write(out);
        return out.toBytes();
    }

    /**
     * The machine whose snapshot these bytes are.
     *
     * @param settingsReader reads the text of a settings entry, as the reader of the machine did
     * @throws IllegalArgumentException if the bytes are of another format version, or no whole snapshot
     * @throws IllegalStateException    if the state contradicts itself
     */
    public static RegionMachine restore(byte[] snapshot, Function<String, Site> settingsReader) {
        StateReader in = new StateReader(snapshot);
        int version = in.number();
        if (version != FORMAT_VERSION) {
            throw new IllegalArgumentException("a snapshot of a region has format version " + version
                    + ", and this program reads version " + FORMAT_VERSION + " only");
        }
        RegionMachine machine = new RegionMachine(RegionState.read(in, settingsReader), settingsReader);
        in.end();
        machine.check();
        return machine;
    }

    /** @throws IllegalStateException where the state contradicts itself */
    void check() {
        state.check();
    }

    // What it is about.

    public String region() {
        return state.region;
    }

    /** How many scans have taken effect. */
    public long sequence() {
        return state.timeline == null ? 0 : state.effect.sequence();
    }

    /** Log time of the last scan that took effect, if any has, microseconds since 1970-01-01T00:00:00Z. */
    public OptionalLong pictureMicros() {
        return state.timeline == null || state.effect.lastEffectMicros() == Micros.BEFORE_ALL
                ? OptionalLong.empty()
                : OptionalLong.of(state.effect.lastEffectMicros());
    }

    /** Revision of the settings in force, if there are any yet. */
    public OptionalInt settingsRevision() {
        return state.timeline == null ? OptionalInt.empty() : OptionalInt.of(state.rules().revision());
    }

    /** The settings in force, if there are any yet. */
    public Optional<SettingsBody> settings() {
        return state.timeline == null ? Optional.empty() : Optional.of(state.rules().body());
    }

    /** What the region has counted. */
    public RegionCounters counters() {
        return state.counters;
    }

    /** What its filter has counted, by name; empty before the first settings. */
    public Map<String, Long> filterCounters() {
        return state.timeline == null ? Collections.emptyMap() : state.effect.filter().counters().asMap();
    }
}
