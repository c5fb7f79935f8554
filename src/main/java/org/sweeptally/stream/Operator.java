package org.sweeptally.stream;

import java.time.Duration;
import java.util.List;
import java.util.Optional;
import java.util.concurrent.CountDownLatch;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.atomic.AtomicReference;
import java.util.function.Consumer;
import org.apache.kafka.streams.CloseOptions;
import org.apache.kafka.common.KafkaException;
import org.apache.kafka.streams.KafkaStreams;
import org.apache.kafka.streams.errors.StreamsUncaughtExceptionHandler.StreamThreadExceptionResponse;
import org.slf4j.Logger;
import org.slf4j.LoggerFactory;
import org.sweeptally.region.LocalSite;
import org.sweeptally.site.Site;

/**
 * The operator of a site beside a bus: checks the bus, agrees on the settings, and runs the topology until it is closed
 * or cannot go on.
 */
public final class Operator implements AutoCloseable {

    private static final Logger LOG = LoggerFactory.getLogger(Operator.class);

    private static final Duration CLOSING = Duration.ofSeconds(30);

    private final OperatorSettings settings;
    private final Consumer<String> says;
    private final LogReader tail;
    private final Failures failures = new Failures();
    private final CountDownLatch stopped = new CountDownLatch(1);
    private final CountDownLatch running = new CountDownLatch(1);
    private final AtomicReference<String> failure = new AtomicReference<>();
    private KafkaStreams streams;
    private KafkaReadingWatch readingWatch;
    private RetentionWatch retentionWatch;
    private SettingsWatch settingsWatch;
    private boolean closed;

    /** @param says takes what happens, a sentence each, from several threads */
    public Operator(OperatorSettings settings, Consumer<String> says) {
        this(settings, says, new KafkaLogReader(settings.clients(), settings.topics().regionLog()));
    }

    /** An operator that recovers from what a reader of the region log gives it. */
    Operator(OperatorSettings settings, Consumer<String> says, LogReader tail) {
        this.settings = settings;
        this.says = says;
        this.tail = tail;
    }

    /**
     * Checks, agrees and begins; returns when the threads have been started.
     *
     * @throws OperatorStoppedException if it cannot begin
     */
    public void start() {
        Site site = settings.site();
        TopicNames names = settings.topics();
        ClientSettings clients = settings.clients();
        Preflight.Found found = preflight();
        RegionPartitions regions = new RegionPartitions(site.regions().stream().map(region -> region.name()).toList());
        says.accept("site " + site.name() + " on the bus at " + clients.bus() + ": parts from " + names.detections()
                + " (" + count(found.detectionPartitions(), "partition") + "), "
                + count(regions.regions().size(), "region") + " on "
                + count(found.logPartitions(), "partition") + " of " + names.regionLog());
        List<Revision> known = new SettingsAgreement(clients, names, regions, found.logPartitions(), says)
                .agree(Revision.of(site));
        Revisions revisions = new Revisions(known);
        readingWatch = new KafkaReadingWatch(clients, names, found.detectionPartitions());
        retentionWatch = new RetentionWatch(clients, names.regionLog(), says);
        settingsWatch = new SettingsWatch(clients, names.settings(), revisions, says);
        OperatorTopology topology = new OperatorTopology(
                names,
                new RouterPlan(regions, revisions, readingWatch, found.appendTimes()),
                new RegionPlan(regions, found.logPartitions(), LocalSite::readSettings,
                        SnapshotSchedule.of(site, clients.transactionTimeoutMillis()),
                        tail,
                        new KafkaFreshStart(clients, names),
                        retentionWatch,
                        Duration.ofMillis(clients.transactionTimeoutMillis() / 2)),
                OperatorStores.onDisk(),
                says);
        run(topology);
    }

    private Preflight.Found preflight() {
        try (Topics topics = new Topics(settings.clients())) {
            Preflight.Found found = new Preflight(topics, settings.topics()).check();
            new GroupOffsets(settings.clients(), settings.topics()).check(topics, found.logPartitions());
            return found;
        }
    }

    private void run(OperatorTopology topology) {
        try {
            streams = new KafkaStreams(topology.get(), settings.clients()
                    .streams(settings.topics().applicationId(), settings.stateFolder().toString()));
            streams.setUncaughtExceptionHandler(this::uncaught);
            streams.setStateListener((now, before) -> state(now));
            readingWatch.start();
            retentionWatch.start();
            settingsWatch.start();
            streams.start();
        } catch (KafkaException | IllegalArgumentException e) {
            close();
            throw new OperatorStoppedException("the operator cannot begin: " + Failures.words(e), e);
        }
    }

    private void state(KafkaStreams.State now) {
        switch (now) {
            case RUNNING -> {
                says.accept("running");
                running.countDown();
            }
            case REBALANCING -> says.accept("sharing out the partitions");
            case ERROR, NOT_RUNNING -> stopped.countDown();
            default -> { }
        }
    }

    private StreamThreadExceptionResponse uncaught(Throwable thrown) {
        Optional<String> fatal = failures.fatal(thrown);
        if (fatal.isPresent()) {
            failure.compareAndSet(null, fatal.get());
            return StreamThreadExceptionResponse.SHUTDOWN_CLIENT;
        }
        LOG.warn("a thread of the operator failed and is replaced", thrown);
        says.accept("a thread failed and is replaced: " + Failures.words(thrown));
        return StreamThreadExceptionResponse.REPLACE_THREAD;
    }

    /** Waits until the threads run, at most for a time; whether they do. */
    public boolean awaitRunning(Duration atMost) throws InterruptedException {
        return running.await(atMost.toMillis(), TimeUnit.MILLISECONDS);
    }

    /** Waits until the operator has stopped; returns why, if it stopped by itself. */
    public Optional<String> await() throws InterruptedException {
        stopped.await();
        return failure();
    }

    /** Why it could not go on, or did not stop as it should; empty if nothing went wrong so far. */
    public Optional<String> failure() {
        return Optional.ofNullable(failure.get());
    }

    /** Stops after what is in work has been committed, and leaves its partitions to others at once; once is enough. */
    @Override
    public synchronized void close() {
        if (closed) {
            return;
        }
        closed = true;
        if (streams != null) {
            boolean clean = streams.close(CloseOptions
                    .groupMembershipOperation(CloseOptions.GroupMembershipOperation.LEAVE_GROUP)
                    .withTimeout(CLOSING));
            if (!clean) {
                failure.compareAndSet(null, "the operator did not stop within " + CLOSING.toSeconds() + " s");
            }
        }
        if (settingsWatch != null) {
            settingsWatch.close();
        }
        if (retentionWatch != null) {
            retentionWatch.close();
        }
        if (readingWatch != null) {
            readingWatch.close();
        }
        stopped.countDown();
    }

    private static String count(int number, String what) {
        return number + " " + what + (number == 1 ? "" : "s");
    }
}
