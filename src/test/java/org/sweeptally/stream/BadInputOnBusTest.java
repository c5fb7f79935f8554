package org.sweeptally.stream;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.time.Duration;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.event.Detection;
import org.sweeptally.event.Finding;
import org.sweeptally.event.FindingKind;
import org.sweeptally.event.GeodeticFix;
import org.sweeptally.event.Noise;
import org.sweeptally.event.OffsetFix;
import org.sweeptally.event.Part;
import org.sweeptally.event.PolarFix;
import org.sweeptally.event.Reject;
import org.sweeptally.event.RejectReason;
import org.sweeptally.region.text.RecordJson;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/**
 * Whatever comes on the detections, what cannot be used is rejected with a sentence, and what is sound beside it is
 * used: the recording with bad input of every kind in it gives the same records and rejects as a dry run.
 */
class BadInputOnBusTest {

    private static final Duration PATIENCE = Duration.ofSeconds(90);
    private static final long HOUR_MICROS = 3_600_000_000L;

    @TempDir
    private Path folder;

    private final Site site = TestSite.twins();
    private final TopicNames names = TestBus.names(site);
    private final List<Part> recording = TestSite.recording(site);
    private final List<byte[]> values = new ArrayList<>();
    private final List<Expected> expected = new ArrayList<>();

    private record Expected(String what, RejectReason reason, String words) {}

    @Test
    void badInputOfEveryKindIsRejectedWithASentenceAndTheRestIsUsed() throws InterruptedException {
        spoil();
        Published dryRun = DryRunOf.values(site, values);
        TestBus.createTopics(site, 1, 2);
        TestBus.sendAll(names.detections(), 0, values);
        BusReader reader = new BusReader(names);
        try (Operator operator = new Operator(
                new OperatorSettings(site, names, TestBus.clients(), folder), said -> { })) {
            operator.start();
            Waiting.until(dryRun.counts() + " counts", PATIENCE, () -> reader.counts() >= dryRun.counts());
        }
        List<Reject> rejects = reader.all(names.rejects()).stream()
                .map(record -> Wire.decode(record.value(), Reject.class))
                .toList();
        for (Expected one : expected) {
            assertThat(rejects).as(one.what).anyMatch(reject -> reject.getReasons().stream().anyMatch(
                    reason -> reason.getReason() == one.reason && reason.getSentence().contains(one.words)));
        }
        assertThat(reader.published().all()).isEqualTo(dryRun.all());
        assertThat(rejects.stream().map(RecordJson::line).sorted().toList()).isEqualTo(dryRun.rejects());
        assertThat(reader.fold().all()).isEqualTo(dryRun.all());
        assertThat(reader.silences()).isZero();
        assertThat(reader.all(names.findings()).stream()
                .map(record -> Wire.decode(record.value(), Finding.class).getKind()))
                .contains(FindingKind.SENSOR_RESTART);
        System.out.println("BadInputOnBusTest: " + expected.size() + " kinds of bad input among " + values.size()
                + " records; " + dryRun.records() + " records and " + rejects.size()
                + " rejects compared with the dry run; 0 silences");
    }

    /** Bad input where its neighbours could suffer; the places are those of the recording. */
    private void spoil() {
        for (int i = 0; i < recording.size(); i++) {
            Part part = recording.get(i);
            restart(part, i);
            before(part, i);
            values.add(Wire.encode(part));
            after(part, i);
        }
    }

    /** The south shore counts its scans anew; towards the end the pilot house's clock is an hour ahead. */
    private static void restart(Part part, int place) {
        if (place >= 60 && part.getSensor().equals("south-shore")) {
            part.setScan(part.getScan() - 10);
        }
        if (place >= 110 && part.getSensor().equals("pilot-house")) {
            part.setScanTimeMicros(part.getScanTimeMicros() + HOUR_MICROS);
        }
    }

    private void before(Part part, int place) {
        switch (place) {
            case 3 -> add("nothing", RejectReason.NOT_A_PART, "", new byte[0]);
            case 6 -> add("text", RejectReason.NOT_A_PART, "", "what the gull saw".getBytes(StandardCharsets.UTF_8));
            case 9 -> add("a part cut off", RejectReason.NOT_A_PART, "",
                    Arrays.copyOf(Wire.encode(part), Wire.encode(part).length / 2));
            case 12 -> add("a record of another kind", RejectReason.NOT_A_PART, "",
                    Wire.encode(OperatorEntries.tick(1)));
            case 15 -> add("an unknown sensor", RejectReason.UNKNOWN_SENSOR, "lighthouse", stranger(part));
            case 20 -> detection(part, "latitude is NaN", new GeodeticFix(Double.NaN, -33.5));
            case 24 -> detection(part, "longitude is Infinity", new GeodeticFix(44.0, Double.POSITIVE_INFINITY));
            case 28 -> detection(part, "latitude is 91.0", new GeodeticFix(91.0, -33.5));
            case 32 -> detection(part, "eastMetres is -Infinity", new OffsetFix(Double.NEGATIVE_INFINITY, 0.0));
            case 36 -> polar(part);
            case 40 -> another(part, "the look lasts from", part.getScanTimeMicros() + 24 * HOUR_MICROS, null);
            case 44 -> another(part, "noise", null, new Noise(-1.0, 0.0, -1.0));
            case 48 -> flood(part);
            default -> { }
        }
    }

    private void after(Part part, int place) {
        switch (place) {
            case 70 -> values.add(Wire.encode(part)); // the same again, which is counted and no more
            case 74 -> add("other content", RejectReason.REPEAT_CONFLICT, "the first stands",
                    Wire.encode(emptied(part)));
            case 78 -> add("after its scan", RejectReason.SCAN_CLOSED, "after its scan was closed", second(part));
            case 82 -> add("an earlier scan", RejectReason.LATE, "", Wire.encode(earlier(part)));
            default -> { }
        }
    }

    private void add(String what, RejectReason reason, String words, byte[] value) {
        expected.add(new Expected(what, reason, words));
        values.add(value);
    }

    /** The same scan, without a promise. */
    private static Part copy(Part part) {
        Part copy = TestSite.at(part, part.getScanTimeMicros());
        copy.setScan(part.getScan());
        return copy;
    }

    private static byte[] stranger(Part part) {
        Part stranger = copy(part);
        stranger.setSensor("lighthouse");
        return Wire.encode(stranger);
    }

    private void detection(Part part, String words, Object fix) {
        put(part, RejectReason.BAD_FIELD, words, new Detection(0, "bad", null, fix, null, null, null, null));
    }

    private void polar(Part part) {
        put(part, RejectReason.WRONG_MEASUREMENT, "measures positions",
                new Detection(0, "bad", null, new PolarFix(2000.0, 180.0, null), null, null, null, null));
    }

    private void another(Part part, String words, Long timeMicros, Noise noise) {
        put(part, RejectReason.BAD_FIELD, words, new Detection(
                0, "bad", timeMicros, new GeodeticFix(44.0, -33.5), noise, null, null, null));
    }

    /** A bad detection before all others of a part; these keep their places after it. */
    private void put(Part part, RejectReason reason, String words, Detection bad) {
        expected.add(new Expected(words, reason, words));
        List<Detection> detections = new ArrayList<>(List.of(bad));
        detections.addAll(part.getDetections());
        for (int i = 0; i < detections.size(); i++) {
            detections.get(i).setIndex(i);
        }
        part.setDetections(detections);
    }

    private void flood(Part part) {
        List<Detection> detections = new ArrayList<>();
        for (int i = 0; i <= site.bounds().detectionsPerPart(); i++) {
            detections.add(new Detection(i, null, null, new GeodeticFix(44.0, -33.5), null, null, null, null));
        }
        part.setDetections(detections);
        expected.add(new Expected("a flood", RejectReason.TOO_LARGE, "are allowed in one part"));
    }

    private static Part emptied(Part part) {
        Part emptied = copy(part);
        emptied.setDetections(List.of());
        return emptied;
    }

    private static byte[] second(Part part) {
        Part second = copy(part);
        second.setPart(1);
        return Wire.encode(second);
    }

    private static Part earlier(Part part) {
        return TestSite.at(part, part.getScanTimeMicros() - 500_000);
    }

    /** The operator's own clock tells: nothing else comes after the recording. */
    @Test
    void aScanThatIsNeverFinishedIsRejectedWhenItsSensorFallsSilent() throws InterruptedException {
        Part last = recording.stream()
                .filter(part -> part.getSensor().equals("pilot-house"))
                .reduce((a, b) -> b)
                .orElseThrow();
        last.setClosesScan(false);
        last.setPromise(null);
        TestBus.createTopics(site, 1, 2);
        TestBus.publish(site, 0, recording);
        BusReader reader = new BusReader(names);
        try (Operator operator = new Operator(
                new OperatorSettings(site, names, TestBus.clients(), folder), said -> { })) {
            operator.start();
            Waiting.until("the reject", PATIENCE, () -> !reader.all(names.rejects()).isEmpty());
        }
        Published published = reader.published();
        assertThat(published.rejects()).isNotEmpty().allSatisfy(reject -> assertThat(reject)
                .contains("UNFINISHED", "of sensor pilot-house belongs to an unfinished scan"));
        assertThat(reader.silences()).isPositive();
        Published folded = reader.fold();
        assertThat(published.all()).isEqualTo(folded.all());
        assertThat(published.rejects()).isEqualTo(folded.rejects());
        System.out.println("BadInputOnBusTest: a scan never finished, " + reader.silences() + " silences; "
                + published.records() + " records and " + published.rejects().size()
                + " rejects compared with the machine over the log");
    }
}
