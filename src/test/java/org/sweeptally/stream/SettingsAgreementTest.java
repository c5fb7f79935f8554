package org.sweeptally.stream;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.ArrayList;
import java.util.List;
import java.util.OptionalLong;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.Executors;
import java.util.concurrent.Future;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.sweeptally.event.LogEntry;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/** What is written, and what is refused, when a process begins with a site file. */
@Tag("long")
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

    /** Revision and region of every settings entry in the log. */
    private List<String> logged() {
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
