package org.sweeptally.stream;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.OptionalLong;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.Executors;
import java.util.concurrent.Future;
import org.apache.kafka.clients.producer.KafkaProducer;
import org.apache.kafka.clients.producer.ProducerRecord;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.Part;
import org.sweeptally.event.PartBody;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.region.intake.Times;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/** What is written, and what is refused, when a process begins with a site file. */
class SettingsAgreementTest {

    private final Site site = TestSite.twins();
    private final TopicNames names = TestBus.names(site);
    private final BusReader reader = new BusReader(names);

    @BeforeEach
    void topics() {
        TestBus.createTopics(site, 1, 2);
    }

    private List<Revision> agree(Site with) {
        RegionPartitions regions = new RegionPartitions(site.regions().stream().map(region -> region.name()).toList());
        return new SettingsAgreement(TestBus.clients(), names, regions, 2, said -> { }).agree(Revision.of(with));
    }

    /**
     * A transaction is committed when the bus has taken note of it; that its records can be read comes a little later,
     * and before the next one under its name may begin.
     */
    private void awaitWritten() {
        String name = names.settings() + "-writer";
        Map<String, Object> settings = TestBus.clients().producer(name);
        settings.put("transactional.id", name);
        try (KafkaProducer<byte[], byte[]> next = new KafkaProducer<>(settings)) {
            next.initTransactions();
        }
    }

    /** Revision and region of every settings entry in the log. */
    private List<String> logged() {
        awaitWritten();
        return reader.all(names.regionLog()).stream()
                .map(record -> RegionPartitions.region(record.key()) + " "
                        + ((SettingsBody) Wire.decode(record.value(), LogEntry.class).getBody()).getRevision())
                .sorted()
                .toList();
    }

    @Test
    void theFirstGoToEveryRegionOnceAndTheSameAgainGoNowhere() {
        assertThat(agree(site)).hasSize(1);
        assertThat(agree(site)).hasSize(1);
        assertThat(logged()).containsExactly("east-side 1", "west-side 1");
        assertThat(reader.all(names.settings())).hasSize(1);
    }

    @Test
    void aHigherRevisionIsWrittenAndTheLowerOneIsRefusedFromThenOn() {
        agree(site);
        assertThat(agree(TestSite.revised(site, 2, OptionalLong.empty(), 0.8))).hasSize(2);
        assertThat(logged()).containsExactly("east-side 1", "east-side 2", "west-side 1", "west-side 2");
        assertThatThrownBy(() -> agree(site))
                .isInstanceOf(SettingsRefusedException.class)
                .hasMessageContaining("revision 1, and revision 2 holds already");
        assertThat(logged()).hasSize(4);
    }

    @Test
    void theSameRevisionWithOtherContentIsRefused() {
        agree(site);
        assertThatThrownBy(() -> agree(TestSite.revised(site, 1, OptionalLong.empty(), 0.8)))
                .isInstanceOf(SettingsRefusedException.class)
                .hasMessageContaining("the same revision and other content");
        assertThat(logged()).hasSize(2);
    }

    @Test
    void settingsThatComeBehindTheirTimeAreRefused() {
        agree(site);
        Part part = TestSite.recording(site).get(0);
        long scan = part.getScanTimeMicros();
        PartBody body = new PartBody(part, 0, false, Wire.digest(part));
        TestBus.sendAll(names.regionLog(), 1, List.of(Wire.encode(OperatorEntries.part(0, 0, null, body)),
                Wire.encode(OperatorEntries.tick(scan + 60_000_000))));
        for (long from : new long[] {scan - 1, scan}) {
            assertThatThrownBy(() -> agree(TestSite.revised(site, 2, OptionalLong.of(from), 0.8)))
                    .isInstanceOf(SettingsRefusedException.class)
                    .hasMessageContaining("hold from " + Times.text(from))
                    .hasMessageContaining("a part of a scan of " + Times.text(scan))
                    .hasMessageContaining("ahead of their time");
        }
        assertThat(agree(TestSite.revised(site, 2, OptionalLong.of(scan + 1), 0.8))).hasSize(2);
    }

    @Test
    void aLogThatWasMadeAnewWithoutItsSettingsIsNamed() {
        try (KafkaProducer<byte[], byte[]> producer = new KafkaProducer<>(TestBus.clients().producer("earlier"))) {
            Revision revision = Revision.of(site);
            producer.send(new ProducerRecord<>(names.settings(), revision.key(), Wire.encode(revision.entry())));
        }
        assertThatThrownBy(() -> agree(site))
                .isInstanceOf(OperatorStoppedException.class)
                .hasMessageContaining("holds revision 1, and partition 0 of " + names.regionLog())
                .hasMessageContaining("has nothing in it");
    }

    @Test
    void otherRegionsAreRefusedWithASentenceThatSaysWhich() {
        agree(site);
        assertThatThrownBy(() -> agree(TestSite.withRegions(site, 2, site.regions().subList(0, 1))))
                .isInstanceOf(SettingsRefusedException.class)
                .hasMessageContaining("region west-side is missing")
                .hasMessageContaining("needs another name");
        assertThat(logged()).hasSize(2);
    }

    @Test
    void ofManyProcessesAtOnceOneWrites() throws InterruptedException, ExecutionException {
        ExecutorService processes = Executors.newFixedThreadPool(4);
        List<Future<List<Revision>>> agreed = new ArrayList<>();
        for (int i = 0; i < 4; i++) {
            agreed.add(processes.submit(() -> agree(site)));
        }
        for (Future<List<Revision>> one : agreed) {
            assertThat(one.get()).hasSize(1);
        }
        processes.shutdown();
        assertThat(logged()).containsExactly("east-side 1", "west-side 1");
    }
}
