package org.sweeptally.stream;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.lang.reflect.Method;
import java.lang.reflect.Proxy;
import java.time.Duration;
import java.util.List;
import java.util.Optional;
import java.util.OptionalLong;
import java.util.Set;
import java.util.TreeMap;
import org.apache.kafka.clients.consumer.MockConsumer;
import org.apache.kafka.common.KafkaException;
import org.apache.kafka.common.errors.TimeoutException;
import org.apache.kafka.common.serialization.Serdes;
import org.apache.kafka.streams.errors.TaskCorruptedException;
import org.apache.kafka.streams.errors.TaskMigratedException;
import org.apache.kafka.streams.processor.Punctuator;
import org.apache.kafka.streams.processor.TaskId;
import org.apache.kafka.streams.processor.api.MockProcessorContext;
import org.apache.kafka.streams.processor.api.ProcessorContext;
import org.apache.kafka.streams.state.KeyValueStore;
import org.apache.kafka.streams.state.Stores;
import org.junit.jupiter.api.Test;
import org.sweeptally.region.LocalSite;
import org.sweeptally.site.Site;

/** What leaves a tick or a mark when the bus is in trouble: Streams would commit what it should abort. */
class PunctuationTest {

    private static final List<RuntimeException> TROUBLE = List.of(
            new TimeoutException("the bus is away"),
            new TaskMigratedException("fenced"),
            new TaskCorruptedException(Set.of(new TaskId(0, 0))),
            new IllegalStateException("no transaction is open"));

    private final Site site = TestSite.twins();
    private final RegionPartitions regions =
            new RegionPartitions(site.regions().stream().map(region -> region.name()).toList());

    /** A context to whose sinks nothing can be handed. */
    private record InTrouble(MockProcessorContext<byte[], byte[]> mock, RuntimeException trouble) {

        InTrouble(RuntimeException trouble) {
            this(new MockProcessorContext<>(), trouble);
        }

        /** The mock, whose own forward cannot be overridden for records of arrays. */
        @SuppressWarnings("unchecked")
        ProcessorContext<byte[], byte[]> context() {
            return (ProcessorContext<byte[], byte[]>) Proxy.newProxyInstance(
                    PunctuationTest.class.getClassLoader(), new Class<?>[] {ProcessorContext.class}, this::invoke);
        }

        private Object invoke(Object proxy, Method method, Object[] arguments) throws ReflectiveOperationException {
            if (method.getName().equals("forward")) {
                throw trouble;
            }
            return method.invoke(mock, arguments);
        }

        private void add(String name) {
            KeyValueStore<String, byte[]> store = Stores.keyValueStoreBuilder(
                            MapStore.over(name, new TreeMap<>()), Serdes.String(), Serdes.ByteArray())
                    .withLoggingDisabled()
                    .build();
            store.init(mock.getStateStoreContext(), store);
            mock.addStateStore(store);
        }

        private Punctuator punctuator() {
            return mock.scheduledPunctuators().get(0).getPunctuator();
        }
    }

    private static final class AllRead implements ReadingWatch, ReadingWatch.Reading {
        @Override
        public Reading begins(int partition) {
            return this;
        }

        @Override
        public int partitions() {
            return 1;
        }

        @Override
        public void routed(long offset) {}

        @Override
        public OptionalLong readToEndAt() {
            return OptionalLong.of(1);
        }

        @Override
        public void ends() {}
    }

    private static void assertNothingOfKafkaLeaves(InTrouble context) {
        assertThatThrownBy(() -> context.punctuator().punctuate(1))
                .isExactlyInstanceOf(IllegalStateException.class)
                .isNotInstanceOf(KafkaException.class)
                .hasMessageContaining("could not be written");
    }

    @Test
    void nothingOfKafkaLeavesATick() {
        for (RuntimeException trouble : TROUBLE) {
            InTrouble context = new InTrouble(trouble);
            context.add(RegionProcessor.SNAPSHOTS);
            context.add(RegionProcessor.PROGRESS);
            RegionPlan plan = new RegionPlan(regions, 1, LocalSite::readSettings, SnapshotSchedule.of(site, 10_000),
                    (partition, from, to, sink) -> 0, partition -> Optional.empty(), new RetentionWatch(
                            new MockConsumer<>("none"), "a-log", said -> { }),
                    Duration.ofSeconds(5));
            new RegionProcessor(plan, said -> { }).init(context.context());
            assertNothingOfKafkaLeaves(context);
        }
    }

    @Test
    void nothingOfKafkaLeavesAMark() {
        for (RuntimeException trouble : TROUBLE) {
            InTrouble context = new InTrouble(trouble);
            Revisions revisions = new Revisions(List.of(Revision.of(site)));
            new RouterProcessor(new RouterPlan(regions, revisions, new AllRead(), true)).init(context.context());
            assertNothingOfKafkaLeaves(context);
        }
    }

    /** Half the transaction timeout must be enough, also where all regions come to one thread. */
    @Test
    void allTailsTogetherTakeLessThanHalfTheTransactionTimeout() {
        long nanos = 0;
        for (int region = 0; region < site.regions().size(); region++) {
            nanos += SnapshotSchedule.of(site, 10_000).workNanos();
        }
        assertThat(nanos).isPositive().isLessThan(5_000_000_000L);
    }
}
