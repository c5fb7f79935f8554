package org.sweeptally.stream;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import java.util.TreeMap;
import java.util.function.UnaryOperator;
import org.apache.kafka.clients.admin.Admin;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.event.Detection;
import org.sweeptally.event.GeodeticFix;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Part;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.Reject;
import org.sweeptally.event.RejectReason;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/** What the operator says and does where the bus, its topics or what comes are not as they should be. */
class OperatorFaultsTest {

    private static final Duration PATIENCE = Duration.ofSeconds(60);

    @TempDir
    private Path folder;

    private final Site site = TestSite.twins();
    private final TopicNames names = TestBus.names(site);

    private Operator operator() {
        return new Operator(new OperatorSettings(site, names, TestBus.clients(), folder), said -> { });
    }

    private void create(UnaryOperator<TopicPlan> change) {
        try (Topics topics = new Topics(TestBus.clients())) {
            topics.create(TopicPlan.of(names, 2).stream().map(change).toList());
        }
    }

    private static TopicPlan with(TopicPlan plan, int partitions, String setting, String value) {
        TreeMap<String, String> settings = new TreeMap<>(plan.settings());
        settings.put(setting, value);
        return new TopicPlan(plan.name(), plan.purpose(), plan.ours(), partitions, settings);
    }

    private void assertRefuses(String... words) {
        try (Operator operator = operator()) {
            assertThatThrownBy(operator::start)
                    .isInstanceOf(OperatorStoppedException.class)
                    .satisfies(e -> assertThat(e.getMessage()).contains(words))
                    .satisfies(e -> System.out.println("OperatorFaultsTest: refused: " + e.getMessage()));
        }
    }

    @Test
    void missingTopicsAreNamed() {
        assertRefuses("topic " + names.detections() + " is missing: the command topics creates it",
                "topic " + names.tracks() + " is missing", "topic " + names.settings() + " is missing");
    }

    @Test
    void aWrongNumberOfPartitionsIsNamed() {
        create(plan -> plan.name().equals(names.counts())
                ? with(plan, 3, "retention.ms", "86400000") : plan);
        assertRefuses("topic " + names.counts() + " has 3 partitions, and 2 are needed");
    }

    @Test
    void aRegionLogThatIsKeptTooShortIsRefused() {
        create(plan -> plan.name().equals(names.regionLog()) ? with(plan, 2, "retention.ms", "60000") : plan);
        assertRefuses(names.regionLog() + " has a retention (retention.ms) of 60000 ms, and at least 3600000");
    }

    @Test
    void aRegionLogThatIsCompactedIsRefused() {
        create(plan -> plan.name().equals(names.regionLog()) ? with(plan, 2, "cleanup.policy", "compact") : plan);
        assertRefuses(names.regionLog() + " has cleanup.policy compact, and delete is needed");
    }

    @Test
    void anotherNumberOfPartitionsThanTheOperatorHasRunOnIsRefused() {
        create(plan -> plan);
        try (Topics topics = new Topics(TestBus.clients())) {
            topics.create(List.of(new TopicPlan(names.changelog("progress"), "", true, 5, new TreeMap<>())));
        }
        assertRefuses("has 2 partitions, and the operator has run on 5");
    }

    @Test
    void aBusThatIsNotThereIsSaidToBeThat() {
        ClientSettings nowhere = TestBus.clients("bootstrap.servers", "127.0.0.1:1", "default.api.timeout.ms", "2000",
                "request.timeout.ms", "1000");
        try (Operator operator = new Operator(new OperatorSettings(site, names, nowhere, folder), said -> { })) {
            assertThatThrownBy(operator::start)
                    .isInstanceOf(OperatorStoppedException.class)
                    .hasMessageContaining("the bus at 127.0.0.1:1 does not answer");
        }
    }

    @Test
    void whatWouldBreakThePromisesIsRefused() {
        assertThatThrownBy(() -> TestBus.clients("processing.guarantee", "at_least_once"))
                .isInstanceOf(SettingsRefusedException.class)
                .hasMessageContaining("only exactly_once_v2");
        assertThatThrownBy(() -> TestBus.clients("processing.exception.handler", "x.Y"))
                .isInstanceOf(OperatorStoppedException.class);
    }

    @Test
    void aPoisonRecordInTheRegionLogStopsWithOneSentenceAndNothingIsLost() throws InterruptedException {
        TestBus.createTopics(site, 1, 2);
        List<Part> parts = TestSite.recording(site);
        TestBus.publish(site, parts);
        BusReader reader = new BusReader(names);
        Published expected = DryRunOf.of(site, parts);
        try (Operator operator = operator()) {
            operator.start();
            Waiting.until("counts", PATIENCE, () -> reader.counts() >= expected.counts());
            TestBus.sendAll(names.regionLog(), 0, List.of("poison".getBytes(StandardCharsets.UTF_8)));
            assertThat(operator.await()).hasValueSatisfying(sentence ->
                    assertThat(sentence).matches("offset \\d+ of partition 0 of the region log holds a record without a"
                            + " key: nobody but the operator may write there; nothing after it was used"));
        }
        assertThat(reader.published().all()).isEqualTo(expected.all());
        try (Operator again = operator()) {
            again.start();
            assertThat(again.await()).isPresent();
        }
        assertThat(reader.published().all()).isEqualTo(expected.all());
        System.out.println("OperatorFaultsTest: 1 record without a key in the region log, 2 operators stopped; "
                + expected.records() + " records compared with the dry run");
    }

    /** Runs the recording through, and stops. */
    private void runOnce() throws InterruptedException {
        TestBus.createTopics(site, 1, 2);
        List<Part> parts = TestSite.recording(site);
        TestBus.publish(site, parts);
        BusReader reader = new BusReader(names);
        long expected = DryRunOf.of(site, parts).counts();
        try (Operator operator = operator()) {
            operator.start();
            Waiting.until("counts", PATIENCE, () -> reader.counts() >= expected);
        }
    }

    @Test
    void regionsWhoseStateWasDeletedDoNotBeginAnewInTheMiddleOfTheirLog() throws Exception {
        runOnce();
        long counts = new BusReader(names).counts();
        try (Admin admin = Admin.create(TestBus.clients().admin("test"))) {
            admin.deleteTopics(List.of(names.changelog("progress"), names.changelog("snapshots"))).all().get();
        }
        try (Operator again = new Operator(
                new OperatorSettings(site, names, TestBus.clients(), folder.resolve("new")), said -> { })) {
            again.start();
            assertThat(again.await()).hasValueSatisfying(sentence -> assertThat(sentence)
                    .contains("of the region log: group " + names.applicationId() + " has taken it in from offset 0")
                    .contains("the state made from it is not there (" + names.changelog("progress")));
        }
        assertThat(new BusReader(names).counts()).isEqualTo(counts);
    }

    @Test
    void aGroupWhoseOffsetsWereForgottenDoesNotReadAllPartsAgain() throws Exception {
        runOnce();
        try (Admin admin = Admin.create(TestBus.clients().admin("test"))) {
            admin.deleteConsumerGroups(List.of(names.applicationId())).all().get();
        }
        assertRefuses("group " + names.applicationId() + " has no offsets on partitions [0, 1] of "
                + names.regionLog(), "all parts would be read again");
    }

    /** A part as long as the bus takes; and one that it takes only because it is compressed. */
    @Test
    void partsNearTheBusesLimitAreLoggedAndThoseBeyondTheLogsAreRejected() throws InterruptedException {
        TestBus.createTopics(site, 1, 2);
        Part model = TestSite.recording(site).get(0);
        byte[] near = Wire.encode(longPart(model, 1_000_000));
        byte[] beyond = Wire.encode(longPart(TestSite.at(model, model.getScanTimeMicros() + 1_000_000), 6_000_000));
        TestBus.sendAll(names.detections(), 0, List.of(near, beyond),
                "producer.compression.type", "gzip", "producer.max.request.size", "33554432");
        BusReader reader = new BusReader(names);
        try (Operator operator = operator()) {
            operator.start();
            Waiting.until("rejects", PATIENCE, () -> reader.all(names.rejects()).size() >= 1);
        }
        List<PartBody> logged = reader.all(names.regionLog()).stream()
                .map(record -> Wire.decode(record.value(), LogEntry.class).getBody())
                .filter(PartBody.class::isInstance)
                .map(PartBody.class::cast)
                .toList();
        assertThat(logged).anySatisfy(body -> assertThat(Wire.encode(body).length).isBetween(900_000, 1_100_000));
        assertThat(logged).anySatisfy(body -> assertThat(body.getUnusable()).isTrue());
        assertThat(reader.all(names.rejects())).isNotEmpty().allSatisfy(record -> {
            Reject reject = Wire.decode(record.value(), Reject.class);
            assertThat(reject.getReasons().get(0).getReason()).isEqualTo(RejectReason.TOO_LARGE);
            assertThat(record.value().length).isLessThan(512 * 1024);
        });
        System.out.println("OperatorFaultsTest: parts of " + near.length + " and " + beyond.length + " bytes, "
                + logged.size() + " log entries, " + reader.all(names.rejects()).size() + " rejects");
    }

    /** Detections in the middle, which both sides hear, with long ids, so many bytes of them; its scan stays open. */
    private static Part longPart(Part model, int bytes) {
        List<Detection> detections = new ArrayList<>();
        for (int length = 0; length < bytes; length += 1_040) {
            detections.add(new Detection(detections.size(), "x".repeat(1_000), null, new GeodeticFix(44.0, -33.5), null,
                    null, null, null));
        }
        Part part = TestSite.at(model, model.getScanTimeMicros());
        part.setDetections(detections);
        part.setClosesScan(false);
        return part;
    }
}
