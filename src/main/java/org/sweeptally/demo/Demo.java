package org.sweeptally.demo;

import java.io.IOException;
import java.nio.file.Path;
import java.time.Duration;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.concurrent.atomic.AtomicReference;
import java.util.function.BooleanSupplier;
import org.apache.kafka.common.KafkaException;
import org.sweeptally.site.Site;
import org.sweeptally.stream.ClientSettings;
import org.sweeptally.stream.Operator;
import org.sweeptally.stream.OperatorSettings;
import org.sweeptally.stream.OperatorStoppedException;
import org.sweeptally.stream.TopicNames;
import org.sweeptally.stream.TopicPlan;
import org.sweeptally.stream.Topics;

/**
 * The whole thing on one machine: a Kafka broker of its own, the invented estuary that feeds it, the operator as it
 * runs anywhere, and a subscriber that reads what comes out and knows the truth.
 */
public final class Demo {

    /** How long a world lasts that ends. */
    public static final double USUAL_SECONDS = 480;

    /** 2031-05-01T04:00:00Z in microseconds. */
    static final long USUAL_BEGIN_MICROS = 1_935_374_400_000_000L;

    private static final int LOG_PARTITIONS = 2;
    private static final Duration STALLED = Duration.ofSeconds(90);
    private static final Duration BETWEEN_LINES = Duration.ofSeconds(5);
    private static final long KEPT_MICROS = 120_000_000L;

    private final Path folder;
    private final long seed;
    private final Listener listener;
    private final Site site = EstuaryWorld.site();
    private final TopicNames names = TopicNames.of(site);

    /** Hears what the demo does, from several threads. */
    public interface Listener {

        /** Something a person wants to know. */
        void says(String sentence);

        /** How far it is; comes often. */
        void progress(String text);
    }

    /** @param folder for broker and operator; it and everything in it is deleted in the end */
    public Demo(Path folder, long seed, Listener listener) {
        this.folder = folder;
        this.seed = seed;
        this.listener = listener;
    }

    /**
     * A world that ends, worked through as fast as the machine can; the same seed gives the same digest.
     *
     * @param goesOn asked several times a second; false breaks it off
     * @throws OperatorStoppedException if the operator or the bus fails
     */
    public DemoReport untilItsEnd(double worldSeconds, BooleanSupplier goesOn)
            throws IOException, InterruptedException {
        EstuaryWorld world = new EstuaryWorld(site, seed, USUAL_BEGIN_MICROS, worldSeconds);
        return onABus(clients -> {
            long parts = new WorldFeeder(world, clients, names.detections()).feedAll();
            listener.says(parts + " parts of " + Math.round(worldSeconds) + " seconds in the invented estuary are on "
                    + names.detections() + "; the operator begins");
            PictureTally tally = new PictureTally(site, names, world);
            EstuaryWorld.Scan last = world.lastScan();
            Intervals lines = new Intervals(BETWEEN_LINES);
            work(clients, tally, () -> {
                String how = Math.round(tally.pictureSeconds(USUAL_BEGIN_MICROS)) + " of " + Math.round(worldSeconds)
                        + " seconds: " + tally.numbers();
                listener.progress(how);
                if (lines.hasPassed()) {
                    listener.says(how);
                }
                if (!goesOn.getAsBoolean()) {
                    throw new OperatorStoppedException("stopped before the estuary's end");
                }
                return !tally.hasComeTo(last);
            });
            return tally.report(seed, USUAL_BEGIN_MICROS);
        });
    }

    /**
     * A world without end, in real time.
     *
     * @param goesOn asked several times a second; false ends it
     * @throws OperatorStoppedException if the operator or the bus fails
     */
    public DemoReport inRealTime(BooleanSupplier goesOn) throws IOException, InterruptedException {
        return onABus(clients -> {
            long beginMicros = nowMicros() + Duration.ofSeconds(3).toMillis() * 1000;
            EstuaryWorld world = new EstuaryWorld(site, seed, beginMicros, Double.POSITIVE_INFINITY);
            listener.says("the invented estuary sends to " + names.detections() + " at " + clients.bus()
                    + " until it is stopped");
            PictureTally tally = new PictureTally(site, names, world);
            WorldFeeder feeder = new WorldFeeder(world, clients, names.detections());
            Thread thread = feeder.feedInRealTime();
            Intervals lines = new Intervals(BETWEEN_LINES);
            try {
                work(clients, tally, () -> {
                    if (feeder.failure() != null) {
                        throw feeder.failure();
                    }
                    tally.letForget(KEPT_MICROS);
                    if (lines.hasPassed() && !tally.numbers().isEmpty()) {
                        listener.says(tally.numbers());
                    }
                    return goesOn.getAsBoolean();
                });
            } finally {
                thread.interrupt();
                thread.join();
            }
            return tally.report(seed, beginMicros);
        });
    }

    /** Something to do with a bus. */
    private interface OnABus {
        DemoReport run(ClientSettings clients) throws InterruptedException;
    }

    private DemoReport onABus(OnABus what) throws IOException, InterruptedException {
        listener.says("starting a Kafka broker in this process, its data in " + folder);
        try (EmbeddedBroker broker = EmbeddedBroker.start(folder)) {
            ClientSettings clients = new ClientSettings(Map.of(
                    "bootstrap.servers", broker.bootstrapServers(), "replication.factor", "1"));
            List<TopicPlan> plans = TopicPlan.of(names, LOG_PARTITIONS);
            try (Topics topics = new Topics(clients)) {
                topics.create(plans);
            }
            listener.says("the broker listens on " + broker.bootstrapServers() + " and has " + plans.size()
                    + " topics");
            return what.run(clients);
        } catch (KafkaException e) {
            throw new OperatorStoppedException("the embedded bus fails: " + e.getMessage(), e);
        }
    }

    /** Runs the operator, and reads what it publishes while the caller wants more of it. */
    private void work(ClientSettings clients, PictureTally tally, BooleanSupplier goesOn) throws InterruptedException {
        try (OutputSubscriber subscriber = new OutputSubscriber(clients, PictureTally.topics(names))) {
            try (Operator operator = operator(clients)) {
                operator.start();
                AtomicReference<String> failure = watched(operator);
                Intervals stalled = new Intervals(STALLED);
                while (goesOn.getAsBoolean()) {
                    if (subscriber.poll(tally::take) > 0) {
                        stalled.restart();
                    }
                    if (failure.get() != null) {
                        throw new OperatorStoppedException(failure.get());
                    }
                    if (stalled.hasPassed()) {
                        throw new OperatorStoppedException(
                                "the operator has written nothing for " + STALLED.toSeconds() + " s");
                    }
                }
            }
            subscriber.readToEnd(tally::take);
        }
    }

    private Operator operator(ClientSettings clients) {
        return new Operator(
                new OperatorSettings(site, names, clients, folder.resolve("operator")),
                sentence -> listener.says("operator: " + sentence));
    }

    /** Why the operator has stopped, once it has. */
    private static AtomicReference<String> watched(Operator operator) {
        AtomicReference<String> failure = new AtomicReference<>();
        Thread thread = new Thread(() -> {
            try {
                Optional<String> why = operator.await();
                failure.set(why.orElse("the operator has stopped by itself"));
            } catch (InterruptedException e) {
                Thread.currentThread().interrupt();
            }
        }, "operator-watch");
        thread.setDaemon(true);
        thread.start();
        return failure;
    }

    static long nowMicros() {
        return System.currentTimeMillis() * 1000;
    }
}
